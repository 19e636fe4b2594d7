import { CellError } from "../errors";
import { writeName, type Evaluated } from "../language";
import type { AxisInfo, PlotLayer, PlotPoints, PlotResult } from "../page/results";
import type { Drawn } from "../page/schema";
import { State } from "../quantity/state";
import { condensationTemperature, elementsByCondensation, parseSpecies, resolveSpecies } from "../species";
import { valueOnBody } from "./valueOnBody";
import type { Drawing } from "./drawing";
import { countDrawn } from "./countDrawn";
import { at, chosenRows, emptyPoints, requireValuePerSample, samplesOf, tableOf, type SamplesDrawn } from "./samplesLayer";

/** One element, or other expression, of a pattern: where it stands across. */
interface Column {
  readonly text: string;
  readonly place: number;
  readonly field: string;
}

/**
 * A normalised pattern: every value divided by the same on the body that normalises, against the 50 % condensation temperature
 * of its element, or in a given order (x is then the place in it, from 1). One layer of samples for each value.
 */
export function evaluatePattern(drawing: Drawing): PlotResult {
  const { block, context } = drawing;
  const byTemperature = block.order === "condensation temperature" || block.order === undefined;
  const named: string[] = [];
  const layers: PlotLayer[] = [];
  const normaliser = block.normalise;
  const body = normaliser === undefined ? undefined : context.bodies(normaliser);
  drawing.attempt("normalise", () => {
    if (normaliser === undefined) throw new CellError("no-normaliser", "A pattern is divided by a body. Say which, such as CI.");
    if (body === undefined)
      throw new CellError(
        "unknown-body",
        `There is no body ${normaliser}. Give the page an alias of this name, or write the id of a compilation, such as CI_PLJ14.`,
      );
  });
  if (normaliser !== undefined && body !== undefined) {
    drawing.bodiesUsed[normaliser] = body.id;
    block.drawn.forEach((drawn, place) => {
      if (drawn.hidden === true) return;
      const made = drawing.attempt(`drawn[${place}]`, () => layersOf(drawing, drawn, place, normaliser, byTemperature, named));
      layers.push(...(made ?? []));
    });
  }
  const by = body === undefined ? "" : normaliser === body.id ? body.id : `${normaliser ?? ""} (${body.id})`;
  const x: AxisInfo = byTemperature
    ? { expression: "", label: "50 % condensation temperature", unit: "K", basis: null }
    : { expression: "", label: named.join(", "), unit: "1", basis: null };
  const y: AxisInfo = { expression: "", label: `normalised to ${by}`, unit: "1", basis: null };
  return { kind: "plot", plot: "pattern", x, y, layers, ...countDrawn(drawing, layers), problems: drawing.problems, bodiesUsed: drawing.bodiesUsed };
}

function layersOf(drawing: Drawing, drawn: Drawn, place: number, normaliser: string, byTemperature: boolean, named: string[]): PlotLayer[] {
  if ("annotation" in drawn) return [{ what: "annotation", drawn: place, text: drawn.annotation, x: drawn.x, y: drawn.y }];
  if ("data" in drawn) return samplesLayers(drawing, drawn, place, normaliser, byTemperature, named);
  if ("bodies" in drawn) return [bodiesOf(drawing, drawn.bodies, place, normaliser, byTemperature, named)];
  throw new CellError("not-drawn-here", "Trends, crossings and budget paths can be drawn on a scatter plot only. Take this one off the pattern.");
}

function samplesLayers(drawing: Drawing, drawn: SamplesDrawn, place: number, normaliser: string, byTemperature: boolean, named: string[]): PlotLayer[] {
  if (drawing.context.block(drawn.data)?.kind !== "data") return [];
  const table = tableOf(drawing, drawn, place);
  const chosen = chosenRows(drawing, drawn, place);
  return columnsOf(drawing, drawn, place, byTemperature, named).flatMap((column): PlotLayer[] => {
    const layer = drawing.attempt(column.field, () => {
      const placed = { text: `norm((${column.text}), ${writeName(normaliser)})`, data: drawn.data, field: column.field };
      const evaluated = drawing.evaluate(placed);
      requireValuePerSample(evaluated, table, { ...placed, text: column.text });
      return samplesOf(table, drawn, place, 0, pointsAt(evaluated, column.place, table.rows, table.setAside, chosen, drawing.block.yAxis?.scale === "log"));
    });
    return layer === undefined ? [] : [layer];
  });
}

function pointsAt(evaluated: Evaluated, x: number, rows: number, setAside: Uint8Array, chosen: Uint8Array | undefined, isLog: boolean): PlotPoints {
  const points = emptyPoints(rows);
  for (let row = 0; row < rows; row++) {
    const value = at(evaluated.value, row);
    let state = Math.max(at(evaluated.state, row), setAside[row] === 1 ? State.setAside : State.present);
    if (state === State.present && isLog && !(value > 0)) state = State.outOfDomain;
    points.state[row] = state;
    if (state !== State.present || (chosen !== undefined && chosen[row] !== 1)) continue;
    points.x[row] = x;
    points.sigmaX[row] = 0;
    points.y[row] = value;
    points.sigmaY[row] = at(evaluated.sigma, row);
    points.correlation[row] = 0;
  }
  return points;
}

/** The values a line of samples draws: its own list, else the plot's order, else every element the table gives that condenses. */
function columnsOf(drawing: Drawing, drawn: SamplesDrawn, place: number, byTemperature: boolean, named: string[]): Column[] {
  const { order } = drawing.block;
  const { table } = drawing.context.scope(drawn.data);
  const given = drawn.values ?? (Array.isArray(order) ? order : undefined);
  const texts = given ?? elementsByCondensation().filter((element) => table !== null && resolveSpecies(table, element)?.ok === true);
  const sorted = byTemperature ? texts : Array.isArray(order) ? [...texts].sort((a, b) => rank(order, a) - rank(order, b)) : texts;
  return sorted.flatMap((text): Column[] => {
    const field = drawn.values === undefined ? `drawn[${place}]` : `drawn[${place}].values[${drawn.values.indexOf(text)}]`;
    const column = drawing.attempt(field, () => ({
      text,
      place: placeOf(text, byTemperature, named, order),
      field,
    }));
    return column === undefined ? [] : [column];
  });
}

function rank(order: readonly string[], text: string): number {
  const found = order.indexOf(elementOf(text) ?? text);
  return found < 0 ? order.length : found;
}

function elementOf(text: string): string | undefined {
  return parseSpecies(text.trim().replace(/^`|`$/gu, ""))?.element;
}

/** Where a value stands across. @throws CellError where its element has no listed condensation temperature */
function placeOf(text: string, byTemperature: boolean, named: string[], order: unknown): number {
  const element = elementOf(text);
  if (!byTemperature) {
    const name = element ?? text;
    if (Array.isArray(order) && named.length === 0) named.push(...order.map(String));
    if (!named.includes(name)) named.push(name);
    return named.indexOf(name) + 1;
  }
  if (element === undefined)
    throw new CellError(
      "no-condensation-temperature",
      `${text} is no element or oxide, so it has no condensation temperature. Give the plot an order instead.`,
    );
  const row = condensationTemperature(element);
  if (row === undefined)
    throw new CellError(
      "no-condensation-temperature",
      `No condensation temperature is listed for ${element}. Leave it out, or give the plot an order instead.`,
    );
  return row.t50;
}

/** Bodies against the same: one mark for each element they give, of those the samples draw. */
function bodiesOf(drawing: Drawing, names: readonly string[], place: number, normaliser: string, byTemperature: boolean, named: string[]): PlotLayer {
  const field = `drawn[${place}].bodies`;
  const { block, context } = drawing;
  const order = Array.isArray(block.order) ? block.order : block.drawn.flatMap((drawn) => ("data" in drawn ? (drawn.values ?? []) : []));
  const texts = order.length > 0 ? [...new Set(order)] : elementsByCondensation();
  const scope = context.scope(undefined);
  const bodies = names.flatMap((name) => {
    const body = context.bodies(name);
    if (body === undefined) {
      drawing.attempt(field, () => {
        throw new CellError(
          "unknown-body",
          `There is no body ${name}. Give the page an alias of this name, or write the id of a compilation, such as CI_PLJ14.`,
        );
      });
      return [];
    }
    return texts.flatMap((text) => {
      const element = elementOf(text);
      if (element === undefined || (byTemperature && condensationTemperature(element) === undefined)) return [];
      const evaluated = valueOnBody(scope, `norm(${element}, ${writeName(normaliser)})`, name, { block: block.id, field });
      if (evaluated instanceof CellError) return [];
      drawing.bodiesUsed[name] = body.id;
      const sigma = evaluated.sigma[0] ?? Number.NaN;
      const known = Number.isFinite(sigma) && evaluated.lowerBound[0] !== 1;
      return [
        {
          name: `${name} ${element}`,
          compilation: body.id,
          x: placeOf(element, byTemperature, named, block.order),
          y: evaluated.value[0] ?? Number.NaN,
          sigmaX: 0,
          sigmaY: known ? sigma : null,
          correlation: 0,
        },
      ];
    });
  });
  return { what: "bodies", drawn: place, bodies };
}
