import { classStyle } from "@/app/_ui/classStyle";
import { classCodes } from "@/app/_blocks/shared/classCodes";
import { State, type PlotLayer } from "@/cells";
import type { Frame } from "../frame";
import { mostEllipses } from "../plotWords";
import type { Drawing } from "../traces";
import type { StampShape } from "./stamp";

type Samples = Extract<PlotLayer, { what: "samples" }>;

export interface CloudLook {
  readonly shape: StampShape;
  /** `#rrggbb`. */
  readonly color: string;
  /** Opacity, 0 to 1. */
  readonly alpha: number;
  /** In pixels of the page. */
  readonly radius: number;
}

/**
 * Samples too many to be drawn one by one by Plotly: painted as pixels under its axes. A hundred thousand markers take it more
 * than a second, and this some hundredths of one.
 */
export interface Cloud {
  readonly data: string;
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** For each row the place in `looks` of how it is drawn; `nowhere` where it is not. */
  readonly lookOf: Uint16Array;
  readonly looks: readonly CloudLook[];
}

/** What one painting of clouds needs to know. */
export interface CloudView {
  readonly clouds: readonly Cloud[];
  readonly frame: Frame;
  /** The ground, `#rrggbb`. */
  readonly paper: string;
}

export const nowhere = 0xffff;

/** Above so many, picked samples are painted too instead of ringed one by one. */
export const mostRings = 500;

/** Above so many samples markers are smaller: they would only cover each other. */
const crowded = 20_000;

function looksOf(names: readonly string[], drawing: Drawing, radius: number): CloudLook[] {
  const { palette } = drawing;
  return names.map((name) => {
    const index = name === "" ? -1 : drawing.classIndex(name);
    if (index < 0) return { shape: "circle", color: palette.second, alpha: 0.55, radius };
    const style = classStyle(index);
    return { shape: style.shape, color: style[palette.light].fill, alpha: 0.55, radius };
  });
}

/** Whether a layer has too many samples for markers of their own. */
export function isCloud(layer: Samples): boolean {
  return layer.points.x.length > mostEllipses;
}

/** The cloud that a layer of samples is painted as: each in its class's colour and shape, set-aside ones as thin crosses. */
export function cloudOf(layer: Samples, drawing: Drawing): Cloud {
  const { points } = layer;
  const { names, codes } = classCodes(layer.classes);
  const radius = (points.x.length > crowded ? 1.6 : 2.5) * (drawing.projector ? 1.6 : 1);
  const looks = looksOf(names, drawing, radius);
  const aside = looks.push({ shape: "cross", color: drawing.palette.second, alpha: 1, radius: 3 }) - 1;
  const none = looks.push({ shape: "circle", color: drawing.palette.second, alpha: 0.55, radius }) - 1;
  const lookOf = new Uint16Array(points.x.length).fill(nowhere);
  for (let i = 0; i < lookOf.length; i++) {
    const x = points.x[i] as number;
    const y = points.y[i] as number;
    if (x - x !== 0 || y - y !== 0) continue;
    const state = points.state[i];
    if (state === State.present) lookOf[i] = codes[i] ?? none;
    else if (state === State.setAside) lookOf[i] = aside;
  }
  const picked = drawing.pickedIn(layer.data);
  if (picked.length > mostRings) {
    const look = looks.push({ shape: "circle", color: drawing.palette.indigo, alpha: 1, radius: radius + 0.5 }) - 1;
    for (const i of picked) if (lookOf[i] !== nowhere) lookOf[i] = look;
  }
  return { data: layer.data, x: points.x, y: points.y, lookOf, looks };
}
