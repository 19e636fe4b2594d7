import { CellError } from "../errors";
import { writeName, type Evaluated } from "../language";
import type { AxisInfo, PlotLayer, PlotPoints, PlotResult } from "../page/results";
import type { Drawn } from "../page/schema";
import { State } from "../quantity/state";
import { condensationTemperature, elementsByCondensation } from "../species";
import { countDrawn } from "./countDrawn";
import type { Drawing } from "./drawing";
import { warnOutOfLog, warnRangeOfLog } from "./logAxis";
import { classMeans, type PatternValues } from "./patternMeans";
import { columnsOf, elementOf, nameOf, PatternOrder, textsOf } from "./patternColumns";
import { at, chosenRows, emptyPoints, requireValuePerSample, samplesOf, tableOf, type SamplesDrawn } from "./samplesLayer";
import { valueOnBody } from "./valueOnBody";

/** What the lines of one pattern share. */
interface Pattern {
  readonly drawing: Drawing;
  /** What a value comes to: divided by what the pattern is relative to, then by the same on the body. */
  readonly written: (text: string) => string;
  readonly order: PatternOrder;
  readonly isLog: boolean;
  /** Layers that are not drawn themselves, since their means are, and still hold the samples that count. */
  readonly counted: PlotLayer[];
}

/**
 * A normalised pattern: every value divided by the same on the body that normalises. Across stands the 50 % condensation
 * temperature of its element, or its place in an order, from 1. One layer of samples for each value, or one of class means.
 */
export function evaluatePattern(drawing: Drawing): PlotResult {
  const { block, context } = drawing;
  const order = new PatternOrder(drawing);
  const layers: PlotLayer[] = [];
  const counted: PlotLayer[] = [];
  const normaliser = block.normalise;
  const body = normaliser === undefined ? undefined : context.bodies(normaliser);
  drawing.attempt("normalise", () => {
    if (normaliser === undefined) throw new CellError("no-normaliser", "A pattern is divided by a body. Say which, such as CI.");
    if (body === undefined) throw unknownBody(normaliser);
  });
  if (normaliser !== undefined && body !== undefined) {
    drawing.bodiesUsed[normaliser] = body.id;
    const per = block.per === undefined || block.per.trim() === "" ? "" : ` / (${block.per})`;
    const written = (text: string): string => `norm((${text})${per}, ${writeName(normaliser)})`;
    const pattern: Pattern = { drawing, written, order, isLog: block.yAxis?.scale === "log", counted };
    block.drawn.forEach((drawn, place) => {
      if (drawn.hidden === true) return;
      const made = drawing.attempt(`drawn[${place}]`, () => layersOf(pattern, drawn, place));
      layers.push(...(made ?? []));
    });
  }
  warnRangeOfLog(drawing);
  const by = body === undefined ? "" : normaliser === body.id ? body.id : `${normaliser ?? ""} (${body.id})`;
  const columns = order.columns(usedBy(layers));
  const x: AxisInfo = order.isByTemperature
    ? { expression: "", label: "50 % condensation temperature", unit: "K", basis: null }
    : {
        expression: "",
        label: block.order === "condensation order" ? "in order of 50 % condensation temperature, K" : columns.map(({ of }) => of).join(", "),
        unit: "1",
        basis: null,
      };
  const relative = block.per === undefined || block.per.trim() === "" ? "" : `relative to ${block.per.trim()}, `;
  const y: AxisInfo = { expression: "", label: `${relative}normalised to ${by}`, unit: "1", basis: null };
  return {
    kind: "plot",
    plot: "pattern",
    x,
    y,
    columns,
    layers,
    ...countDrawn(drawing, [...layers, ...counted]),
    problems: drawing.problems,
    bodiesUsed: drawing.bodiesUsed,
  };
}

function usedBy(layers: readonly PlotLayer[]): ReadonlySet<string> {
  return new Set(
    layers.flatMap((layer) => {
      if (layer.what === "samples") return layer.of ?? [];
      if (layer.what === "means") return layer.classes.flatMap(({ points }) => points.map(({ of }) => of));
      return layer.what === "bodies" ? layer.bodies.flatMap(({ of }) => of ?? []) : [];
    }),
  );
}

function unknownBody(name: string): CellError {
  return new CellError("unknown-body", `There is no body ${name}. Give the page an alias of this name, or write the id of a compilation, such as CI_PLJ14.`);
}

function layersOf(pattern: Pattern, drawn: Drawn, place: number): PlotLayer[] {
  if ("annotation" in drawn) return [{ what: "annotation", drawn: place, text: drawn.annotation, x: drawn.x, y: drawn.y }];
  if ("data" in drawn) return samplesLayers(pattern, drawn, place);
  if ("bodies" in drawn) return [bodiesOf(pattern, drawn.bodies, place)];
  throw new CellError("not-drawn-here", "Trends, crossings and budget paths can be drawn on a scatter plot only. Take this one off the pattern.");
}

function samplesLayers({ drawing, written, order, isLog, counted }: Pattern, drawn: SamplesDrawn, place: number): PlotLayer[] {
  if (drawing.context.block(drawn.data)?.kind !== "data") return [];
  const table = tableOf(drawing, drawn, place);
  const chosen = chosenRows(drawing, drawn, place);
  let outside = 0;
  const values = columnsOf(drawing, drawn, place, order).flatMap((column): PatternValues[] => {
    const made = drawing.attempt(column.field, () => {
      const placed = { text: written(column.text), data: drawn.data, field: column.field };
      const evaluated = drawing.evaluate(placed);
      requireValuePerSample(evaluated, table, { ...placed, text: column.text });
      const { points, off } = pointsAt(evaluated, column.place, table.rows, table.setAside, chosen, isLog);
      outside += off;
      return { of: column.of, place: column.place, points, evaluated };
    });
    return made === undefined ? [] : [made];
  });
  warnOutOfLog(drawing, `drawn[${place}]`, drawn.data, outside, "value");
  const joined = drawn.join !== "none";
  const layers = values.map(({ of, points }): PlotLayer => ({ ...samplesOf(table, drawn, place, 0, points), of, joined }));
  if (drawn.join !== "class") return layers;
  counted.push(...layers);
  warnOfDetection(drawing, `drawn[${place}]`, values, table.classes, chosen);
  return [{ what: "means", drawn: place, data: drawn.data, classes: classMeans(values, table.classes) }];
}

/** A mean over the samples that were above detection alone is too high, and must not pass for that of the class. */
function warnOfDetection(drawing: Drawing, field: string, values: readonly PatternValues[], classes: readonly string[], chosen: Uint8Array | undefined): void {
  const found = values.flatMap(({ of, points }): string[] => {
    const below = new Map<string, number>();
    const present = new Set<string>();
    for (let row = 0; row < classes.length; row++) {
      if (chosen !== undefined && chosen[row] !== 1) continue;
      const name = classes[row] ?? "";
      if (points.state[row] === State.present) present.add(name);
      else if (points.state[row] === State.belowDetection) below.set(name, (below.get(name) ?? 0) + 1);
    }
    return [...below].flatMap(([name, count]) => (present.has(name) ? [`${of} of ${name === "" ? "no class" : name} (${count})`] : []));
  });
  if (found.length > 0)
    drawing.warn("mean-without-detection", field, `Values below detection are not in the means, so these are too high: ${found.join(", ")}.`);
}

function pointsAt(
  evaluated: Evaluated,
  x: number,
  rows: number,
  setAside: Uint8Array,
  chosen: Uint8Array | undefined,
  isLog: boolean,
): { readonly points: PlotPoints; readonly off: number } {
  const points = emptyPoints(rows);
  let off = 0;
  for (let row = 0; row < rows; row++) {
    const value = at(evaluated.value, row);
    const isChosen = chosen === undefined || chosen[row] === 1;
    let state = Math.max(at(evaluated.state, row), setAside[row] === 1 ? State.setAside : State.present);
    if (state === State.present && isLog && !(value > 0)) {
      state = State.outOfDomain;
      if (isChosen) off++;
    }
    points.state[row] = state;
    if (state !== State.present || !isChosen) continue;
    points.x[row] = x;
    points.sigmaX[row] = 0;
    points.y[row] = value;
    points.sigmaY[row] = at(evaluated.sigma, row);
    points.correlation[row] = 0;
  }
  return { points, off };
}

/** Bodies against the same: one mark for each value they give, of those the samples draw; of all elements where none are drawn. */
function bodiesOf({ drawing, written, order }: Pattern, names: readonly string[], place: number): PlotLayer {
  const field = `drawn[${place}].bodies`;
  const { block, context } = drawing;
  const drawnTexts = block.drawn.flatMap((drawn) => ("data" in drawn && drawn.hidden !== true ? textsOf(drawing, drawn) : []));
  const asked = Array.isArray(block.order) ? [...block.order, ...drawnTexts] : drawnTexts;
  const texts = [...new Map((asked.length > 0 ? asked : elementsByCondensation()).map((text) => [nameOf(text), elementOf(text) ?? text])).values()];
  const needsTemperature = order.isByTemperature || block.order === "condensation order";
  const scope = context.scope(undefined);
  const bodies = names.flatMap((name) => {
    const body = context.bodies(name);
    if (body === undefined) {
      drawing.attempt(field, () => {
        throw unknownBody(name);
      });
      return [];
    }
    return texts.flatMap((text) => {
      const of = nameOf(text);
      if (needsTemperature && condensationTemperature(of) === undefined) return [];
      const evaluated = valueOnBody(scope, written(text), name, { block: block.id, field });
      if (evaluated instanceof CellError) return [];
      drawing.bodiesUsed[name] = body.id;
      const sigma = evaluated.sigma[0] ?? Number.NaN;
      const known = Number.isFinite(sigma) && evaluated.lowerBound[0] !== 1;
      return [
        {
          name: `${name} ${of}`,
          body: name,
          of,
          compilation: body.id,
          x: order.placeOf(of),
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
