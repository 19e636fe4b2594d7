import { CellError, notYetSaid, type Problem } from "../errors";
import { evaluateCondition, evaluateExpression, type Evaluated, type Scope } from "../language";
import type { BlockContext } from "../page/context";
import { emptyTrend } from "../page/emptyResult";
import type { AxisInfo, FitParameter, TrendPoint, TrendResult } from "../page/results";
import type { TrendBlock } from "../page/schema";
import { formatNumber } from "../quantity/format";
import { withSimulation } from "../simulate";
import type { Table } from "../table/table";
import { bodyPoint } from "./bodyPoint";
import { choosePoints, valueAt, type Chosen } from "./choosePoints";
import { chooseClasses, samplePulls } from "./classPoints";
import { bodyDistance, crossTrends, withCrossed } from "./crossTrends";
import type { LineForms } from "./crossing";
import { distanceFromLine, type PointForms } from "./distance";
import { fitLine, type FittedLine, type LineCovariance } from "./fitLine";
import { covariance, hasUnknown, variance } from "./linearForm";
import { residuals } from "./outliers";
import { calibrated, rawPulls, type Pulls } from "./pulls";
import { refitOf } from "./refit";
import type { ClassPoint, SampleSource } from "./sampleSource";
import { simulateTrend } from "./simulate";
import { commonTerms, fitOf, sampleVariables, withFit, type AxisOfFit, type TrendFit } from "./trendFit";

/**
 * A line through samples, how well they keep to it, how far the page's bodies lie from it, and where it crosses another.
 *
 * σ are 1σ in display units. Samples are weighted by what was measured on each; what is common to them (the body they are
 * normalised to) is carried through once, afterwards. What cannot be calculated is a problem with its place; the rest stands.
 */
export function evaluateTrend(block: TrendBlock, context: BlockContext): TrendResult {
  const { crossWith, ...alone } = block;
  if (crossWith === undefined) return evaluateLine(alone, context);
  // The page calculates the line first and asks for the crossing afterwards; by itself, the line is calculated here.
  const known = context.result(block.id);
  const line = known?.kind === "trend" ? known : evaluateLine(alone, context);
  return evaluateCrossing(block, crossWith, line, context);
}

function evaluateLine(block: TrendBlock, context: BlockContext): TrendResult {
  const problems = aboutData(block, context);
  const read = readAxes(block, context, problems);
  if (read === undefined) return emptyTrend(block, problems);
  const { x, y, table } = read;
  const weighs = block.method === "york";
  const chosen = choose(block, read, weighs, problems);
  if (chosen === undefined) return emptyTrend(block, problems);
  problems.push(...x.problems, ...notYetSaid(y.problems, x.problems), ...chosen.problems, ...aboutPoints(block, chosen), ...aboutClosure(block, x, y));
  const base: TrendResult = {
    ...emptyTrend(block, []),
    n: chosen.rows.length,
    leftOut: chosen.leftOut,
    x: axisInfo(block.x, x),
    y: axisInfo(block.y, y),
    bodiesUsed: { ...x.bodiesUsed, ...y.bodiesUsed },
  };
  try {
    const line = fitLine(block.method, block.scatter ?? "likelihood", chosen.points);
    if (!Number.isFinite(line.slope) || !Number.isFinite(line.intercept)) throw new CellError("not-converged", whyNoLine(chosen));
    return lineResult(block, context, base, read, chosen, line, problems);
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    return { ...base, problems: [...problems, atRow(error, table, chosen).toProblem(block.id)] };
  }
}

/** The points of a fit: samples, or classes where their means stand on the axes. Undefined where that has a fault. */
function choose(block: TrendBlock, { table, x, y, where }: Axes, weighs: boolean, problems: Problem[]): FitChosen | undefined {
  if (x.byClass === undefined && y.byClass === undefined) return choosePoints(block, table, x, y, where, weighs);
  try {
    return chooseClasses(block, table, x, y, where, weighs);
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    problems.push(error.toProblem(block.id));
    return undefined;
  }
}

type FitChosen = Chosen & { readonly classes?: readonly ClassPoint[] };

interface Axes {
  readonly scope: Scope;
  readonly table: Table;
  readonly x: Evaluated;
  readonly y: Evaluated;
  readonly where: Uint8Array | undefined;
}

/** Reads both axes and the condition; every fault is said at its own place. Undefined where one of them has one. */
function readAxes(block: TrendBlock, context: BlockContext, problems: Problem[]): Axes | undefined {
  const attempt = <T>(field: string, work: () => T): T | undefined => {
    try {
      return work();
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      problems.push({ field, ...error.toProblem(block.id) });
      return undefined;
    }
  };
  const scope = attempt("data", () => context.scope(block.data));
  const table = scope?.table;
  if (scope === undefined || table == null) return undefined;
  const axis = (field: "x" | "y"): Evaluated | undefined =>
    attempt(field, () => {
      const text = block[field];
      const evaluated = evaluateExpression(scope, text, { block: block.id, field });
      requirePerSample(evaluated, table, text, field);
      return evaluated;
    });
  const x = axis("x");
  const y = axis("y");
  const condition = block.where ?? "";
  const where = condition.trim() === "" ? undefined : attempt("where", () => evaluateCondition(scope, condition, { block: block.id, field: "where" }));
  const whereFailed = condition.trim() !== "" && where === undefined;
  return x === undefined || y === undefined || whereFailed ? undefined : { scope, table, x, y, where };
}

function requirePerSample(evaluated: Evaluated, table: Table, text: string, field: "x" | "y"): void {
  const place = { field, span: [0, text.length] as const };
  if (!evaluated.perSample && evaluated.byClass === undefined)
    throw new CellError(
      "not-per-sample",
      `${text.trim()} has one value for all samples, so no line can be put through it. Use something measured on each sample, or the means of classes, as in mean(x, Group).`,
      place,
    );
  if (evaluated.table !== table)
    throw new CellError(
      "table-mismatch",
      `${text.trim()} stands over the samples of ${evaluated.table?.handle ?? "another table"}, and this trend over those of ${table.handle}. Join the tables, or choose the other one.`,
      place,
    );
}

/** A trend over data that are themselves faulty says so. */
function aboutData(block: TrendBlock, context: BlockContext): Problem[] {
  const faults = context.result(block.data)?.problems.filter((problem) => problem.severity === "error") ?? [];
  const [first] = faults;
  if (first === undefined) return [];
  const more = faults.length === 1 ? "a problem" : `${faults.length} problems`;
  return [
    {
      code: "data-has-problem",
      severity: "warning",
      block: block.id,
      field: "data",
      text: `${block.data} has ${more} of its own, and this line rests on it as it is: ${first.text}`,
    },
  ];
}

/** Parts of one whole correlate because they sum to it (Aitchison 1986, ch. 3), whatever the rocks do; ratios do not. */
function aboutClosure(block: TrendBlock, x: Evaluated, y: Evaluated): Problem[] {
  if (x.unit.dimension !== "mass fraction" || y.unit.dimension !== "mass fraction") return [];
  return [
    {
      code: "closure",
      severity: "warning",
      block: block.id,
      text: `${block.x.trim()} and ${block.y.trim()} are parts of one whole: where one takes more of it the other has less, so a trend between them, a falling one above all, may be no more than that. Fit ratios to a common element, as in Mg / Si, to be free of it.`,
    },
  ];
}

/** What is to be known of the points: σ that lack, are partly known, or are assumed. */
function aboutPoints(block: TrendBlock, { leftOut, partlyKnown, assumed }: Chosen): Problem[] {
  const found: Problem[] = [];
  const say = (code: string, severity: Problem["severity"], text: string): void => void found.push({ code, severity, block: block.id, text });
  const samples = (count: number): string => `${count} ${count === 1 ? "sample" : "samples"}`;
  const without = leftOut["without σ"] ?? 0;
  if (without > 0)
    say(
      "without-sigma",
      "warning",
      `${samples(without)} ${without === 1 ? "has" : "have"} no σ on x or y and ${without === 1 ? "is" : "are"} left out, since York's fit weighs by σ. Give ${without === 1 ? "its" : "their"} σ, assume one in the table, or use ordinary least squares.`,
    );
  if (block.method === "york" && partlyKnown > 0)
    say(
      "sigma-partly-known",
      "warning",
      `Of ${samples(partlyKnown)} only a part of the σ is known, so ${partlyKnown === 1 ? "it weighs" : "they weigh"} too much. Give the σ that lack.`,
    );
  if (block.method === "york" && assumed > 0) say("assumed-sigma", "note", `At least ${samples(assumed)} ${assumed === 1 ? "leans" : "lean"} on an assumed σ.`);
  return found;
}

/** What may be at fault where York's iteration leads to no number. */
function whyNoLine({ points: { y, correlation } }: Chosen): string {
  if (correlation.every((r) => Math.abs(r) > 1 - 1e-9))
    return "The errors of x and y are one and the same for every sample (correlation ±1), as where y is calculated from x alone, so they say nothing about a line. Choose another quantity for y, or use ordinary least squares.";
  if (y.every((value) => value === y[0]))
    return `All ${y.length} points have the same y (${y[0]}), so there is no trend to fit by errors. Choose another quantity for y, or use ordinary least squares.`;
  return "No line was found: the iteration leads to no number. See whether the σ are in the right unit, or choose another method.";
}

function atRow(error: CellError, table: Table, { rows, classes }: FitChosen): CellError {
  const place = error.place.row;
  if (typeof place !== "number") return error;
  const point = classes?.[place];
  if (point !== undefined) return new CellError(error.code, `${point.name}: ${error.message}`, { ...error.place, row: point.name });
  const row = rows[place] ?? 0;
  const name = table.samples[row] ?? "";
  return new CellError(error.code, name === "" ? error.message : `${name}: ${error.message}`, { ...error.place, row: table.rowIds[row] ?? place });
}

function axisInfo(expression: string, { unit, basis }: Evaluated): AxisInfo {
  return { expression, label: expression, unit: unit.symbol, basis };
}

function lineResult(
  block: TrendBlock,
  context: BlockContext,
  base: TrendResult,
  { scope, table, x, y }: Axes,
  chosen: FitChosen,
  line: FittedLine,
  problems: Problem[],
): TrendResult {
  const axes = { x: axisOfFit(block.x, block, context, x), y: axisOfFit(block.y, block, context, y) };
  const commons = commonTerms(chosen.rows, line.ofChanges, x, y);
  const sourceOf = (of: LineCovariance): SampleSource => ({
    handle: block.id,
    table,
    x,
    y,
    yMeaning: axes.y.meaning,
    rows: chosen.rows,
    influence: line.ofErrors,
    errors: line.errors,
    covariance: of,
    ...(chosen.classes === undefined ? {} : { classes: chosen.classes }),
    pulls: onlyOnce(() => pullsOf(block.method, chosen, line, of)),
  });
  const formsOf = (source: SampleSource): LineForms => {
    const [slope, intercept] = sampleVariables(source, line.slope, line.intercept);
    return {
      slope: { value: line.slope, terms: [{ variable: slope, partial: 1 }, ...commons.slope] },
      intercept: { value: line.intercept, terms: [{ variable: intercept, partial: 1 }, ...commons.intercept] },
    };
  };
  const plainSource = sourceOf(line.plain);
  const plain = formsOf(plainSource);
  const wideSource = line.withScatter === undefined ? undefined : sourceOf(line.withScatter);
  const wide = wideSource === undefined ? undefined : formsOf(wideSource);
  const inUse = line.usesScatter && wide !== undefined && wideSource !== undefined ? { line: wide, source: wideSource } : { line: plain, source: plainSource };
  problems.push(...aboutFit(block, line));

  const at = { block: block.id };
  const points: { body: string; point: PointForms }[] = context.aliases.flatMap((body) => {
    const point = bodyPoint(scope, axes, block.x, block.y, body, at);
    return point === undefined ? [] : [{ body, point }];
  });
  const bodiesUsed = { ...base.bodiesUsed };
  for (const { body } of points) {
    const id = context.bodies(body)?.id;
    if (id !== undefined) bodiesUsed[body] = id;
  }
  const partlyKnown = chosen.partlyKnown > 0 && block.method === "york";
  const parameter = (which: "slope" | "intercept"): FitParameter => ({
    value: line[which],
    sigma: sigmaOf(plain[which]),
    sigmaWithScatter: wide === undefined ? null : sigmaOf(wide[which]),
    ...(line.byErrorsAlone === undefined ? {} : { byErrorsAlone: line.byErrorsAlone[which] }),
    ...(partlyKnown || hasUnknown(plain[which]) ? { sigmaIs: "lower bound" as const } : {}),
  });
  const fit: TrendFit = {
    handle: block.id,
    ...axes,
    ...inUse,
    points: chosen.points,
    refit: refitOf(block.method, chosen.points, line),
    quantile: line.quantile,
    partlyKnown,
  };
  const result: TrendResult = {
    ...base,
    ok: true,
    slope: parameter("slope"),
    intercept: parameter("intercept"),
    covariance: covariance(plain.slope, plain.intercept),
    ...(wide === undefined ? {} : { covarianceWithScatter: covariance(wide.slope, wide.intercept) }),
    ...line.goodness,
    ...(line.scatter === undefined || !Number.isFinite(line.scatter) ? {} : { scatter: line.scatter }),
    usesScatter: line.usesScatter,
    converged: line.converged,
    points: pointsOf(block, table, chosen, line, x, y),
    fromBodies: points.flatMap(({ body, point }) => bodyDistance(body, distanceFromLine(point, inUse.line))),
    problems,
    bodiesUsed,
  };
  return withSimulation(withFit(result, fit), (shown, wish) => simulateTrend(shown, fit, undefined, wish));
}

function pullsOf(method: TrendBlock["method"], { rows, points, classes }: FitChosen, line: FittedLine, covariance: LineCovariance): Pulls {
  const raw = classes === undefined ? { rows, ...rawPulls(method, points, line) } : samplePulls(classes, line.ofErrors);
  return { rows: raw.rows, ...calibrated(raw, covariance) };
}

function onlyOnce<T>(make: () => T): () => T {
  let made: T | undefined;
  return () => (made ??= make());
}

function axisOfFit(expression: string, block: TrendBlock, context: BlockContext, { unit, basis, remark }: Evaluated): AxisOfFit {
  return { unit, basis, remark, meaning: withoutBrackets(context.expand(expression, block.data)) };
}

/** Text without spaces, and without brackets round the whole of it, to be compared with another. */
function withoutBrackets(text: string): string {
  let bare = text.replace(/\s+/gu, "");
  for (;;) {
    if (!bare.startsWith("(") || !bare.endsWith(")")) return bare;
    let depth = 0;
    for (let i = 0; i < bare.length - 1; i++) {
      if (bare[i] === "(") depth++;
      if (bare[i] === ")") depth--;
      if (depth === 0) return bare;
    }
    bare = bare.slice(1, -1);
  }
}

function sigmaOf(form: LineForms["slope"]): number | null {
  const sigma = Math.sqrt(Math.max(0, variance(form)));
  return Number.isFinite(sigma) ? sigma : null;
}

function aboutFit(block: TrendBlock, line: FittedLine): Problem[] {
  const found: Problem[] = [];
  const say = (code: string, severity: Problem["severity"], text: string): void => void found.push({ code, severity, block: block.id, text });
  if (!line.converged)
    say(
      "not-converged",
      "warning",
      "The iteration did not settle on one slope; the line given is the last it came to. See whether single σ are far too large or too small.",
    );
  const { goodness } = line;
  if (goodness !== undefined && goodness.p < 0.05 && !line.usesScatter)
    say(
      "scatter-ignored",
      "warning",
      `The points scatter more than their errors explain (MSWD ${formatNumber(goodness.mswd, 3)}, p ${formatNumber(goodness.p, 2)}), and this trend is set to leave that out: its σ are too small.`,
    );
  if (line.byErrorsAlone !== undefined)
    say(
      "line-with-scatter",
      "note",
      `The line is fitted with a scatter of ${formatNumber(line.scatter ?? Number.NaN, 3)} in y added to the errors. By the errors alone its slope would be ${formatNumber(line.byErrorsAlone.slope, 4)} and its intercept ${formatNumber(line.byErrorsAlone.intercept, 4)}.`,
    );
  if (block.scatter === "root mswd" && line.usesScatter && goodness !== undefined)
    say(
      "root-mswd",
      "note",
      `The σ in use are those by the errors alone times √MSWD = ${formatNumber(Math.sqrt(goodness.mswd), 3)}, as this trend is set to: all errors count as too small by one factor, and the line stays that of the errors. By default the scatter is estimated and fitted with.`,
    );
  if (line.usesScatter && line.scatter === 0)
    say(
      "scatter-not-common",
      "warning",
      "The points scatter more than their errors explain, but no scatter common to all of them does it: single points or their σ are at fault. Look at the outliers.",
    );
  if (block.method === "theil-sen") say("intercept-convention", "note", "The intercept is the median of y − slope · x over the samples.");
  return found;
}

function pointsOf(block: TrendBlock, table: Table, { rows, points, classes }: FitChosen, line: FittedLine, x: Evaluated, y: Evaluated): TrendPoint[] {
  const found = residuals(block.method, points, line);
  const correlation = x.correlation(y);
  return Array.from(rows, (row, i) => ({
    ...nameOfPoint(table, row, i, classes?.[i]),
    x: points.x[i] ?? Number.NaN,
    y: points.y[i] ?? Number.NaN,
    sigmaX: valueAt(x.sigma, row),
    sigmaY: valueAt(y.sigma, row),
    correlation: valueAt(correlation, row),
    residual: found[i]?.residual ?? Number.NaN,
    outlier: found[i]?.outlier ?? false,
  }));
}

/** Which sample, or which class, a point is. A class has no place among the rows. */
function nameOfPoint(table: Table, row: number, i: number, point: ClassPoint | undefined): Pick<TrendPoint, "index" | "row" | "sample" | "class"> {
  if (point !== undefined) return { index: -1 - i, row: point.name, sample: point.name, class: point.name };
  return { index: row, row: table.rowIds[row] ?? row, sample: table.samples[row] ?? "", class: table.classes[row] ?? "" };
}

function evaluateCrossing(block: TrendBlock, crossWith: string, line: TrendResult, context: BlockContext): TrendResult {
  const add = (problem: Problem): TrendResult => ({ ...line, problems: [...line.problems, problem] });
  const at = { severity: "error" as const, block: block.id, field: "crossWith" };
  const other = context.result(crossWith);
  // A handle that means no trend is said by the page itself.
  if (other?.kind !== "trend") return line;
  const first = fitOf(line);
  if (first === undefined) return line;
  const second = fitOf(other);
  if (second === undefined) return add({ code: "no-line", ...at, text: `${crossWith} has no line, so there is nothing to cross. See what ${crossWith} says.` });
  const bodies = context.aliases.flatMap((body) => {
    const point = bodyPoint(context.scope(block.data), first, block.x, block.y, body, { block: block.id });
    return point === undefined ? [] : [{ body, point }];
  });
  const { crossing, problems, ...crossed } = crossTrends(block.id, first, second, bodies);
  const made = withCrossed(
    {
      ...line,
      ...(crossing === undefined ? {} : { crossing }),
      problems: [...line.problems, ...problems],
      bodiesUsed: { ...line.bodiesUsed, ...other.bodiesUsed },
    },
    crossed,
  );
  // Where the crossing is refused, none is simulated either; the line is.
  return withSimulation(made, (shown, wish) => simulateTrend(shown, first, crossing === undefined ? undefined : second, wish));
}
