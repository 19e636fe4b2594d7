import type { BlockResult, TraceNode, TraceRequest } from "../page/results";
import type { Quantiles, SimulatedTrend } from "./simulated";

/** What a simulation says of one number of a block; undefined where that number was not simulated. */
export function simulatedNumber(result: BlockResult | undefined, { name, index }: TraceRequest): TraceNode["simulated"] {
  if (result?.kind === "formula") {
    const line = result.lines.find((each) => each.name === name.normalize("NFC"));
    const simulated = line?.simulated;
    const i = line?.perSample === true || line?.byClass !== undefined ? (index ?? 0) : 0;
    if (simulated === undefined || !Number.isFinite(simulated.median[i])) return undefined;
    const at = (column: ArrayLike<number>): number => column[i] ?? Number.NaN;
    const { draws, seed, median, from68, to68, from95, to95, withoutValue } = simulated;
    return { draws, seed, median: at(median), from68: at(from68), to68: at(to68), from95: at(from95), to95: at(to95), withoutValue: at(withoutValue) };
  }
  if (result?.kind === "budget" && result.simulated !== undefined) {
    const { draws, seed, solved, report, withoutSolution } = result.simulated;
    if (name === "solved") return solved === null ? undefined : { draws, seed, ...solved, withoutValue: withoutSolution };
    const found = report[result.report.findIndex(({ expression }) => expression === name)];
    return found == null ? undefined : { draws, seed, ...found };
  }
  return result?.kind === "trend" ? ofTrend(result.simulated, name) : undefined;
}

function ofTrend(simulated: SimulatedTrend | undefined, name: string): TraceNode["simulated"] {
  if (simulated === undefined) return undefined;
  const { draws, seed, withoutLine, crossing } = simulated;
  const of = (found: Quantiles | null | undefined, withoutValue: number): TraceNode["simulated"] =>
    found == null ? undefined : { draws, seed, ...found, withoutValue };
  if (name === "slope" || name === "intercept") return of(simulated[name], withoutLine);
  if (name === "crossing.x" || name === "crossing.y") return of(crossing?.[name === "crossing.x" ? "x" : "y"], crossing?.withoutCrossing ?? 0);
  return undefined;
}
