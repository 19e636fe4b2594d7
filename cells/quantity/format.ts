/**
 * Numbers as people read them, the same everywhere: on screens, in notes, in tables for people. Rounding happens here and
 * nowhere else; results keep every digit.
 */

/** How an uncertainty is written: `1.086(12)` or `1.086 ± 0.012`. */
export type UncertaintyStyle = "concise" | "plus-minus";

/**
 * A value with its 1σ. The σ is rounded to two digits where they are below 36, else to one, so that rounding moves it by less
 * than a seventh (the rule of the Particle Data Group, Workman et al. 2022, Prog. Theor. Exp. Phys., section 5.3); the value
 * is rounded to the same place.
 *
 * @param sigma null or NaN where unknown: the value then stands with `digits` significant digits
 * @param digits significant digits of a value without a σ
 */
export function formatUncertain(value: number, sigma: number | null, style: UncertaintyStyle = "concise", digits = 4): string {
  if (!Number.isFinite(value)) return "–";
  if (sigma === null || !Number.isFinite(sigma) || sigma <= 0) return formatNumber(value, digits);
  const magnitude = Math.abs(value) > sigma ? Math.abs(value) : sigma;
  if (magnitude < 1e-4 || magnitude >= 1e7) return scientific(value, sigma, magnitude, style);
  return fixed(value, sigma, style);
}

/** A number with that many significant digits, in figures where they are short, else as m × 10ⁿ. */
export function formatNumber(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return "–";
  if (value === 0) return "0";
  const exponent = exponentOf(value);
  if (exponent < -4 || exponent >= 7) {
    const [mantissa = "", power = ""] = value.toExponential(digits - 1).split("e");
    return `${minus(mantissa)} × 10${raised(Number(power))}`;
  }
  return minus(value.toFixed(Math.max(0, Math.min(20, digits - 1 - exponent))));
}

function fixed(value: number, sigma: number, style: UncertaintyStyle): string {
  const places = placesFor(sigma);
  const shownPlaces = Math.max(0, places);
  const roundedSigma = places < 0 ? Number(sigma.toPrecision(Math.max(1, exponentOf(sigma) + 1 + places))) : sigma;
  const sigmaText = roundedSigma.toFixed(shownPlaces);
  const step = places < 0 ? Number(`1e${-places}`) : 1;
  const valueText = minus((places < 0 ? roundTo(value, step) : value).toFixed(shownPlaces));
  if (style === "plus-minus") return `${valueText} ± ${sigmaText}`;
  const leading = sigmaText.replace(/^0\.0*/u, "").replace(/^0+(?=\d)/u, "");
  return `${valueText}(${roundedSigma >= 1 ? sigmaText : leading})`;
}

function scientific(value: number, sigma: number, magnitude: number, style: UncertaintyStyle): string {
  const power = exponentOf(magnitude);
  const scale = Number(`1e${power}`);
  const text = fixed(value / scale, sigma / scale, style);
  return `${style === "plus-minus" ? `(${text})` : text} × 10${raised(power)}`;
}

/** Decimal places at which a σ is rounded: two significant digits up to 35, one beyond. */
function placesFor(sigma: number): number {
  const [mantissa = "1", power = "0"] = sigma.toExponential(2).split("e");
  return Number(mantissa) < 3.55 ? 1 - Number(power) : -Number(power);
}

function roundTo(value: number, step: number): number {
  return Math.floor(value / step + 0.5) * step;
}

function exponentOf(value: number): number {
  return Number(value.toExponential().split("e")[1] ?? 0);
}

function minus(text: string): string {
  return text.replace(/^-/u, /[1-9]/u.test(text) ? "−" : "");
}

const raisedDigits = "⁰¹²³⁴⁵⁶⁷⁸⁹";
function raised(power: number): string {
  const digits = [...String(Math.abs(power))].map((digit) => raisedDigits[Number(digit)] ?? "").join("");
  return power < 0 ? `⁻${digits}` : digits;
}
