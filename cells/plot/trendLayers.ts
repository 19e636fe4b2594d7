import { CellError } from "../errors";
import { exp, log } from "../numeric";
import type { Band, PlotLayer, TrendResult } from "../page/results";
import type { Drawn, TrendBlock } from "../page/schema";
import { bandOf, crossingRegionOf, fitOf, lineAt } from "../trend";
import { compact, type PlotAxis } from "./axes";
import { closed, contour, radiusOf } from "./contour";
import type { Drawing } from "./drawing";
import { sameExpression, type Standing } from "./sameExpression";

/** Two quantities that some line of the plot draws against each other. */
export interface DrawnPair {
  readonly x: Standing;
  readonly y: Standing;
}

/** Points of a line; bands are curved, and so is a line on a logarithmic axis. */
const STEPS = 160;

/** The stretch of x that a trend is drawn over. */
export interface Extent {
  readonly from: number;
  readonly to: number;
}

interface Found {
  readonly block: TrendBlock;
  readonly result: TrendResult;
}

/** A trend's line with its 95 % band. @throws CellError where it stands on other axes than the plot */
export function trendLayer(
  drawing: Drawing,
  drawn: Extract<Drawn, { trend: string }>,
  place: number,
  axes: { readonly x: PlotAxis; readonly y: PlotAxis },
  pairs: readonly DrawnPair[],
  extent: Extent,
): PlotLayer | undefined {
  const field = `drawn[${place}].trend`;
  const found = findTrend(drawing, drawn.trend, place);
  if (found === undefined) return undefined;
  requireSameAxes(drawing, found.block, found.result, axes, pairs, field);
  const fit = fitOf(found.result);
  if (!found.result.ok || fit === undefined) {
    drawing.warn("no-line", field, `${drawn.trend} has no line to draw. See what ${drawn.trend} says.`);
    return undefined;
  }
  Object.assign(drawing.bodiesUsed, fit.source.x.bodiesUsed, fit.source.y.bodiesUsed);
  const range = rangeOf(found.result);
  const places = placesBetween(Math.min(range[0], extent.from), Math.max(range[1], extent.to), drawing.block.xAxis?.scale === "log");
  const line = lineAt(fit, places);
  const band = drawn.band === false ? undefined : knownBand(bandOf(fit, places));
  return {
    what: "trend",
    drawn: place,
    trend: found.block.id,
    line,
    range,
    ...(band === undefined ? {} : { band }),
    usesScatter: found.result.usesScatter === true,
  };
}

/** Where two trends cross, with the curve that holds 95 %: an ellipse, or the simulated region where an ellipse would not do. */
export function crossingLayer(
  drawing: Drawing,
  drawn: Extract<Drawn, { crossing: string }>,
  place: number,
  axes: { readonly x: PlotAxis; readonly y: PlotAxis },
  pairs: readonly DrawnPair[],
): PlotLayer | undefined {
  const field = `drawn[${place}].crossing`;
  const found = findTrend(drawing, drawn.crossing, place);
  if (found === undefined) return undefined;
  requireSameAxes(drawing, found.block, found.result, axes, pairs, field);
  const { crossing } = found.result;
  if (crossing === undefined) {
    const why = found.block.crossWith === undefined ? "Choose the trend it is crossed with." : `See what ${drawn.crossing} says.`;
    drawing.warn("no-crossing", field, `${drawn.crossing} has no crossing to draw. ${why}`);
    return undefined;
  }
  const fit = fitOf(found.result);
  Object.assign(drawing.bodiesUsed, fit?.source.x.bodiesUsed, fit?.source.y.bodiesUsed);
  const [sigmaX, sigmaY] = [crossing.x.sigma ?? Number.NaN, crossing.y.sigma ?? Number.NaN];
  const correlation = sigmaX > 0 && sigmaY > 0 ? crossing.covariance / (sigmaX * sigmaY) : 0;
  const region = crossingRegionOf(found.result) ?? contour(crossing.x.value, crossing.y.value, sigmaX, sigmaY, correlation, radiusOf("95 %"));
  return {
    what: "crossing",
    drawn: place,
    trends: [found.block.id, crossing.with],
    x: crossing.x.value,
    y: crossing.y.value,
    sigmaX,
    sigmaY,
    ellipse: region === undefined ? { x: new Float64Array(0), y: new Float64Array(0) } : closed(region),
  };
}

/** A trend that the plot names; a handle that leads nowhere is said by the page. */
function findTrend(drawing: Drawing, handle: string, place: number): Found | undefined {
  const block = drawing.context.block(handle);
  if (block?.kind !== "trend") return undefined;
  const result = drawing.context.result(handle);
  if (result?.kind === "trend") return { block, result };
  throw new CellError("no-result", `${handle} has no result to draw. See what ${handle} says.`, { field: `drawn[${place}]` });
}

/**
 * A line can be drawn only where both its axes are those it was fitted in, or those of some samples of the plot.
 *
 * @throws CellError `basis-mismatch` or `axes-differ`
 */
function requireSameAxes(
  drawing: Drawing,
  trend: TrendBlock,
  result: TrendResult,
  axes: { readonly x: PlotAxis; readonly y: PlotAxis },
  pairs: readonly DrawnPair[],
  field: string,
): void {
  const own: DrawnPair = { x: { text: trend.x, data: trend.data }, y: { text: trend.y, data: trend.data } };
  const all = [{ x: axes.x.placed, y: axes.y.placed }, ...pairs];
  const { context } = drawing;
  const fits = all.some((pair) => sameExpression(context, pair.x, own.x) && sameExpression(context, pair.y, own.y));
  if (fits) return requireSameUnits(trend, result, axes, field);
  const [x, y] = [compact(axes.x.placed.text), compact(axes.y.placed.text)];
  const shown = `this plot shows ${x} across and ${y} upwards`;
  if (sameExpression(context, axes.x.placed, own.y) && sameExpression(context, axes.y.placed, own.x))
    throw new CellError(
      "axes-differ",
      `${trend.id} is fitted with ${compact(trend.x)} across and ${compact(trend.y)} upwards; ${shown}. Exchange the axes of the plot, or fit a trend the other way round: a fit of y on x is not that of x on y.`,
      { field },
    );
  for (const which of ["x", "y"] as const) {
    const info = result[which];
    if (result.ok && info.basis !== axes[which].info.basis && (info.basis !== null || axes[which].info.basis !== null))
      throw new CellError(
        "basis-mismatch",
        `${trend.id} is fitted in ${compact(trend[which])} ${basisOf(info.basis)}, and the ${which} axis shows ${compact(axes[which].placed.text)} ${basisOf(axes[which].info.basis)}. They cannot stand on one axis: forsterite's Mg/Si is 2 by atoms and 1.7308 by mass. Fit and draw the same quantity.`,
        { field },
      );
  }
  throw new CellError(
    "axes-differ",
    `${trend.id} is fitted with ${compact(trend.x)} across and ${compact(trend.y)} upwards; ${shown}. Draw it on a plot of its own quantities, or fit a trend in these.`,
    { field },
  );
}

function requireSameUnits(trend: TrendBlock, result: TrendResult, axes: { readonly x: PlotAxis; readonly y: PlotAxis }, field: string): void {
  for (const which of ["x", "y"] as const)
    if (result.ok && result[which].unit !== axes[which].info.unit)
      throw new CellError(
        "unit-mismatch",
        `${trend.id} is fitted in ${result[which].unit}, and the ${which} axis is in ${axes[which].info.unit}. Fit and draw in one unit.`,
        { field },
      );
}

function basisOf(basis: TrendResult["x"]["basis"]): string {
  return basis === null ? "without a basis" : `by ${basis}`;
}

/** From the least to the greatest x of the fitted samples. */
function rangeOf(result: TrendResult): readonly [number, number] {
  let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const { x } of result.points) {
    if (x < low) low = x;
    if (x > high) high = x;
  }
  return [low, high];
}

function placesBetween(from: number, to: number, isLog: boolean): Float64Array {
  const places = new Float64Array(STEPS + 1);
  const byLog = isLog && from > 0;
  const [a, b] = byLog ? [log(from), log(to)] : [from, to];
  for (let i = 0; i <= STEPS; i++) {
    const place = a + ((b - a) * i) / STEPS;
    places[i] = byLog ? exp(place) : place;
  }
  places[0] = from;
  places[STEPS] = to;
  return places;
}

/** A band of no width, or one that is not known, is none. */
function knownBand(band: Band): Band | undefined {
  return band.lower.every((low, i) => low < (band.upper[i] ?? Number.NaN)) ? band : undefined;
}
