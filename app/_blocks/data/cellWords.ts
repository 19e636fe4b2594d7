import { decimalsOf, formatNumber, writeValue, type UncertaintyForm } from "@/app/_ui/concise";
import { fromCanonical, sigmaFromCanonical, State, type QuantityColumn } from "@/cells";

/** A value in a table, ready to be set: old value struck through, value, σ, and what state it is in. */
export interface WrittenCell {
  /** Source text that an amendment replaced. */
  readonly was: string | null;
  readonly value: string;
  readonly sigma: string;
  /** "°" where the σ is assumed. */
  readonly mark: string;
  /** Set aside as a single value: written in brackets. */
  readonly aside: boolean;
  /** Nothing is there, in second ink. */
  readonly absent: boolean;
  /** For those who listen. */
  readonly spoken: string;
}

const empty: WrittenCell = { was: null, value: "–", sigma: "", mark: "", aside: false, absent: true, spoken: "missing" };

/**
 * @param amendedText the amendment's own text, which tells the decimals to show
 * @param wholeRow the sample is set aside, so its values are no single set-asides
 */
export function writeCell(column: QuantityColumn, index: number, form: UncertaintyForm, amendedText: string | undefined, wholeRow: boolean): WrittenCell {
  const state = column.state[index];
  const raw = column.raw[index] ?? "";
  const was = column.amended[index] ? (raw.trim() === "" ? "–" : raw) : null;
  const written = amendedText ?? raw;
  const limit = column.limit[index] ?? NaN;
  if (state === State.belowDetection) {
    const text = Number.isFinite(limit) ? formatLimit(fromCanonical(limit, column.unit), written) : "b.d.l.";
    return { ...empty, was, value: text, absent: false, spoken: `below detection, ${text.replace("<", "limit ")}` };
  }
  if (state === State.missing || state === undefined) return { ...empty, was };
  const value = column.value[index] ?? NaN;
  if (!Number.isFinite(value)) {
    // The engine gives no number for what is set aside; the text itself is shown, parted where a σ begins.
    const [, text = "–", sigma = ""] = /^\s*(.+?)\s*(\([\d.]+\)|±.*)?\s*$/.exec(written) ?? [];
    const aside = state === State.setAside && !wholeRow;
    return {
      was,
      value: text,
      sigma,
      mark: "",
      aside,
      absent: false,
      spoken: `${text}${sigma}, ${state === State.outOfDomain ? "out of domain" : "set aside"}`,
    };
  }
  const sigma = column.sigma[index] ?? NaN;
  const shown = fromCanonical(value, column.unit);
  const shownSigma = Number.isFinite(sigma) ? sigmaFromCanonical(sigma, column.unit) : null;
  const text = writeValue(shown, shownSigma, { form, decimals: decimalsOf(written), unknown: "" });
  const assumed = column.assumed[index] === 1;
  return {
    was,
    value: text.value,
    sigma: text.sigma + text.power,
    mark: assumed ? "°" : "",
    aside: state === State.setAside && !wholeRow,
    absent: false,
    spoken: `${text.value}${shownSigma === null ? ", uncertainty unknown" : ` plus or minus ${formatNumber(shownSigma, 2)}${assumed ? ", assumed" : ""}`}`,
  };
}

function formatLimit(limit: number, written: string): string {
  const decimals = decimalsOf(written);
  return `<${decimals > 0 && limit !== 0 ? limit.toFixed(Math.min(decimals, 12)) : formatNumber(limit, 2)}`;
}

/** "13", "12, 1 [ ]", "11, 1 –, 1 <": in use, then what is not, by the signs the cells use. */
export function columnCounts(column: QuantityColumn, setAside: Uint8Array): string {
  let n = 0;
  let missing = 0;
  let below = 0;
  let aside = 0;
  let outside = 0;
  for (let i = 0; i < column.state.length; i++) {
    if (setAside[i]) continue;
    const state = column.state[i];
    if (state === State.present) n++;
    else if (state === State.missing) missing++;
    else if (state === State.belowDetection) below++;
    else if (state === State.setAside) aside++;
    else outside++;
  }
  return [String(n), aside > 0 && `${aside} [ ]`, missing > 0 && `${missing} –`, below > 0 && `${below} <`, outside > 0 && `${outside} ∅`]
    .filter(Boolean)
    .join(", ");
}

/** The line under a column's name: "wt%, 1σ", "ng/g, 1σ°", "wt%, no σ". */
export function unitWords(column: QuantityColumn): string {
  let known = 0;
  let assumed = 0;
  for (let i = 0; i < column.sigma.length; i++) {
    if (Number.isFinite(column.sigma[i] ?? NaN)) known++;
    if (column.assumed[i]) assumed++;
  }
  const unit = column.unit.symbol === "1" ? (column.basis === undefined ? "ratio" : `by ${column.basis}`) : column.unit.symbol;
  return `${unit}, ${known === 0 ? "no σ" : assumed > 0 ? "1σ°" : "1σ"}`;
}
