import { CellError } from "../errors";
import { allPresent, evaluateCondition, type Evaluated } from "../language";
import { plotAxis } from "../page/references";
import type { PlotLayer, PlotPoints } from "../page/results";
import type { Drawn, PlotBlock } from "../page/schema";
import { State } from "../quantity/state";
import { referencesOf } from "../table/references";
import type { Table } from "../table/table";
import { conversion, requireOnAxis, type PlotAxis } from "./axes";
import type { Drawing, Placed } from "./drawing";

export type SamplesDrawn = Extract<Drawn, { data: string }>;
export type SamplesLayer = Extract<PlotLayer, { what: "samples" }>;

/** The expression that a line of samples draws on an axis. @throws CellError where there is none */
export function samplesPlaced(block: PlotBlock, drawn: SamplesDrawn, place: number, axis: "x" | "y"): Placed {
  const own = drawn[axis];
  const text = own ?? plotAxis(block, axis);
  if (text === undefined || text.trim() === "") {
    const where = axis === "x" ? "across" : "upwards";
    throw new CellError("no-axis", `Nothing says what stands ${where} for the samples of ${drawn.data}. Give an expression such as Mg / Si.`, {
      field: `drawn[${place}].${axis}`,
    });
  }
  return { text, data: drawn.data, field: own !== undefined ? `drawn[${place}].${axis}` : block[axis] !== undefined ? axis : `drawn[${place}]` };
}

/** The rows that a line of samples draws: all, or those where its condition holds. */
export function chosenRows(drawing: Drawing, drawn: SamplesDrawn, place: number): Uint8Array | undefined {
  if (drawn.where === undefined || drawn.where.trim() === "") return undefined;
  const holds = evaluateCondition(drawing.context.scope(drawn.data), drawn.where, { block: drawing.block.id, field: `drawn[${place}].where` });
  drawing.chosen.set(place, holds);
  return holds;
}

export function tableOf(drawing: Drawing, drawn: SamplesDrawn, place: number): Table {
  const { table } = drawing.context.scope(drawn.data);
  if (table === null) throw new CellError("no-table", `${drawn.data} has no table to draw samples of.`, { field: `drawn[${place}].data` });
  return table;
}

/** Samples of a table on one or two axes. @throws CellError where an expression cannot be drawn here */
export function samplesLayer(
  drawing: Drawing,
  drawn: SamplesDrawn,
  place: number,
  axes: { readonly x: PlotAxis; readonly y: PlotAxis | null },
  expressions: { readonly x: Placed; readonly y: Placed | null },
  ellipses: number,
): SamplesLayer {
  const table = tableOf(drawing, drawn, place);
  const chosen = chosenRows(drawing, drawn, place);
  const x = onAxis(drawing, table, expressions.x, axes.x);
  const y = expressions.y === null || axes.y === null ? null : onAxis(drawing, table, expressions.y, axes.y);
  const logs = { x: drawing.block.xAxis?.scale === "log", y: drawing.block.yAxis?.scale === "log" };
  // A triangle still takes out what lies outside of it, so its points must be its own.
  const shared = drawing.block.plot === "scatter" ? asCalculated(table, x, y, axes, chosen, logs) : null;
  return samplesOf(table, drawn, place, ellipses, shared ?? pointsOf(table, x, y, axes, chosen, logs));
}

export function samplesOf(table: Table, drawn: SamplesDrawn, place: number, ellipses: number, points: PlotPoints): SamplesLayer {
  return {
    what: "samples",
    drawn: place,
    data: drawn.data,
    ellipses,
    points,
    classes: table.classes,
    samples: table.samples,
    rows: table.rowIds,
    references: referencesOf(table),
  };
}

function onAxis(drawing: Drawing, table: Table, placed: Placed, axis: PlotAxis): Evaluated {
  const evaluated = drawing.evaluate(placed);
  requireValuePerSample(evaluated, table, placed);
  requireOnAxis(axis, placed.text, evaluated, placed.field);
  return evaluated;
}

/** Samples are drawn where each has a value of its own, or one stands for all. @throws CellError */
export function requireValuePerSample(evaluated: Evaluated, table: Table, { text, field }: Placed): void {
  if (evaluated.byClass !== undefined)
    throw new CellError("not-per-sample", `${text} has a value for each class and none for each sample. Draw a quantity of the samples themselves.`, { field });
  if (evaluated.table !== null && evaluated.table !== table)
    throw new CellError("table-mismatch", `${text} has its values in ${evaluated.table.handle}, and samples of ${table.handle} are drawn.`, { field });
}

function pointsOf(
  table: Table,
  x: Evaluated,
  y: Evaluated | null,
  axes: { readonly x: PlotAxis; readonly y: PlotAxis | null },
  chosen: Uint8Array | undefined,
  logs: { readonly x: boolean; readonly y: boolean },
): PlotPoints {
  const points = emptyPoints(table.rows);
  const toX = conversion(x.unit, axes.x.unit);
  const toY = y === null || axes.y === null ? toX : conversion(y.unit, axes.y.unit);
  const correlation = y === null ? null : x.correlation(y);
  // One value may stand for all rows: its place is the same in every row.
  const stepX = x.value.length === 1 ? 0 : 1;
  const stepY = y?.value.length === 1 ? 0 : 1;
  for (let row = 0; row < table.rows; row++) {
    const [ix, iy] = [row * stepX, row * stepY];
    let state = x.state[ix] as number;
    if (y !== null) state = Math.max(state, y.state[iy] as number);
    if (table.setAside[row] === 1) state = Math.max(state, State.setAside);
    const valueX = toX.value(x.value[ix] as number);
    const valueY = y === null ? Number.NaN : toY.value(y.value[iy] as number);
    // A logarithmic axis has no place for what is not above zero.
    if (state === State.present && ((logs.x && !(valueX > 0)) || (logs.y && y !== null && !(valueY > 0)))) state = State.outOfDomain;
    points.state[row] = state;
    if (state !== State.present || (chosen !== undefined && chosen[row] !== 1)) continue;
    const sigmaX = (x.sigma[ix] as number) * toX.factor;
    points.x[row] = valueX;
    points.sigmaX[row] = sigmaX;
    if (y === null) continue;
    const sigmaY = (y.sigma[iy] as number) * toY.factor;
    points.y[row] = valueY;
    points.sigmaY[row] = sigmaY;
    points.correlation[row] = sigmaX === 0 || sigmaY === 0 ? 0 : ((correlation ?? x.sigma)[correlation?.length === 1 ? 0 : row] as number);
  }
  return points;
}

/** The calculated arrays themselves, where every row is drawn as it was calculated: of a large table mostly so. */
function asCalculated(
  table: Table,
  x: Evaluated,
  y: Evaluated | null,
  axes: { readonly x: PlotAxis; readonly y: PlotAxis | null },
  chosen: Uint8Array | undefined,
  logs: { readonly x: boolean; readonly y: boolean },
): PlotPoints | null {
  if (y === null || chosen !== undefined || logs.x || logs.y) return null;
  if (x.value.length !== table.rows || y.value.length !== table.rows) return null;
  if (x.unit.symbol !== axes.x.unit.symbol || y.unit.symbol !== axes.y?.unit.symbol) return null;
  if (!allPresent(x.state) || !allPresent(y.state) || !allPresent(table.setAside)) return null;
  const correlation = x.correlation(y);
  for (let row = 0; row < correlation.length; row++) if (x.sigma[row] === 0 || y.sigma[row] === 0) correlation[row] = 0;
  return { x: x.value, y: y.value, sigmaX: x.sigma, sigmaY: y.sigma, correlation, state: x.state };
}

export function emptyPoints(rows: number): PlotPoints {
  const blank = (): Float64Array => new Float64Array(rows).fill(Number.NaN);
  return { x: blank(), y: blank(), sigmaX: blank(), sigmaY: blank(), correlation: blank(), state: new Uint8Array(rows) };
}

/** Entry of an array that may hold one value for all rows. */
export function at(values: Float64Array | Uint8Array, row: number): number {
  return (values.length === 1 ? values[0] : values[row]) ?? Number.NaN;
}
