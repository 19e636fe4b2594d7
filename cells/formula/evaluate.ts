import { CellError, notYetSaid, type Problem } from "../errors";
import { evaluateExpression, parseLines, type Evaluated, type FormulaLine, type Scope } from "../language";
import type { BlockContext } from "../page/context";
import type { FormulaResult, LineCorrelation, LineResult } from "../page/results";
import type { FormulaBlock } from "../page/schema";
import { simulateLines, withSimulation } from "../simulate";
import { countStates } from "../quantity/state";

export interface FormulaInputs {
  /** Names of lines that are calculated from themselves; the page has said so at each. */
  readonly circular: ReadonlySet<string>;
  /** Pairs of lines that a plot draws or a trend fits against each other. */
  readonly drawnTogether: readonly (readonly [string, string])[];
}

interface Calculated {
  readonly line: FormulaLine;
  /** Among the block's lines. */
  readonly place: number;
  readonly evaluated: Evaluated;
}

/**
 * Every line of a formula block: values, 1σ, states, counts, and the error correlation of the pairs that are drawn or fitted
 * together or stand under each other as ratios. A faulty line is a problem of its own; the others calculate.
 */
export function evaluateFormula(block: FormulaBlock, context: BlockContext, inputs: FormulaInputs): FormulaResult {
  const { lines, errors } = parseLines(block.text);
  const problems: Problem[] = errors.map((error) => error.toProblem(block.id));
  const bodiesUsed: Record<string, string> = {};
  const calculated: Calculated[] = [];
  const results: LineResult[] = [];
  const scope = scopeOf(block, context, problems);
  for (const line of lines) {
    const evaluated = scope === undefined || inputs.circular.has(line.name) ? undefined : calculate(block, line, scope, problems);
    if (evaluated !== undefined) {
      calculated.push({ line, place: results.length, evaluated });
      Object.assign(bodiesUsed, evaluated.bodiesUsed);
    }
    results.push(evaluated === undefined ? failedLine(line) : lineResult(line, evaluated));
  }
  problems.sort((a, b) => (a.span?.[0] ?? -1) - (b.span?.[0] ?? -1));
  const result: FormulaResult = { kind: "formula", lines: results, correlation: correlations(calculated, inputs.drawnTogether), problems, bodiesUsed };
  return withSimulation(result, (base, wish) => simulateLines(base, calculated, wish));
}

function scopeOf(block: FormulaBlock, context: BlockContext, problems: Problem[]): Scope | undefined {
  try {
    return context.scope(block.data);
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    problems.push({ ...error.toProblem(block.id), field: "data" });
    return undefined;
  }
}

function calculate(block: FormulaBlock, line: FormulaLine, scope: Scope, problems: Problem[]): Evaluated | undefined {
  try {
    const evaluated = evaluateExpression(scope, line.text, { block: block.id, offset: line.expressionSpan[0] });
    problems.push(...notYetSaid(evaluated.problems, problems));
    return evaluated;
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    problems.push({ span: line.expressionSpan, ...error.toProblem(block.id) });
    return undefined;
  }
}

function lineResult(line: FormulaLine, evaluated: Evaluated): LineResult {
  const states = countStates(evaluated.state);
  let n = evaluated.state.length;
  for (const count of Object.values(states)) n -= count;
  return {
    name: line.name,
    span: line.span,
    expressionSpan: line.expressionSpan,
    ok: true,
    unit: evaluated.unit.symbol,
    basis: evaluated.basis,
    remark: evaluated.remark,
    perSample: evaluated.perSample,
    n,
    states,
    value: evaluated.value,
    sigma: evaluated.sigma,
    sigmaCommon: evaluated.sigmaCommon,
    state: evaluated.state,
    lowerBound: evaluated.lowerBound,
    assumed: evaluated.assumedCount,
    ...(evaluated.byClass === undefined ? {} : { byClass: evaluated.byClass }),
  };
}

function failedLine(line: FormulaLine): LineResult {
  return {
    name: line.name,
    span: line.span,
    expressionSpan: line.expressionSpan,
    ok: false,
    unit: "",
    basis: null,
    remark: null,
    perSample: false,
    n: 0,
    states: {},
    value: new Float64Array(0),
    sigma: new Float64Array(0),
    sigmaCommon: new Float64Array(0),
    state: new Uint8Array(0),
    lowerBound: new Uint8Array(0),
    assumed: 0,
  };
}

/** Row by row, in the order of the lines; a pair is listed once. */
function correlations(calculated: readonly Calculated[], drawnTogether: FormulaInputs["drawnTogether"]): LineCorrelation[] {
  const found: LineCorrelation[] = [];
  calculated.forEach((first, i) => {
    calculated.slice(i + 1).forEach((second, j) => {
      const neighbours = j === 0 && isRatio(first.evaluated) && isRatio(second.evaluated);
      const drawn = drawnTogether.some((pair) => pair.includes(first.line.name) && pair.includes(second.line.name));
      if (!(neighbours || drawn) || !first.evaluated.perSample || !second.evaluated.perSample) return;
      found.push({ of: [first.line.name, second.line.name], value: first.evaluated.correlation(second.evaluated) });
    });
  });
  return found;
}

function isRatio(evaluated: Evaluated): boolean {
  return evaluated.unit.dimension === "dimensionless" && (evaluated.basis !== null || evaluated.remark !== null);
}
