import { parseUnit, sigmaToCanonical, toCanonical } from "../quantity/unit";
import type { Body, BodyLookup, BodyValue } from "./body";
import { elementMassFraction, parseChemical } from "./chemical";
import { bodyOfOwn, type OwnBody } from "./ownBody";
import { bodyRows } from "./reference/bodies";
import { chondriteGroupRows } from "./reference/chondriteGroups";
import { phaseRows } from "./reference/phases";
import { solarRows } from "./reference/solar";

/** A source short enough for an id: "Wasson & Kallemeyn 1988" is WK88. */
const groupSources: readonly (readonly [begins: string, id: string])[] = [
  ["Wasson & Kallemeyn 1988", "WK88"],
  ["Lodders & Fegley 1998", "LF98"],
];
const solarSources: readonly (readonly [begins: RegExp, id: string])[] = [
  [/^Asplund et al\. 2009/u, "A09"],
  [/^Asplund(?:, Amarsi & Grevesse| et al\.) 2021/u, "A21"],
];

const all: ReadonlyMap<string, Body> = build();
const builtIn: readonly Body[] = [...all.values()];

function build(): Map<string, Body> {
  const made = new Map<string, { what: string; kind: Body["kind"]; formula?: string; values: BodyValue[] }>();
  const put = (id: string, what: string, kind: Body["kind"], value: BodyValue): void => {
    const body = made.get(id) ?? { what, kind, values: [] };
    body.values.push(value);
    made.set(id, body);
  };
  for (const row of bodyRows) {
    const note = row.uncertaintyKind === "as stated in the source" ? "The source does not say of which kind its uncertainty is; taken as 1σ." : "";
    put(
      row.body,
      row.kind,
      "composition",
      massValue(row.species, row.value, row.unit, row.uncertainty, row.source, row.checked, [row.note, note].filter(Boolean).join("; ")),
    );
  }
  for (const row of chondriteGroupRows) {
    const source = groupSources.find(([begins]) => row.source.startsWith(begins))?.[1] ?? "mean";
    for (const [species, value] of Object.entries(row.values))
      put(`${row.group}_${source}`, `${row.group} chondrites, group mean`, "composition", massValue(species, value, "wt%", null, row.source, row.checked, ""));
  }
  for (const row of solarRows) {
    const source = solarSources.find(([begins]) => begins.test(row.source))?.[1] ?? "dex";
    const sun = row.kind === "photosphere";
    const value: BodyValue = {
      species: row.element,
      value: row.dex,
      unit: "dex",
      sigma: row.uncertainty,
      canonical: row.dex,
      canonicalSigma: row.uncertainty,
      source: row.source,
      checked: row.checked,
      note: "",
    };
    put(`${sun ? "SUN" : "CI"}_${source}`, sun ? "solar photosphere" : "CI chondrite, as solar abundances", "dex", value);
  }
  const bodies = new Map<string, Body>();
  for (const [id, body] of made) bodies.set(id, { id, ...body, fromMemory: body.values.some((value) => isFromMemory(value.checked)) });
  for (const row of phaseRows) {
    const phase = phaseOfFormula(row.phase, row.formula);
    if (phase !== undefined) bodies.set(row.phase, phase);
  }
  return bodies;
}

function massValue(species: string, value: number, unitText: string, sigma: number | null, source: string, checked: string, note: string): BodyValue {
  const unit = parseUnit(unitText);
  if (unit?.dimension !== "mass fraction") throw new Error(`expected a unit of mass fraction in the reference tables, got "${unitText}"`);
  const canonicalSigma = sigma === null ? null : sigmaToCanonical(sigma, unit);
  return { species, value, unit: unit.symbol, sigma, canonical: toCanonical(value, unit), canonicalSigma, source, checked, note };
}

function phaseOfFormula(id: string, formula: string): Body | undefined {
  const chemical = parseChemical(formula);
  if (chemical === undefined) return undefined;
  const values = [...chemical.atoms.keys()].map((element): BodyValue => {
    const canonical = elementMassFraction(chemical, element);
    return {
      species: element,
      value: canonical,
      unit: "kg/kg",
      sigma: 0,
      canonical,
      canonicalSigma: 0,
      source: `stoichiometry of ${formula}; atomic weights CIAAW/IUPAC 2021`,
      checked: "computed",
      note: "",
    };
  });
  return { id, what: "phase", kind: "phase", formula, values, fromMemory: false };
}

/** Whether a value was written down from memory rather than read in a copy of its source. */
export function isFromMemory(checked: string): boolean {
  return checked.startsWith("from memory");
}

/** Every built-in reference composition, in the order of the reference tables; phases last. A page's own are in its look-up. */
export function listBodies(): readonly Body[] {
  return builtIn;
}

/** A body by its own id (`CI_PLJ14`, `SUN_A09`, `CV_WK88`, `forsterite`); undefined where there is none. */
export function lookupBody(id: string): Body | undefined {
  return all.get(id);
}

/** A phase by its name (`forsterite`, any capitals) or by a formula (`Mg1.8Fe0.2SiO4`); undefined where it is neither. */
export function lookupPhase(nameOrFormula: string): Body | undefined {
  const text = nameOrFormula.trim();
  const named = all.get(text) ?? all.get(text.toLowerCase());
  if (named?.kind === "phase") return named;
  return phaseOfFormula(text, text);
}

/**
 * Look-up with the aliases of a page and its own bodies: an alias first, then an id. An alias leads to an id, never to another
 * alias. A built-in id means the built-in body whatever a page carries.
 *
 * @param aliases alias → id of a compilation, as the page document has it
 * @param own the page's own bodies by id; one with a fault is no body
 */
export function bodyLookup(aliases: Readonly<Record<string, string>>, own: Readonly<Record<string, OwnBody>> = {}): BodyLookup {
  // In the order of their ids, whoever put them on the page first.
  const mine = Object.keys(own)
    .sort()
    .flatMap((id) => (own[id] === undefined || all.has(id) ? [] : (bodyOfOwn(id, own[id]) ?? [])));
  const byId = new Map(mine.map((body) => [body.id, body]));
  const find = (aliasOrId: string): Body | undefined => {
    const id = (Object.hasOwn(aliases, aliasOrId) ? aliases[aliasOrId] : undefined) ?? aliasOrId;
    return all.get(id) ?? byId.get(id);
  };
  return Object.assign(find, { all: mine.length === 0 ? builtIn : [...builtIn, ...mine] });
}
