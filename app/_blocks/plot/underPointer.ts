import type { PlotLayer, PlotResult } from "@/cells";
import { axisInWords } from "./plotWords";
import type { PointRef } from "./traces";

/** One number under the pointer. */
export interface PointedValue {
  readonly of: string;
  readonly value: number | null;
  readonly sigma: number | null;
}

/** What the pointer is on. */
export interface Pointed {
  /** What is named after something else than a sample: a body with its compilation, the mean of a class. */
  readonly title: string | null;
  readonly class: string;
  readonly reference: string;
  readonly values: readonly PointedValue[];
  readonly correlation: number;
}

interface Place {
  readonly x: number | null;
  readonly y: number | null;
  readonly sigmaX: number | null;
  readonly sigmaY: number | null;
  readonly correlation: number;
}

/** Numbers of a place in the words of its kind of plot. A share that has no column of its own is what the others leave. */
export function valuesAt(result: PlotResult, place: Place, of: string | undefined): readonly PointedValue[] {
  const { corners } = result;
  if (result.plot === "pattern") {
    const column = result.columns?.find((each) => each.of === of);
    const heat = column?.temperature ?? null;
    return [
      { of: `${of ?? ""}, ${axisInWords(result.y, undefined)}`, value: place.y, sigma: place.sigmaY },
      ...(heat === null ? [] : [{ of: "50 % condensation, K", value: heat, sigma: null }]),
    ];
  }
  if (result.plot === "ternary" && corners !== undefined) {
    const [x, y, sx, sy] = [place.x ?? NaN, place.y ?? NaN, place.sigmaX ?? NaN, place.sigmaY ?? NaN];
    const third = Math.sqrt(Math.max(0, sx * sx + sy * sy + 2 * place.correlation * sx * sy));
    const share = (corner: string, value: number, sigma: number): PointedValue => ({
      of: `${corner}, %`,
      value: value * 100,
      sigma: Number.isFinite(sigma) ? sigma * 100 : null,
    });
    return [share(corners.x, x, sx), share(corners.y, y, sy), share(corners.z, 1 - x - y, third)];
  }
  const across = { of: axisInWords(result.x, undefined), value: place.x, sigma: place.sigmaX };
  return result.plot === "distribution" ? [across] : [across, { of: axisInWords(result.y, undefined), value: place.y, sigma: place.sigmaY }];
}

type Samples = Extract<PlotLayer, { what: "samples" }>;

/** What stands where the pointer is; null for nothing of the plot's. */
export function pointedAt(result: PlotResult, ref: PointRef): Pointed | null {
  const samples = result.layers.find((layer): layer is Samples => layer.what === "samples" && layer.data === ref.data && layer.of === ref.of);
  if (samples !== undefined && ref.index >= 0) {
    const { points } = samples;
    const at = (values: Float64Array): number | null => values[ref.index] ?? null;
    const place = { x: at(points.x), y: at(points.y), sigmaX: at(points.sigmaX), sigmaY: at(points.sigmaY), correlation: at(points.correlation) ?? NaN };
    return {
      title: null,
      class: samples.classes[ref.index] ?? "",
      reference: samples.references[ref.index] ?? "",
      values: valuesAt(result, place, ref.of),
      correlation: result.plot === "scatter" ? place.correlation : NaN,
    };
  }
  for (const layer of result.layers) {
    if (layer.what === "bodies") {
      const body = layer.bodies.find((each) => `body ${each.name}` === ref.data);
      if (body !== undefined)
        return {
          title: `${body.body ?? body.name}, ${body.compilation}`,
          class: "",
          reference: "",
          values: valuesAt(result, body, body.of),
          correlation: result.plot === "scatter" ? body.correlation : NaN,
        };
    } else if (layer.what === "means") {
      const mean = layer.classes.find((each) => `mean ${each.name}` === ref.data);
      const point = mean?.points.find((each) => each.of === ref.of);
      if (mean !== undefined && point !== undefined)
        return {
          title: `Mean of ${point.n}`,
          class: mean.name,
          reference: "",
          values: valuesAt(result, { x: point.x, y: point.y, sigmaX: 0, sigmaY: point.sigmaY, correlation: 0 }, point.of),
          correlation: NaN,
        };
    }
  }
  return null;
}
