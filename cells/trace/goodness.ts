import type { TraceNode, TrendResult } from "../page/results";
import type { TrendBlock } from "../page/schema";
import { listed, orNull, short } from "./node";

const words = {
  mswd: "MSWD",
  p: "p of χ²",
  scatter: "scatter beyond the errors",
} as const;

export type Goodness = keyof typeof words;

/** Samples whose part in the misfit is listed one by one. */
const MOST_POINTS = 200;

/** How well the samples keep to a line: MSWD, its probability, or the scatter that had to be added, down to what each sample brings to it. */
export function goodnessNode(block: TrendBlock, result: TrendResult, which: Goodness): TraceNode | null {
  const value = result[which];
  const [slope, intercept] = [result.slope?.byErrorsAlone ?? result.slope?.value, result.intercept?.byErrorsAlone ?? result.intercept?.value];
  if (value === undefined || result.S === undefined || slope === undefined || intercept === undefined) return null;
  const parts = result.points.map((point) => {
    const { x, y, sigmaX, sigmaY, correlation } = point;
    const variance = sigmaY * sigmaY + slope * slope * sigmaX * sigmaX - 2 * slope * correlation * sigmaX * sigmaY;
    const away = y - intercept - slope * x;
    return { point, part: (away * away) / variance, away, sigma: Math.sqrt(variance) };
  });
  parts.sort((a, b) => b.part - a.part || a.point.index - b.point.index);
  const rest = parts.slice(MOST_POINTS).reduce((sum, { part }) => sum + part, 0);
  const total = parts.reduce((sum, { part }) => sum + part, 0);
  const percent = (part: number): string => `${short((100 * part) / total, 2)} % of S`;
  const from = parts.slice(0, MOST_POINTS).map(({ point, part, away, sigma }): TraceNode => ({
    kind: "result",
    label: point.sample === "" ? `row ${point.row}` : point.sample,
    value: null,
    sigma: null,
    unit: "",
    share: null,
    notes: [`Lies ${short(away / sigma)}σ from the line: ${short(part)}, ${percent(part)}.`],
    from: [],
  }));
  if (rest > 0)
    from.push({
      kind: "aggregate",
      label: `${parts.length - MOST_POINTS} more samples`,
      value: null,
      sigma: null,
      unit: "",
      share: null,
      notes: [`Together ${short(rest)}, ${percent(rest)}.`],
      from: [],
    });
  const [most] = parts;
  return {
    kind: "result",
    label: `${words[which]} of ${block.id}`,
    value: orNull(value),
    sigma: null,
    unit: which === "scatter" ? result.y.unit : "1",
    share: null,
    notes: [...meaningOf(result, which, result.S), ...(most === undefined ? [] : [`${listed([from[0]?.label ?? ""])} brings most to it.`])],
    from,
  };
}

function meaningOf({ n, usesScatter, x, y }: TrendResult, which: Goodness, S: number): string[] {
  const sum = `S = ${short(S, 5)} is the sum over ${n} samples of (distance from the line / σ)², with the σ of ${y.expression} and ${x.expression} in the line's direction.`;
  const alone = usesScatter === true ? ["It is that of the line by the errors alone."] : [];
  if (which === "mswd") return [sum, `MSWD is S over n − 2 = ${n - 2}.`, ...alone];
  if (which === "p") return [sum, `p is how often errors alone make S as large as this: χ² with ${n - 2} degrees of freedom.`, ...alone];
  return [sum, `The scatter is what must be added to the errors, 1σ in ${y.expression}, for the samples to be likeliest.`];
}
