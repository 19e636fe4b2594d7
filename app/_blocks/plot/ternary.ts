import { tickStep } from "@/app/_blocks/shared/scale";
import type { Curve, PlotLayer, PlotResult } from "@/cells";
import { plotFrame, type Frame, type ViewRange } from "./frame";

/** Height of an equilateral triangle of side 1. */
export const HEIGHT = Math.sqrt(3) / 2;

/** Room for corner labels and figures around the triangle, in pixels. */
const room = { l: 36, r: 36, t: 22, b: 68 } as const;
/** Between the triangle and the edge of the drawing surface, which cuts off what lies outside: ticks stand there. */
const around = 8;

/** Where two shares stand on the drawing: the first corner at the lower right, the second at the top, the third at the lower left. */
export function ternaryPoint(x: number, y: number): readonly [number, number] {
  return [x + y / 2, HEIGHT * y];
}

/** The shares at a place of the drawing. */
export function sharesAt(u: number, v: number): readonly [number, number] {
  const y = v / HEIGHT;
  return [u - y / 2, y];
}

/** Covariance of two shares, brought to the drawing. */
function spreadAt(sx: number, sy: number, correlation: number): { readonly sx: number; readonly sy: number; readonly correlation: number } {
  const shared = correlation * sx * sy;
  const u = Math.sqrt(Math.max(0, sx * sx + shared + (sy * sy) / 4));
  const v = HEIGHT * sy;
  const uv = HEIGHT * (shared + (sy * sy) / 2);
  return { sx: u, sy: v, correlation: u > 0 && v > 0 ? Math.max(-1, Math.min(1, uv / (u * v))) : 0 };
}

function curve(of: Curve): Curve {
  return { x: of.x.map((x, i) => ternaryPoint(x, of.y[i] ?? NaN)[0]), y: of.y.map((y) => HEIGHT * y) };
}

/** A ternary laid out on plain axes: shares become places in an equilateral triangle, σ and ellipses with them. */
export function layOutTernary(result: PlotResult): PlotResult {
  const at = <P extends { readonly x: number; readonly y: number }>(point: P): P => {
    const [x, y] = ternaryPoint(point.x, point.y);
    return { ...point, x, y };
  };
  const layers = result.layers.map((layer): PlotLayer => {
    switch (layer.what) {
      case "samples": {
        const { points } = layer;
        const n = points.x.length;
        const next = {
          ...points,
          x: new Float64Array(n),
          y: new Float64Array(n),
          sigmaX: new Float64Array(n),
          sigmaY: new Float64Array(n),
          correlation: new Float64Array(n),
        };
        for (let i = 0; i < n; i++) {
          [next.x[i], next.y[i]] = ternaryPoint(points.x[i] ?? NaN, points.y[i] ?? NaN);
          const spread = spreadAt(points.sigmaX[i] ?? NaN, points.sigmaY[i] ?? NaN, points.correlation[i] ?? 0);
          next.sigmaX[i] = spread.sx;
          next.sigmaY[i] = spread.sy;
          next.correlation[i] = spread.correlation;
        }
        return { ...layer, points: next };
      }
      case "bodies":
        return { ...layer, bodies: layer.bodies.map((body) => ({ ...at(body), ...(body.ellipse === undefined ? {} : { ellipse: curve(body.ellipse) }) })) };
      case "path":
        return { ...layer, line: curve(layer.line), ticks: layer.ticks.map(at), ...(layer.end === undefined ? {} : { end: at(layer.end) }) };
      case "annotation":
        return at(layer);
      default:
        return layer;
    }
  });
  return { ...result, layers };
}

/** The frame of a ternary: one scale across and upwards, so that the triangle is equilateral at any size and close-up. */
export function ternaryFrame(width: number, height: number, closeUp: ViewRange | null): Frame {
  const inner = { w: width - room.l - room.r, h: height - room.t - room.b };
  const view = closeUp ?? { x: [0, 1] as const, y: [0, HEIGHT] as const };
  const perPixel = Math.max((view.x[1] - view.x[0]) / (inner.w - 2 * around), (view.y[1] - view.y[0]) / (inner.h - 2 * around));
  const middle = { x: (view.x[0] + view.x[1]) / 2, y: (view.y[0] + view.y[1]) / 2 };
  const half = { x: (perPixel * inner.w) / 2, y: (perPixel * inner.h) / 2 };
  return plotFrame(width, height, { x: [middle.x - half.x, middle.x + half.x], y: [middle.y - half.y, middle.y + half.y] }, false, false, room);
}

/** Height of a drawing so wide that the triangle fills it. */
export function ternaryHeight(width: number): number {
  return Math.round(Math.min(640, (width - room.l - room.r - 2 * around) * HEIGHT + room.t + room.b + 2 * around));
}

type Point = readonly [u: number, v: number];

/** One of the three axes: its figures stand outside its edge, and its grid lines start there. */
export interface TernaryAxis {
  readonly corner: "x" | "y" | "z";
  /** Where a share stands on the edge, and where its grid line ends. */
  from(share: number): Point;
  to(share: number): Point;
  /** Direction of the edge's ticks, outwards, a vector of length 1. */
  readonly outward: Point;
  /** Which way along the edge the share grows, in degrees on the screen. */
  readonly angle: number;
}

/** Counter-clockwise: the first corner's shares under the lower edge, the second's at the right, the third's at the left. */
export const ternaryAxes: readonly TernaryAxis[] = [
  { corner: "x", from: (t) => ternaryPoint(t, 0), to: (t) => ternaryPoint(t, 1 - t), outward: [-0.5, -HEIGHT], angle: 0 },
  { corner: "y", from: (t) => ternaryPoint(1 - t, t), to: (t) => ternaryPoint(0, t), outward: [1, 0], angle: -60 },
  { corner: "z", from: (t) => ternaryPoint(0, 1 - t), to: (t) => ternaryPoint(1 - t, 0), outward: [-0.5, HEIGHT], angle: 60 },
];

/** Shares that have a grid line: 20 % apart in the whole triangle, closer in a close-up. */
export function ternaryGrid(frame: Frame): readonly number[] {
  const step = Math.min(0.2, tickStep(frame.view.x[1] - frame.view.x[0], frame.width < 420 ? 5 : 8));
  return Array.from({ length: Math.round(1 / step) - 1 }, (_, i) => Number(((i + 1) * step).toPrecision(6)));
}
