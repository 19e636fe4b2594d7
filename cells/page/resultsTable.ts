import type { Problem } from "../errors";
import { formatNumber, formatUncertain } from "../quantity/format";
import { State, stateName } from "../quantity/state";
import type { BlockResult, BudgetResult, DataResult, FormulaResult, LineResult, PageResults, TrendResult } from "./results";
import type { PageDocument } from "./schema";

/** Results for people to read in a terminal: one section a block, formula lines as columns over their samples. */
export function resultsTable(page: PageDocument, results: PageResults): string {
  const bodies = Object.entries(results.bodies).map(([alias, id]) => (alias === id ? id : `${alias} is ${id}`));
  const out = [page.title, ...(bodies.length > 0 ? [`Bodies: ${bodies.join(", ")}.`] : []), `Engine ${results.engine}.`, ""];
  for (const block of page.blocks) {
    const result = results.blocks.get(block.id);
    if (result === undefined) continue;
    out.push(`── ${block.id} (${block.kind})${block.name === undefined ? "" : `  ${block.name}`}`);
    out.push(...bodyOf(page, block.id, result, results));
    out.push(...result.problems.map(problemLine), "");
  }
  return `${out.join("\n")}\n`;
}

function bodyOf(page: PageDocument, handle: string, result: BlockResult, results: PageResults): string[] {
  switch (result.kind) {
    case "data":
      return dataLines(result);
    case "formula": {
      const block = page.blocks.find((candidate) => candidate.id === handle);
      const data = block?.kind === "formula" && block.data !== undefined ? results.blocks.get(block.data) : undefined;
      return formulaLines(result, data?.kind === "data" ? data.table?.samples : undefined);
    }
    case "trend":
      return trendLines(result);
    case "budget":
      return budgetLines(result);
    case "plot": {
      const missing = Object.entries(result.notDrawn).map(([state, count]) => `${count} ${state}`);
      return [`${result.drawn} samples drawn${missing.length > 0 ? `, not drawn: ${missing.join(", ")}` : ""}`];
    }
    case "note":
      return result.values.map((value) => `${value.name} = ${value.shown ?? "no value"}${value.unit === "" ? "" : ` ${value.unit}`}`);
  }
}

function dataLines(result: DataResult): string[] {
  const head = `${result.samples} in use, ${result.setAside} set aside, ${result.valuesSetAside} values set aside, ${result.amended} amended`;
  const rows = result.columns
    .filter((column) => column.role === "quantity")
    .map((column) => [column.name, column.unit, column.n, column.missing, column.belowDetection, column.assumed, column.withoutSigma].map(String));
  return [
    head,
    ...grid([["column", "unit", "n", "missing", "below", "σ assumed", "no σ"], ...rows]),
    ...result.screening.map((flag) => `  ${flag.sample} (row ${flag.row}): ${flag.text}`),
  ];
}

function formulaLines(result: FormulaResult, samples: readonly string[] | undefined): string[] {
  const single = result.lines.filter((line) => line.ok && line.state.length === 1).map((line) => `${line.name} = ${cell(line, 0)} ${words(line)}`);
  const classes = result.lines
    .filter((line) => line.ok && line.byClass !== undefined && line.state.length !== 1)
    .flatMap((line) => [`${line.name} ${words(line)}`, ...(line.byClass ?? []).map((name, index) => `  ${name}: ${cell(line, index)}`)]);
  const rowwise = result.lines.filter((line) => line.ok && line.perSample && line.state.length !== 1);
  const rows = rowwise[0]?.state.length ?? 0;
  const failed = result.lines.filter((line) => !line.ok).map((line) => `${line.name}: no result`);
  if (rows === 0) return [...single, ...classes, ...failed];
  const header = ["sample", ...rowwise.map((line) => `${line.name} ${words(line)}`.trim())];
  const body = Array.from({ length: rows }, (_, index) => [samples?.[index] ?? String(index + 1), ...rowwise.map((line) => cell(line, index))]);
  return [...single, ...classes, ...grid([header, ...body]), ...failed];
}

function words(line: LineResult): string {
  const parts = [line.unit === "1" ? "" : line.unit, line.basis === null ? (line.remark ?? "") : `by ${line.basis}`].filter((part) => part !== "");
  return parts.length === 0 ? "" : `[${parts.join(", ")}]`;
}

function cell(line: LineResult, index: number): string {
  const state = line.state[index] ?? State.missing;
  if (state !== State.present) return stateName(state);
  const bound = line.lowerBound[index] === 1 ? "≥σ" : "";
  return `${formatUncertain(line.value[index] ?? Number.NaN, line.sigma[index] ?? null)}${bound}`;
}

function trendLines(result: TrendResult): string[] {
  if (result.slope === undefined || result.intercept === undefined) return ["no line"];
  const sigma = (of: { sigma: number | null; sigmaWithScatter: number | null }): number | null =>
    result.usesScatter === true ? of.sigmaWithScatter : of.sigma;
  const out = [
    `${result.y.label} = ${formatUncertain(result.slope.value, sigma(result.slope))} · ${result.x.label} + ${formatUncertain(result.intercept.value, sigma(result.intercept))}   (${result.method}, n = ${result.n})`,
  ];
  if (result.mswd !== undefined)
    out.push(
      `MSWD ${formatNumber(result.mswd, 3)}, p ${result.p === undefined ? "–" : formatNumber(result.p, 2)}${result.usesScatter === true ? ", σ with scatter" : ""}`,
    );
  if (result.crossing !== undefined) {
    const { x, y, fromBodies } = result.crossing;
    out.push(`crosses ${result.crossing.with} at ${formatUncertain(x.value, x.sigma)}, ${formatUncertain(y.value, y.sigma)}`);
    out.push(...fromBodies.map((each) => `  ${each.body} is ${formatNumber(each.distance, 2)}σ from the crossing (p ${formatNumber(each.p, 2)})`));
  }
  return out;
}

function budgetLines(result: BudgetResult): string[] {
  const out: string[] = [];
  if (result.solved !== undefined) {
    const bound = result.solved.sigmaIs === undefined ? "" : ` (σ is a ${result.solved.sigmaIs})`;
    out.push(`${result.solved.of}: ${formatUncertain(result.solved.value, result.solved.sigma)} ${result.solved.unit}${bound}`);
  }
  const show = (value: number | null, sigma: number | null): string => (value === null ? "–" : formatUncertain(value, sigma));
  const rows = result.report.map((each) => [
    each.expression,
    show(each.start, each.startSigma),
    show(each.end, each.sigma),
    show(each.target, each.targetSigma),
    each.miss === null ? (each.note ?? "") : `${formatNumber(each.miss, 2)}σ`,
  ]);
  if (rows.length > 0) out.push(...grid([["", "start", "end", "target", "miss"], ...rows]));
  return out;
}

function problemLine(problem: Problem): string {
  const place = problem.span === undefined ? "" : ` at ${problem.span[0]}–${problem.span[1]}`;
  return `${problem.severity}${place}: ${problem.text}`;
}

/** Columns padded to their widest cell. */
function grid(rows: readonly (readonly string[])[]): string[] {
  const widths: number[] = [];
  for (const row of rows) row.forEach((text, column) => (widths[column] = Math.max(widths[column] ?? 0, [...text].length)));
  return rows.map((row) => `  ${row.map((text, column) => text + " ".repeat((widths[column] ?? 0) - [...text].length)).join("  ")}`.trimEnd());
}
