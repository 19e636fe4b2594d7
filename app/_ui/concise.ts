/**
 * Numbers as people read them: a value with its 1σ in concise form, 1.086(12), or with ±, a person's own setting.
 *
 * Everything is independent of locale: the decimal sign is a point, the minus sign U+2212, and thin spaces (U+2009) stand
 * around ± and before units, as ISO 80000-1 has it.
 */
export type UncertaintyForm = "concise" | "plus-minus";

export const THIN_SPACE = "\u2009";
const MINUS = "\u2212";
const superscripts = "⁰¹²³⁴⁵⁶⁷⁸⁹";
/** More decimals than this mean nothing in a measurement and only fill the screen. */
const MOST_DECIMALS = 12;

/** What a value with its σ is written as, in parts, so that a table can set the σ in second ink. */
export interface WrittenValue {
  /** "1.086" */
  readonly value: string;
  /** "(12)" or "\u2009±\u20090.012"; "" where no σ is known and that goes without saying. */
  readonly sigma: string;
  /** "\u2009×\u200910⁻⁵" for numbers far from one. */
  readonly power: string;
}

export interface WritingOptions {
  readonly form?: UncertaintyForm;
  /** Decimals to show the value with, for columns that keep the source's own; more are used where the σ would round to 0. */
  readonly decimals?: number;
  /** What stands for a σ that is not known: "(?)" by default, "" in a column that has none at all. */
  readonly unknown?: string;
}

/** Digits of a σ worth writing: two where they are 35 or less, else one (the rule of the Particle Data Group). */
function sigmaDigits(sigma: number): { digits: 1 | 2; exponent: number } {
  const [mantissa = "0", exponent = "0"] = sigma.toExponential(2).split("e");
  const first = Math.round(Number(mantissa) * 100);
  if (first <= 354) return { digits: 2, exponent: Number(exponent) };
  if (first < 950) return { digits: 1, exponent: Number(exponent) };
  return { digits: 2, exponent: Number(exponent) + 1 };
}

function signed(text: string): string {
  const isZero = !/[1-9]/.test(text);
  if (!text.startsWith("-")) return text;
  return isZero ? text.slice(1) : MINUS + text.slice(1);
}

/** A power of ten as it is written after a number. */
export function powerOfTen(exponent: number): string {
  const digits = Array.from(String(Math.abs(exponent)), (d) => superscripts[Number(d)] ?? d).join("");
  return `${THIN_SPACE}×${THIN_SPACE}10${exponent < 0 ? "⁻" : ""}${digits}`;
}

function isFar(value: number): boolean {
  const size = Math.abs(value);
  return size !== 0 && (size >= 1e7 || size < 1e-4);
}

/** A number without σ, to `significant` digits: "0.00842", "1 234" never, "3.4 × 10⁻⁵" where it is far from one. */
export function formatNumber(value: number, significant = 4): string {
  if (!Number.isFinite(value)) return "–";
  if (isFar(value)) {
    const [mantissa = "0", exponent = "0"] = value.toExponential(significant - 1).split("e");
    return signed(mantissa) + powerOfTen(Number(exponent));
  }
  if (value === 0) return "0";
  const size = Math.floor(Math.log10(Math.abs(value)));
  return signed(value.toFixed(Math.min(MOST_DECIMALS, Math.max(0, significant - 1 - size))));
}

/** Two numbers of one range, to the same decimals: "0.670 – 1.352". */
export function formatRange(from: number, to: number, significant = 4): string {
  if (!Number.isFinite(from) || !Number.isFinite(to)) return "–";
  if (from === to) return formatNumber(from, significant);
  const largest = Math.max(Math.abs(from), Math.abs(to));
  if (isFar(largest)) return `${formatNumber(from, significant - 1)} – ${formatNumber(to, significant - 1)}`;
  const decimals = Math.min(MOST_DECIMALS, Math.max(0, significant - 1 - Math.floor(Math.log10(largest))));
  return `${signed(from.toFixed(decimals))} – ${signed(to.toFixed(decimals))}`;
}

/**
 * A value and its 1σ, in parts.
 *
 * @param sigma 1σ in the value's unit; null or NaN where it is not known (never 0), which is said.
 */
export function writeValue(value: number | null, sigma: number | null, options: WritingOptions = {}): WrittenValue {
  if (value === null || !Number.isFinite(value)) return { value: "–", sigma: "", power: "" };
  const known = sigma !== null && Number.isFinite(sigma) && sigma >= 0;
  if (!known || sigma === 0) {
    const text = options.decimals === undefined ? formatNumber(value) : signed(value.toFixed(Math.min(MOST_DECIMALS, options.decimals)));
    return { value: text, sigma: known ? "" : (options.unknown ?? "(?)"), power: "" };
  }
  const { digits, exponent } = sigmaDigits(sigma);
  const far = isFar(Math.max(Math.abs(value), sigma)) && options.decimals === undefined;
  const scale = far ? Math.floor(Math.log10(Math.max(Math.abs(value), sigma))) : 0;
  let decimals = Math.max(0, digits - 1 - exponent + scale);
  if (options.decimals !== undefined) {
    // A column keeps its own decimals as long as the σ does not vanish in them.
    const vanishes = Number(sigma.toFixed(Math.min(MOST_DECIMALS, options.decimals))) === 0;
    decimals = vanishes ? decimals : options.decimals;
  }
  decimals = Math.min(MOST_DECIMALS, decimals);
  const v = far ? value / 10 ** scale : value;
  const s = far ? sigma / 10 ** scale : sigma;
  const power = far ? powerOfTen(scale) : "";
  const written = signed(v.toFixed(decimals));
  if (options.form === "plus-minus") return { value: written, sigma: `${THIN_SPACE}±${THIN_SPACE}${s.toFixed(decimals)}`, power };
  const rounded = s.toFixed(decimals);
  // 9.6(9) and 12.3(1.4): a σ of one and more keeps its point, so that nobody reads 12.3(14) as 0.14.
  const inLastPlace = decimals === 0 ? rounded : Number(rounded) >= 1 ? rounded : rounded.replace(/^0\.0*/, "");
  return { value: written, sigma: `(${inLastPlace})`, power };
}

/** A value and its 1σ as one text: "1.086(12)", "1.086 ± 0.012", "3.41(12) × 10⁻⁵", "1.086(?)" where σ is not known. */
export function formatValue(value: number | null, sigma: number | null, options: WritingOptions = {}): string {
  const written = writeValue(value, sigma, options);
  if (written.power !== "" && options.form === "plus-minus") return `(${written.value}${written.sigma})${written.power}`;
  return written.value + written.sigma + written.power;
}

/** The same in words, for people who listen: "1.086 plus or minus 0.012". */
export function speakValue(value: number | null, sigma: number | null): string {
  if (value === null || !Number.isFinite(value)) return "no value";
  const written = writeValue(value, sigma, { form: "plus-minus", unknown: "" });
  const said = written.value.replace(MINUS, "minus ");
  return written.sigma === "" ? `${said}, uncertainty ${sigma === 0 ? "none" : "unknown"}` : `${said} plus or minus ${written.sigma.replace(/[\u2009±]/g, "")}`;
}

/** A unit after a number, with a thin space; nothing for ratios. */
export function withUnit(text: string, unit: string): string {
  return unit === "1" || unit === "" ? text : `${text}${THIN_SPACE}${unit}`;
}

/** A p-value: "0.28", "0.003", "< 0.001". */
export function formatP(p: number): string {
  if (!Number.isFinite(p)) return "–";
  if (p < 0.001) return `<${THIN_SPACE}0.001`;
  return p < 0.01 ? p.toFixed(3) : p.toFixed(2);
}

/** Decimals of a number as a source writes it: 2 for "24.10", 0 for "806" and for what is no plain number. */
export function decimalsOf(text: string): number {
  const match = /^\s*[<>~]?\s*[-+−]?\d*[.,]?(\d*)/.exec(text);
  return match?.[1]?.length ?? 0;
}

/** "1 sample", "3 samples". */
export function counted(n: number, one: string, many = `${one}s`): string {
  return `${n} ${n === 1 ? one : many}`;
}
