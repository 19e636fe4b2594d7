import { parseUnit, type Unit } from "../quantity/unit";
import type { DecimalSign } from "./raw";

/** What the text of one cell of a quantity says. σ is as written, of whatever kind the column declares. */
export type ReadCell =
  | { readonly kind: "value"; readonly value: number; readonly sigma: number | null; readonly relative: boolean; readonly unit?: Unit; readonly mark: string }
  | { readonly kind: "missing" }
  | { readonly kind: "below"; readonly limit: number | null; readonly unit?: Unit }
  | { readonly kind: "unreadable"; readonly code: string; readonly text: string };

/** Characters that a number with its uncertainty, unit and marks may have. */
const MAX_CHARACTERS = 200;
const missing: ReadCell = { kind: "missing" };

/** Texts that mean "no number here", lower-cased without spaces. */
const missingTexts: ReadonlySet<string> = new Set(
  "- -- --- – — − . .. ... … / n.d. n.d nd n.d.a. n.a. n.a na n/a #n/a n.m. n.m nm n.r. n.r nr nan null none missing notdetermined notanalysed notanalyzed notmeasured notreported notavailable k.a. k.a".split(
    " ",
  ),
);
const belowTexts: ReadonlySet<string> = new Set(
  "b.d.l. b.d.l bdl b.d. b.d bd bld b.l.d. b.l.d lod <lod <l.o.d. <loq loq <dl <d.l. <bdl <d.l <mdl mdl belowdetection belowdetectionlimit belowlod belowlimit udl u.d.l. <bd <b.d. tr. tr trace traces n.n. <".split(
    " ",
  ),
);
const spreadsheetErrors = /^#(?:DIV\/0!|VALUE!|REF!|NAME\?|NUM!|NULL!|SPILL!|CALC!)$/iu;

/**
 * Reads a cell of a quantity: a number, `45.0 ± 0.4`, `45.0(4)`, `<0.05`, `b.d.l.`, `n.d.`, `-`, blank. Numbers are read
 * strictly: what could mean two numbers is refused with a sentence, never guessed.
 */
export function readCell(text: string, decimal: DecimalSign): ReadCell {
  // Most cells are plain numbers.
  if (decimal === "." && /^-?\d+(?:\.\d+)?$/u.test(text)) return { kind: "value", value: Number(text), sigma: null, relative: false, mark: "" };
  const trimmed = text.trim();
  if (trimmed === "") return missing;
  // No number is as long, and patterns take their time over a page of text.
  if (trimmed.length > MAX_CHARACTERS)
    return unreadable(
      "cell-not-a-number",
      `"${short(trimmed)}" is not a number: it has ${trimmed.length} characters. Amend it, or give the column the role text.`,
    );
  const lower = trimmed.toLowerCase().replace(/\s+/gu, "");
  if (missingTexts.has(lower)) return missing;
  if (belowTexts.has(lower)) return { kind: "below", limit: null };
  if (spreadsheetErrors.test(trimmed))
    return unreadable(
      "cell-spreadsheet-error",
      `"${short(trimmed)}" is a spreadsheet's error, not a number. Amend it with the value, or with nothing where there is none.`,
    );
  const plain = raisedPower(trimmed)
    .replace(/[−‒–]/gu, "-")
    .replace(/\u00a0|\u202f|\u2009/gu, " ");
  const below = /^(?:<=|<|≤|≪|‹|b\.?d\.?l\.?\s*\(?\s*<?)\s*([^)]+?)\)?$/iu.exec(plain);
  if (below !== null && /^(?:<|≤|‹|≪|b)/iu.test(plain)) return readBelow(below[1] ?? "", trimmed, decimal);
  if (/^(?:>|≥|>=)/u.test(plain))
    return unreadable("cell-above", `"${short(trimmed)}" says only that the value is above a limit. Amend it with a value, or with nothing.`);
  return readValue(plain, trimmed, decimal);
}

const raisedDigits = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** `1.5×10⁻³` as `1.5×10^-3`, before the raised digits could be taken for footnotes. */
function raisedPower(text: string): string {
  return text.replace(/([x×·*]\s*10)([⁺⁻]?)([⁰¹²³⁴⁵⁶⁷⁸⁹]+)/gu, (_, ten: string, sign: string, digits: string) => {
    const power = [...digits].map((digit) => raisedDigits.indexOf(digit)).join("");
    return `${ten}^${sign === "⁻" ? "-" : ""}${power}`;
  });
}

function readBelow(limitText: string, whole: string, decimal: DecimalSign): ReadCell {
  const limit = readValue(limitText.trim(), whole, decimal);
  if (limit.kind === "unreadable") return limit;
  if (limit.kind !== "value" || limit.value <= 0)
    return unreadable("cell-limit", `"${short(whole)}" gives a detection limit that is not a number above zero. Amend it with the limit, such as <0.05.`);
  return { kind: "below", limit: limit.value, ...(limit.unit === undefined ? {} : { unit: limit.unit }) };
}

/** Number, then in any of its forms the uncertainty, a unit, and footnote marks. */
const valuePattern =
  /^(?<number>[+-]?[\d.,'’ ]*\d[.,]?)(?:\s*\((?<digits>\d+(?:[.,]\d+)?)\))?(?<exponent>(?:[eE]|\s*[x×·*]\s*10\^?)[+-]?\d+)?(?:\s*(?:±|\+\/-|\+-|\+\/−)\s*(?<sigma>[\d.,]+(?:[eE][+-]?\d+)?)\s*(?<percent>%(?!\S))?)?(?<rest>.*)$/u;
/** Footnotes; the power of ten in `1.5 × 10^3` is none. */
const markPattern = /(?:\s*(?:[*†‡§¶#‖⁺ᵃᵇᶜᵈᵉᶠᵍ¹²³⁴⁵⁶⁷⁸⁹]|(?<![x×·*]\s*10)\^[a-z0-9]|\[[a-z0-9]{1,2}\]|\(\s*[a-z]\s*\)))+$/u;

function readValue(text: string, whole: string, decimal: DecimalSign): ReadCell {
  const mark = markPattern.exec(text)?.[0] ?? "";
  const match = valuePattern.exec(mark === "" ? text : text.slice(0, text.length - mark.length));
  const groups = match?.groups;
  if (groups === undefined) return unreadable("cell-not-a-number", `"${short(whole)}" is not a number. Amend it, or give the column the role text.`);
  const number = readNumber(groups["number"] ?? "", groups["exponent"] ?? "", decimal, whole);
  if (typeof number !== "number") return number;
  const rest = (groups["rest"] ?? "").trim();
  const unit = rest === "" ? undefined : parseUnit(rest);
  if (rest !== "" && unit === undefined)
    return unreadable(
      "cell-not-a-number",
      `"${short(whole)}" goes on after its number with "${short(rest)}", which is no unit and no uncertainty. Amend it with the number alone.`,
    );
  const digits = groups["digits"];
  const sigmaText = groups["sigma"];
  if (digits !== undefined && sigmaText !== undefined)
    return unreadable("cell-two-sigmas", `"${short(whole)}" gives its uncertainty twice. Amend it with one of them.`);
  let sigma: number | null = null;
  if (digits !== undefined) sigma = inLastPlaces(groups["number"] ?? "", digits, groups["exponent"] ?? "", decimal);
  if (sigmaText !== undefined) {
    const read = readNumber(sigmaText, "", decimal, whole);
    if (typeof read !== "number") return read;
    sigma = read;
  }
  return { kind: "value", value: number, sigma, relative: groups["percent"] !== undefined, ...(unit === undefined ? {} : { unit }), mark: mark.trim() };
}

/** A number in strict spelling, or why it is none. */
function readNumber(text: string, exponent: string, decimal: DecimalSign, whole: string): number | ReadCell {
  const spelt = text.trim();
  if (/['’ ]/u.test(spelt))
    return unreadable(
      "cell-grouped",
      `"${short(whole)}" parts its digits with a space or an apostrophe. Amend it with the digits alone, such as ${spelt.replace(/['’ ]/gu, "")}.`,
    );
  const other = decimal === "." ? "," : ".";
  if (spelt.includes(other)) return ambiguous(spelt, decimal, whole);
  const pointed = decimal === "," ? spelt.replace(",", ".") : spelt;
  if (!/^[+-]?(?:\d+\.?\d*|\.\d+)$/u.test(pointed))
    return unreadable("cell-not-a-number", `"${short(whole)}" is not a number. Amend it, or give the column the role text.`);
  const power = exponent.replace(/^\s*(?:[eE]|[x×·*]\s*10\^?)/u, "");
  const value = Number(power === "" ? pointed : `${pointed}e${power}`);
  return Number.isFinite(value) ? value : unreadable("cell-not-a-number", `"${short(whole)}" is larger than any number that can be held. Amend it.`);
}

function ambiguous(spelt: string, decimal: DecimalSign, whole: string): ReadCell {
  if (/^[+-]?\d{1,3},\d{3}$/u.test(spelt) && decimal === ".")
    return unreadable(
      "cell-ambiguous",
      `"${short(whole)}" may mean ${spelt.replace(",", "")} or ${spelt.replace(",", ".")}. Amend it with the number without a comma.`,
    );
  const sign = decimal === "." ? "point" : "comma";
  return unreadable(
    "cell-ambiguous",
    `"${short(whole)}" does not fit the rest of the file, where the decimal sign is a ${sign}. Amend it with a number written that way and without signs between thousands.`,
  );
}

/** `45.02(13)` is ± 0.13; `45.0(1.2)` is ± 1.2. */
function inLastPlaces(number: string, digits: string, exponent: string, decimal: DecimalSign): number {
  const power = exponent.replace(/^\s*(?:[eE]|[x×·*]\s*10\^?)/u, "");
  const scale = power === "" ? 0 : Number(power);
  if (/[.,]/u.test(digits)) return Number(`${digits.replace(",", ".")}e${scale}`);
  const places = number.trim().split(decimal)[1]?.length ?? 0;
  return Number(`${digits}e${scale - places}`);
}

function unreadable(code: string, text: string): ReadCell {
  return { kind: "unreadable", code, text };
}

function short(text: string): string {
  return text.length > 40 ? `${text.slice(0, 39)}…` : text;
}
