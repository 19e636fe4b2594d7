import { counted, formatNumber, formatRange, formatValue, withUnit, type UncertaintyForm } from "@/app/_ui/concise";
import { basisInWords, samplesInWords } from "@/app/_blocks/shared/words";
import { extent, median } from "@/app/_blocks/shared/spread";
import type { FormulaResult, LineResult } from "@/cells";

/** A line's result at a glance: its range over the samples, or its one value with σ. */
export function rangeText(line: LineResult, form: UncertaintyForm): string {
  if (!line.ok) return "no result";
  if (!line.perSample && line.byClass === undefined) return withUnit(formatValue(line.value[0] ?? NaN, line.sigma[0] ?? NaN, { form }), line.unit);
  const ends = extent(line.value);
  return ends === null ? "no values" : withUnit(formatRange(ends[0], ends[1]), line.unit);
}

/** What the numbers are: basis, what a basis-free number means, typical σ, and what makes them less than certain. */
export function natureText(line: LineResult): string {
  if (!line.ok) return "";
  const parts = [basisInWords(line.basis), line.remark ?? ""].filter((part) => part !== "");
  if (line.perSample) {
    const typical = median(line.sigma);
    parts.push(
      typical === null
        ? "σ unknown"
        : `median σ ${formatNumber(typical, 2)
            .replace(/(\.\d*?)0+$/u, "$1")
            .replace(/\.$/u, "")}`,
    );
    const common = median(line.sigmaCommon);
    if (common !== null && typical !== null && common > 0.05 * typical) parts.push("part of σ is common to all");
  }
  let lower = 0;
  for (let i = 0; i < line.lowerBound.length; i++) lower += line.lowerBound[i] ?? 0;
  if (lower > 0) parts.push(line.value.length === 1 ? "σ is a lower bound" : `σ a lower bound for ${lower}`);
  if (line.assumed > 0) parts.push(`${line.assumed} on assumed σ`);
  return parts.join(", ");
}

/** How many samples a line has a value for, and what became of the others; of a line of classes how many it has. */
export function countsText(line: LineResult): string {
  if (!line.ok) return "";
  // A line that is not one of samples counts its values: how many samples are behind them it does not say.
  if (line.byClass !== undefined) return counted(line.byClass.length, "class", "classes");
  if (!line.perSample) return line.n === 0 ? "no samples in it" : "one value";
  return samplesInWords(line.n, line.states);
}

/** What the head of a formula block says: which lines have a problem, else how many there are. */
export function stateInWords(result: FormulaResult | undefined): { readonly text: string; readonly problem: boolean } {
  if (result === undefined) return { text: "", problem: false };
  const failed = result.lines.filter((line) => !line.ok).length;
  if (failed > 0)
    return { text: `${failed} line${failed === 1 ? "" : "s"} of ${result.lines.length} ${failed === 1 ? "has" : "have"} a problem`, problem: true };
  if (result.problems.some((p) => p.severity === "error")) return { text: "has a problem", problem: true };
  return { text: result.lines.length === 0 ? "no lines yet" : counted(result.lines.length, "line"), problem: false };
}
