import { CellError } from "../errors";
import { pathOn } from "../budget";
import type { BlockContext } from "../page/context";
import type { PlotLayer, PlotResult } from "../page/results";
import type { Drawn, PlotBlock } from "../page/schema";
import { State } from "../quantity/state";
import { parseUnit } from "../quantity/unit";
import { axisOf, axisCandidates, conversion, nameOnly, type Conversion, type PlotAxis } from "./axes";
import { bodiesLayer } from "./bodiesLayer";
import { radiusOf } from "./contour";
import { countDrawn } from "./countDrawn";
import { Drawing, type Placed } from "./drawing";
import { extentOf } from "./extent";
import { evaluatePattern } from "./pattern";
import { at, samplesLayer, samplesPlaced } from "./samplesLayer";
import { warnOutOfLog, warnRangeOfLog } from "./logAxis";
import { cornersOf, keepInside, ternaryBlock } from "./ternary";
import { crossingLayer, trendLayer, type DrawnPair } from "./trendLayers";

/**
 * What a plot draws, layer by layer in the order of its list, and how many samples it does not draw, by state.
 *
 * Samples stand with their σ and the correlation of their errors; a trend with its 95 % band; a crossing with the ellipse that
 * holds 95 %; bodies where the axes' expressions put them. What cannot stand on the axes is an error of its own line, and the
 * others are drawn. A ternary's x and y are the shares of its first two corners in the sum of the three; bodies and paths
 * stand in it too. Hidden lines are not calculated.
 */
export function evaluatePlot(block: PlotBlock, context: BlockContext): PlotResult {
  const drawing = new Drawing(block, context);
  if (block.plot === "pattern") return evaluatePattern(drawing);
  const shown = block.plot === "ternary" ? ternaryBlock(block, drawing) : block;
  const axes = { x: readAxis(shown, "x", drawing), y: block.plot === "distribution" ? undefined : readAxis(shown, "y", drawing) };
  const layers = drawLayers(shown, drawing, axes);
  warnRangeOfLog(drawing);
  const corners = block.plot === "ternary" ? cornersOf(block) : undefined;
  return {
    kind: "plot",
    plot: block.plot,
    x: axes.x?.info ?? nameOnly(axisCandidates(shown, "x", drawing)[0]?.text),
    y: axes.y?.info ?? nameOnly(block.plot === "distribution" ? undefined : axisCandidates(shown, "y", drawing)[0]?.text),
    ...(corners === undefined ? {} : { corners }),
    layers,
    ...countDrawn(drawing, layers),
    problems: drawing.problems,
    bodiesUsed: drawing.bodiesUsed,
  };
}

function readAxis(block: PlotBlock, axis: "x" | "y", drawing: Drawing): PlotAxis | undefined {
  const candidates = axisCandidates(block, axis, drawing);
  if (candidates.length === 0 && block.drawn.some((drawn) => drawn.hidden !== true && !("annotation" in drawn)))
    drawing.attempt(axis, () => {
      throw new CellError("no-axis", `Nothing says what stands ${axis === "x" ? "across" : "upwards"} on this plot. Give an expression such as Mg / Si.`);
    });
  for (const placed of candidates) {
    // A handle that leads nowhere is said by the page, at the line that has it.
    if (placed.data !== undefined && drawing.context.block(placed.data)?.kind !== "data") continue;
    const found = drawing.attempt(placed.field, () => axisOf(placed, drawing));
    if (found !== undefined) return found;
  }
  return undefined;
}

interface Axes {
  readonly x: PlotAxis | undefined;
  readonly y: PlotAxis | undefined;
}

/**
 * Lines wait for what they lean on: a crossing for the samples, whose axes it may share, and a trend for all the rest, which
 * says how far it reaches. The layers keep the list's order.
 */
function drawLayers(block: PlotBlock, drawing: Drawing, axes: Axes): PlotLayer[] {
  const pairs: DrawnPair[] = [];
  const made = new Map<number, PlotLayer>();
  const draw = (takes: (drawn: Drawn) => boolean, work: (drawn: Drawn, place: number) => PlotLayer | undefined): void =>
    block.drawn.forEach((drawn, place) => {
      if (drawn.hidden === true || !takes(drawn)) return;
      const layer = drawing.attempt(`drawn[${place}]`, () => work(drawn, place));
      if (layer !== undefined) made.set(place, layer);
    });
  const waits = (drawn: Drawn): boolean => "trend" in drawn || "crossing" in drawn;
  draw(
    (drawn) => !waits(drawn),
    (drawn, place) => layerOf(drawing, block, drawn, place, axes, pairs),
  );
  draw(
    (drawn) => "crossing" in drawn,
    (drawn, place) => layerOf(drawing, block, drawn, place, axes, pairs),
  );
  const extent = extentOf([...made.values()], block.xAxis);
  draw(
    (drawn) => "trend" in drawn,
    (drawn, place) => {
      if (!("trend" in drawn)) return undefined;
      const both = scatterAxes(block, drawing, drawn.trend, "line", axes);
      return both === undefined ? undefined : trendLayer(drawing, drawn, place, both, pairs, extent);
    },
  );
  return block.drawn.flatMap((_, place) => made.get(place) ?? []);
}

function layerOf(drawing: Drawing, block: PlotBlock, drawn: Drawn, place: number, { x, y }: Axes, pairs: DrawnPair[]): PlotLayer | undefined {
  const needsY = block.plot !== "distribution";
  if ("annotation" in drawn) return { what: "annotation", drawn: place, text: drawn.annotation, x: drawn.x, y: drawn.y };
  if ("data" in drawn) {
    if (drawing.context.block(drawn.data)?.kind !== "data") return undefined;
    const expressions = { x: samplesPlaced(block, drawn, place, "x"), y: needsY ? samplesPlaced(block, drawn, place, "y") : null };
    if (x === undefined || (needsY && y === undefined)) return undefined;
    const radius = block.plot === "scatter" ? radiusOf(drawn.ellipses ?? "1 sigma") : block.plot === "ternary" ? radiusOf(drawn.ellipses ?? "none") : 0;
    const layer = samplesLayer(drawing, drawn, place, { x, y: y ?? null }, expressions, radius);
    if (block.plot === "ternary") keepInside(drawing, layer, place);
    else warnOutOfLog(drawing, `drawn[${place}]`, drawn.data, notAboveZero(drawing, block, place, expressions), "sample");
    if (expressions.y !== null) pairs.push({ x: expressions.x, y: expressions.y });
    return layer;
  }
  if ("bodies" in drawn) {
    if (x === undefined || (needsY && y === undefined)) return undefined;
    return bodiesLayer(drawing, drawn, place, x, y ?? null, needsY ? radiusOf(drawn.ellipses ?? "1 sigma") : 0);
  }
  if ("trend" in drawn) return undefined;
  if ("crossing" in drawn) {
    const both = scatterAxes(block, drawing, drawn.crossing, "crossing", { x, y });
    return both === undefined ? undefined : crossingLayer(drawing, drawn, place, both, pairs);
  }
  const both = block.plot === "ternary" ? bothOf({ x, y }) : scatterAxes(block, drawing, drawn.budget, "path", { x, y });
  return both === undefined ? undefined : pathLayer(drawing, drawn.budget, place, both);
}

/** How many samples have a value that a logarithmic axis has no place for. */
function notAboveZero(drawing: Drawing, block: PlotBlock, place: number, { x, y }: { readonly x: Placed; readonly y: Placed | null }): number {
  const logs = [...(block.xAxis?.scale === "log" ? [drawing.evaluate(x)] : []), ...(block.yAxis?.scale === "log" && y !== null ? [drawing.evaluate(y)] : [])];
  if (logs.length === 0) return 0;
  const chosen = drawing.chosen.get(place);
  const rows = Math.max(...logs.map(({ value }) => value.length));
  let count = 0;
  for (let row = 0; row < rows; row++)
    if ((chosen === undefined || chosen[row] === 1) && logs.some(({ state, value }) => at(state, row) === State.present && at(value, row) <= 0)) count++;
  return count;
}

function bothOf({ x, y }: Axes): { x: PlotAxis; y: PlotAxis } | undefined {
  return x === undefined || y === undefined ? undefined : { x, y };
}

/** Both axes, on a plot that has lines. @throws CellError on one that has none */
function scatterAxes(block: PlotBlock, drawing: Drawing, handle: string, what: string, { x, y }: Axes): { x: PlotAxis; y: PlotAxis } | undefined {
  if (block.plot !== "scatter")
    throw new CellError(
      "not-drawn-here",
      `The ${what} of ${handle} can be drawn on a scatter plot only${what === "path" ? ", or on a ternary" : ""}. Take it off this ${block.plot}, or make the plot a scatter plot.`,
    );
  return bothOf({ x, y });
}

function pathLayer(drawing: Drawing, handle: string, place: number, { x, y }: { readonly x: PlotAxis; readonly y: PlotAxis }): PlotLayer | undefined {
  const { context } = drawing;
  const budget = context.block(handle);
  if (budget?.kind !== "budget") return undefined;
  const result = context.result(handle);
  if (result?.kind !== "budget") throw new CellError("no-result", `${handle} has no result to draw. See what ${handle} says.`);
  const { line, ticks, end, units } = pathOn(budget, context, x.placed.text, y.placed.text, x.placed.data);
  const [toX, toY] = [onAxisUnit(x, units.x, handle), onAxisUnit(y, units.y, handle)];
  const moved = <P extends { readonly x: number; readonly y: number }>(point: P): P => ({ ...point, x: toX.value(point.x), y: toY.value(point.y) });
  Object.assign(drawing.bodiesUsed, result.bodiesUsed);
  return {
    what: "path",
    drawn: place,
    budget: budget.id,
    line: { x: line.x.map((value) => toX.value(value)), y: line.y.map((value) => toY.value(value)) },
    ticks: ticks.map(moved),
    ...(end === undefined ? {} : { end: moved(end) }),
  };
}

/** From the unit of a budget's numbers to that of an axis. @throws CellError where they do not convert */
function onAxisUnit(axis: PlotAxis, symbol: string, handle: string): Conversion {
  const unit = parseUnit(symbol);
  if (symbol === axis.info.unit) return conversion(axis.unit, axis.unit);
  if (unit === undefined || unit.dimension !== axis.unit.dimension || parseUnit(axis.info.unit) === undefined)
    throw new CellError("unit-mismatch", `${axis.placed.text} comes out in ${symbol} along the path of ${handle}, and the axis is in ${axis.info.unit}.`);
  return conversion(unit, axis.unit);
}
