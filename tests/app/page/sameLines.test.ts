import { expect, it } from "vitest";
import type { FormulaResult, LineResult } from "@/cells";
import { keepSameLines } from "@/app/_page/sameLines";

const line = (name: string, value: number[]): LineResult => ({
  name,
  span: [0, 1],
  expressionSpan: [0, 1],
  ok: true,
  unit: "1",
  basis: "mass",
  remark: null,
  perSample: true,
  n: value.length,
  states: {},
  value: Float64Array.from(value),
  sigma: Float64Array.from(value, () => 0.1),
  sigmaCommon: new Float64Array(value.length),
  state: new Uint8Array(value.length),
  lowerBound: new Uint8Array(value.length),
  assumed: 0,
});
const formula = (...lines: LineResult[]): FormulaResult => ({ kind: "formula", problems: [], bodiesUsed: {}, lines, correlation: [] });

it("keeps the arrays of lines whose numbers did not change, NaN included, and takes those that did", () => {
  const before = formula(line("a", [1, NaN]), line("b", [3, 4]));
  const fresh = formula(line("a", [1, NaN]), line("b", [3, 5]), line("c", [6]));
  const kept = keepSameLines(before, fresh);
  if (kept.kind !== "formula") throw new Error("a formula stays one");
  expect(kept.lines[0]?.value).toBe(before.lines[0]?.value);
  expect(kept.lines[1]?.value).toBe(fresh.lines[1]?.value);
  expect(kept.lines[1]?.sigma).toBe(before.lines[1]?.sigma);
  expect(kept.lines[2]).toBe(fresh.lines[2]);
});
