import type { Basis, Role, UncertaintyKind } from "../page/schema";
import { parseUnit, type DimensionName, type Unit } from "../quantity/unit";
import { isElement, parseSpecies } from "../species";
import { deviationPrefixes, namedQuantities, plainWords, roleHeaders, uncertaintyPatterns } from "./headerRules";

/** What a header says by itself, before anyone looks at the column below it. */
export interface ReadHeader {
  readonly role: Role | undefined;
  /** Canonical species, where the header names one. */
  readonly species?: string;
  /** Name for formulas, where the header gives one that is not the species. */
  readonly name?: string;
  readonly unit?: Unit;
  /** The unit as spelt: `%` may be a relative uncertainty. */
  readonly unitText?: string;
  readonly basis?: Basis;
  /** Kind of the uncertainty; for a quantity, of uncertainties written inside its cells. */
  readonly kind?: UncertaintyKind;
  /** False where the header says "error" and not of which kind. */
  readonly kindSaid?: boolean;
  /** Why, in words. */
  readonly reason: string;
}

const roles: ReadonlyMap<string, Role> = new Map(roleHeaders.flatMap(([role, headers]) => headers.map((header): [string, Role] => [header, role])));
const UNIT_BRACKET = /[([{]\s*([^()[\]{}]*(?:\([^()]*\))?[^()[\]{}]*)\s*[)\]}]/gu;

/**
 * Reads a header as laboratories write them: `SiO2 (wt%)`, `MGO_WT_PCT`, `2s SiO2`, `Mg [µg/g] 2SE`, `FeO*`, `Al/Si (atomic)`,
 * `δ17O`, `RSD%`. Undefined role means that nothing in it is known.
 */
export function readHeader(header: string): ReadHeader {
  const text = tidy(header);
  const role = roles.get(squeeze(text)) ?? roles.get(squeeze(text.replace(/\(.*\)$/u, "")));
  if (role !== undefined)
    return {
      role,
      reason: `"${header}" is a usual header for ${role === "sample" ? "sample names" : role === "class" ? "classes" : role === "reference" ? "references" : "text"}`,
    };
  const uncertainty = readUncertainty(text);
  if (uncertainty !== undefined) return uncertainty;
  return readQuantity(text, header) ?? { role: undefined, reason: `"${header}" is not a header we know` };
}

function tidy(header: string): string {
  return (
    header
      .replace(/<\/?(?:sub|sup)>/giu, "")
      .replace(/[₀-₉]/gu, (digit) => String(digit.charCodeAt(0) - 0x2080))
      .replace(/_\{?(\d)\}?/gu, (whole, digit: string, at: number, all: string) =>
        /[A-Za-z]$/u.test(all.slice(0, at)) && parseSpecies(all.replace(/_\{?(\d)\}?/gu, "$1")) !== undefined ? digit : whole,
      )
      .replace(/[μ]/gu, "µ")
      // A capital sigma is a sum; in patterns that ignore case it would be a σ.
      .replace(/Σ/gu, "∑")
      .replace(/\s+/gu, " ")
      .trim()
  );
}

function squeeze(text: string): string {
  return text.toLowerCase().replace(/[\s._:-]+/gu, "");
}

function readUncertainty(text: string): ReadHeader | undefined {
  for (const [pattern, kind, said] of uncertaintyPatterns) {
    const match = pattern.exec(text);
    if (match === null) continue;
    const rest = `${text.slice(0, match.index)} ${text.slice(match.index + match[0].length)}`
      .replace(/(?:^|\s)(?:of|on|in|for|the|abs|absolute|analytical|internal|mean)(?=\s|$)/giu, " ")
      .trim();
    const emptied = rest.replace(/[()[\]{},;:_±-]|\+\/-/gu, " ").trim();
    if (emptied === "") return { role: "uncertainty", kind, kindSaid: said, reason: reasonOf(kind, said, "the column before it") };
    const bare = rest.replace(/^[(\s]*u\(|^[\s,;:_±-]+|[\s,;:_±-]+$|^\((.*)\)$/gu, "$1").trim();
    const quantity = readQuantity(bare.replace(/\(\s*[,;]?\s*\)|\[\s*\]/gu, "").trim(), text) ?? readQuantity(bare.replace(/[()]/gu, "").trim(), text);
    if (quantity?.role === "quantity") {
      // `SiO2 (wt%, ±2σ)` heads values that carry their uncertainty inside the cell.
      if (
        /(?:±|\+\/-)\s*(?:[12]\s*(?:σ|s|sd|se|sigma)|95)/iu.test(text) &&
        /[A-Za-z0-9]\s*[([,]?[^([]*(?:±|\+\/-)/u.test(text) &&
        !/^(?:±|\+\/-)/u.test(text) &&
        inCells(text)
      )
        return { ...quantity, kind, kindSaid: said, reason: `${quantity.reason}; uncertainties inside its cells are ${kind}` };
      const { name: _name, ...rest } = quantity;
      return { ...rest, role: "uncertainty", kind, kindSaid: said, reason: reasonOf(kind, said, quantity.species ?? quantity.name ?? "a column") };
    }
    const unitOnly = unitOf(bare);
    if (unitOnly !== undefined)
      return { role: "uncertainty", kind, kindSaid: said, unit: unitOnly.unit, unitText: unitOnly.text, reason: reasonOf(kind, said, "the column before it") };
    if (said && /^(?:σ|[12]\s*(?:σ|s|sd|se|sigma))/iu.test(text))
      return { role: "uncertainty", kind, kindSaid: said, name: bare, reason: reasonOf(kind, said, bare) };
  }
  return undefined;
}

/** Whether a header has a species first and its ± behind, within the bracket of its unit. */
function inCells(text: string): boolean {
  return /^[^([]+[([][^)\]]*[,;]\s*(?:±|\+\/-)/u.test(text) || /^[^±]+(?:wt|µg|ug|ppm|%|mg)[^±]*\)?\s*±/iu.test(text);
}

function reasonOf(kind: UncertaintyKind, said: boolean, of: string): string {
  return said ? `${kind} of ${of}` : `an uncertainty of ${of}; the header does not say of which kind, so it is read as ${kind}: please check`;
}

function readQuantity(text: string, header: string): ReadHeader | undefined {
  for (const [pattern, unit, word] of deviationPrefixes) {
    const match = pattern.exec(text.replace(UNIT_BRACKET, "").trim());
    if (match !== null)
      return {
        role: "quantity",
        name: `${word}${match[1]?.replace("/", "_") ?? ""}${match[2] ?? ""}`,
        unit: parseUnit(unit) as Unit,
        unitText: unit,
        reason: `isotopic deviation in ${unit}`,
      };
  }
  const whole = speciesOf(text);
  if (whole !== undefined) return { role: "quantity", species: whole, reason: `species ${whole}` };
  const named = namedOf(text);
  if (named !== undefined) return { role: "quantity", name: named, reason: named };
  for (const { rest, unit, unitText } of withUnits(text)) {
    const ratio = ratioOf(rest);
    const name = namedOf(rest);
    if (name !== undefined) return { role: "quantity", name, unit, unitText, reason: `${name} in ${unit.symbol}` };
    const species = speciesOf(rest);
    if (species !== undefined && chemicalDimensions.has(unit.dimension))
      return { role: "quantity", species, unit, unitText, reason: `species ${species} in ${unit.symbol}` };
    if (ratio !== undefined && unit.dimension === "dimensionless") return { ...ratio, unit, unitText };
    const physical = !chemicalDimensions.has(unit.dimension) && unit.dimension !== "dimensionless";
    if (physical && rest !== "") return { role: "quantity", name: rest, unit, unitText, reason: `a quantity in ${unit.symbol}` };
  }
  return ratioOf(text, header);
}

/** Dimensions in which an amount of a species is given; a P in GPa is no phosphorus. */
const chemicalDimensions: ReadonlySet<DimensionName> = new Set(["mass fraction", "amount fraction", "amount per mass", "atoms per million Si", "dex"]);

/** Every way to part a header into a unit and the rest. */
function* withUnits(text: string): Generator<{ readonly rest: string; readonly unit: Unit; readonly unitText: string }> {
  for (const match of text.matchAll(UNIT_BRACKET)) {
    const found = unitOf(match[1] ?? "", true);
    if (found !== undefined)
      yield { rest: `${text.slice(0, match.index)} ${text.slice(match.index + match[0].length)}`.trim(), unit: found.unit, unitText: found.text };
  }
  const separators = [...text.matchAll(/[\s,;:_/]+|-(?=wt|mass|pp[mb]|[µun]g|%)|(?=%)|(?<=%)/giu)].map((m) => [m.index, m.index + m[0].length] as const);
  for (const [end, start] of separators) {
    const behind = unitOf(text.slice(start));
    if (behind !== undefined && end > 0) yield { rest: text.slice(0, end).trim(), unit: behind.unit, unitText: behind.text };
  }
  for (const [end, start] of separators.toReversed()) {
    const before = unitOf(text.slice(0, end));
    if (before !== undefined && start < text.length) yield { rest: text.slice(start).trim(), unit: before.unit, unitText: before.text };
  }
}

function unitOf(text: string, bracketed = false): { readonly unit: Unit; readonly text: string } | undefined {
  const opened = text.replace(/^[\s,;([]*(?:in\s+)?/iu, "");
  const trimmed = opened.replace(/[\s,;)\]]+$/gu, "");
  const spelt = trimmed.replace(/_/gu, "");
  // A lone K is potassium; in brackets, which were taken off before, it is kelvin. A number is no unit here.
  if (spelt === "" || spelt === "-" || /^\d+$/u.test(spelt) || spelt === "µ" || (spelt === "K" && !bracketed)) return undefined;
  const parts = spelt.split(/\s*[,;]\s*/u);
  // `ug_g` is µg/g, and the bracket of `% (m/m)` belongs to the unit.
  for (const part of [spelt, trimmed.replace(/_/gu, "/"), opened.trim(), ...(parts.length > 1 ? parts : [])]) {
    const unit = parseUnit(part);
    if (unit !== undefined) return { unit, text: part };
  }
  return undefined;
}

function speciesOf(text: string): string | undefined {
  const words = text.split(/[\s,;:_]+/u).filter((word) => word !== "" && (isElement(word) || !plainWords.has(word.toLowerCase())));
  for (const spelt of [text, words.join(" "), words.join(" ").replace(/[()[\]]/gu, " ")]) {
    // Exports in capitals mean cobalt; the proposal asks people to check.
    if (spelt.trim() === "CO") return "Co";
    const species = spelt.trim() === "" ? undefined : parseSpecies(spelt);
    const counted = species !== undefined && species.chemical.atoms.size === 1 && species.chemical.formula !== species.element;
    if (species !== undefined && !counted) return species.name;
    // Mass spectrometry names the isotope it counted: Sr88, 88Sr, Ca43.
    const isotope = /^(?:(\d{1,3})\s*([A-Z][a-z]?)|([A-Z][a-z]?)\s*(\d{2,3}))$/u.exec(spelt.trim());
    const element = isotope?.[2] ?? isotope?.[3];
    if (element !== undefined && isElement(element)) return element;
  }
  return undefined;
}

function namedOf(text: string): string | undefined {
  const plain = text.replace(/[()[\]]\s*$/u, "").trim();
  return (namedQuantities.find(([pattern]) => pattern.test(text)) ?? namedQuantities.find(([pattern]) => pattern.test(plain)))?.[1];
}

const atomWords = /\b(?:atomic|atoms?|at\.?|mol(?:ar|e|es|\.)?)\b/iu;
const massWords = /\b(?:mass|weight|wt\.?|by weight|m\/m)\b/iu;

/** `Mg/Si`, `Al/Si (atomic)`, `87Sr/86Sr`: a ready-made ratio; without a word its basis stays open. */
function ratioOf(text: string, header = text): ReadHeader | undefined {
  const match = /^\(?(\d{0,3}[A-Z][A-Za-z0-9]{0,7})\s*\/\s*(\d{0,3}[A-Z][A-Za-z0-9]{0,7})\)?(.*)$/u.exec(text);
  if (match === null) return undefined;
  const [above, below, rest] = [match[1] ?? "", match[2] ?? "", match[3] ?? ""];
  const isotopes = /^\d/u.test(above) && /^\d/u.test(below);
  if (!isotopes && (parseSpecies(above) === undefined || parseSpecies(below) === undefined)) return undefined;
  const basis: Basis | undefined = isotopes || atomWords.test(rest) ? "atoms" : massWords.test(rest) ? "mass" : undefined;
  const said = basis === undefined ? `the header does not say whether by mass or by atoms` : `by ${basis}`;
  return {
    role: "quantity",
    name: `${isotopes ? "r" : ""}${above}_${below}`,
    ...(basis === undefined ? {} : { basis }),
    unit: parseUnit("1") as Unit,
    unitText: "1",
    reason: `the ratio ${above}/${below} (${header}); ${said}`,
  };
}
