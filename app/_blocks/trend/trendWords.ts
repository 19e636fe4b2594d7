import { formatNumber, formatP } from "@/app/_ui/concise";
import { quantilesInWords } from "@/app/_blocks/shared/simulatedWords";
import { compactExpression, listed } from "@/app/_blocks/shared/words";
import type { AxisInfo, TrendResult } from "@/cells";

/** A fit's parameter with the σ that this trend uses everywhere else: with scatter where the points scatter beyond their errors. */
export interface UsedParameter {
  readonly value: number;
  readonly sigma: number | null;
}

export interface Equation {
  readonly y: string;
  readonly slope: UsedParameter;
  readonly x: string;
  /** Sign before the intercept's size. */
  readonly sign: "+" | "−";
  /** The intercept without its sign. */
  readonly intercept: UsedParameter;
  readonly withScatter: boolean;
}

function used(
  parameter: { readonly value: number; readonly sigma: number | null; readonly sigmaWithScatter: number | null },
  withScatter: boolean,
): UsedParameter {
  return { value: parameter.value, sigma: withScatter ? (parameter.sigmaWithScatter ?? parameter.sigma) : parameter.sigma };
}

/** Short name of an axis: its label, or the expression without spaces round its strokes. */
export function axisName(axis: AxisInfo): string {
  return compactExpression(axis.label === "" ? axis.expression : axis.label);
}

/** The parts of `Al/Si = 0.161(7) Mg/Si − 0.066(5)`; null where there is no fit. */
export function equationOf(result: TrendResult): Equation | null {
  if (!result.ok || result.slope === undefined || result.intercept === undefined) return null;
  const withScatter = result.usesScatter === true;
  const intercept = used(result.intercept, withScatter);
  return {
    y: axisName(result.y),
    slope: used(result.slope, withScatter),
    x: axisName(result.x),
    sign: intercept.value < 0 ? "−" : "+",
    intercept: { value: Math.abs(intercept.value), sigma: intercept.sigma },
    withScatter,
  };
}

export type MswdPlace = "inside" | "above" | "below";

/** Where the MSWD lies against the range that 95 % of fits fall in when the errors explain the scatter. */
export function mswdPlace(mswd: number, expected: readonly [number, number]): MswdPlace {
  if (mswd > expected[1]) return "above";
  return mswd < expected[0] ? "below" : "inside";
}

/** Right end of the MSWD's ruler: a whole number with room beyond what is drawn. */
export function rulerEnd(mswd: number, expected: readonly [number, number]): number {
  return Math.max(2, Math.ceil(Math.max(mswd, expected[1]) * 1.05));
}

/** What the probability of the scatter says, and the scatter that had to be added. */
export function probabilityInWords(result: TrendResult): string {
  if (result.p === undefined) return "";
  const p = formatP(result.p);
  if (result.p >= 0.05)
    return result.p > 0.975 ? `${p}, the points scatter less than their errors allow: are the σ too large?` : `${p}, the errors explain the scatter`;
  const added = result.scatter !== undefined && result.scatter > 0 ? `; ${formatNumber(result.scatter, 2)} in ${axisName(result.y)} added` : "";
  return `${p}, more scatter than the errors explain${added}`;
}

/** Samples that are not in the fit, by why: `2 not chosen, 1 set aside`. */
export function leftOutInWords(leftOut: Readonly<Record<string, number>>): string {
  return Object.entries(leftOut)
    .filter(([, count]) => count > 0)
    .map(([why, count]) => `${count} ${why}`)
    .join(", ");
}

/** How many samples the fit has, of which classes, and what became of the others. */
export function samplesOfFit(result: TrendResult): string {
  const classes = Array.from(new Set(result.points.map((p) => p.class).filter((c) => c !== "")));
  const named = classes.length > 0 && classes.length <= 4 ? listed(classes) : classes.length > 4 ? `${classes.length} classes` : "";
  const out = leftOutInWords(result.leftOut);
  return [named, out].filter((t) => t !== "").join("; ");
}

export const methodWords: Readonly<Record<TrendResult["method"], string>> = {
  york: "York, errors correlated",
  "ordinary least squares": "ordinary least squares",
  "reduced major axis": "reduced major axis",
  "theil-sen": "Theil–Sen",
};

/** What the head of a trend says. */
export function stateInWords(result: TrendResult | undefined): { readonly text: string; readonly problem: boolean } {
  if (result === undefined) return { text: "", problem: false };
  if (!result.ok) return { text: "no fit", problem: true };
  if (result.converged === false) return { text: "did not converge", problem: true };
  if (result.problems.some((p) => p.severity === "error")) return { text: "has a problem", problem: true };
  if (result.p !== undefined && result.p < 0.05) return { text: "scatter beyond errors", problem: true };
  return { text: result.method === "york" ? "converged" : `n = ${result.n}`, problem: false };
}

/** What the simulation says of slope, intercept and crossing, each under its name. */
export function trendSimulated({ simulated, x, y }: TrendResult): readonly { readonly head: string; readonly text: string }[] {
  if (simulated === undefined) return [];
  const { slope, intercept, crossing } = simulated;
  const said = [
    { head: "slope", of: slope, unit: "1" },
    { head: "intercept", of: intercept, unit: y.unit },
    { head: "crossing, across", of: crossing?.x, unit: x.unit },
    { head: "crossing, upwards", of: crossing?.y, unit: y.unit },
  ];
  return said.flatMap(({ head, of, unit }) => (of == null ? [] : [{ head, text: quantilesInWords(of, unit) }]));
}
