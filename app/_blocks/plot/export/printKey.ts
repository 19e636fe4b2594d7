import type { PlotResult } from "@/cells";
import type { Palette } from "@/app/_blocks/shared/usePalette";
import { classStyle, markerPath } from "@/app/_ui/classStyle";
import { classCounts } from "../ClassKey";
import { roughWidth } from "../placeLabels";
import { looks } from "../traces";
import { escapedForXml } from "./finishSvg";

const SIZE = 11;
const ROW = 18;
const MARK = 14;
const GAP = 16;
const EDGE = 12;

/** The key of classes under a figure in print, where no page stands beside it that could say it. */
export interface PrintKey {
  /** What it takes of the figure's height, in pixels. */
  readonly height: number;
  /** Marks and words as SVG, from `top` pixels down. */
  svg(top: number): string;
}

/** Null where there is nothing to tell apart, or the drawing says it: the rows of a distribution name their classes. */
export function printKey(result: PlotResult, width: number, palette: Palette, classIndex: (name: string) => number): PrintKey | null {
  const classes = result.plot === "distribution" ? [] : classCounts(result, classIndex);
  if (classes.length === 0 || (classes.length === 1 && classes[0]?.name === "")) return null;
  const entries = classes.map(({ name, count }) => ({ index: name === "" ? -1 : classIndex(name), words: `${name === "" ? "no class" : name} (${count})` }));
  const places: { readonly x: number; readonly row: number }[] = [];
  let [x, row] = [EDGE, 0];
  for (const { words } of entries) {
    const across = MARK + Math.ceil(roughWidth(words, SIZE));
    if (x > EDGE && x + across > width - EDGE) [x, row] = [EDGE, row + 1];
    places.push({ x, row });
    x += across + GAP;
  }
  const height = (row + 1) * ROW + 10;
  return {
    height,
    svg: (top) => {
      const marks = entries.map(({ index, words }, i) => {
        const { x, row } = places[i] ?? { x: EDGE, row: 0 };
        const y = top + row * ROW + ROW / 2;
        const look = looks(index, palette);
        const path = markerPath(index < 0 ? "circle" : classStyle(index).shape, x + 5, y, 3.75);
        const text = `<text x="${x + MARK}" y="${y + 4}" style="font-family: 'IBM Plex Sans', 'Helvetica Neue', Arial, sans-serif; font-size: ${SIZE}px; fill: ${palette.ink};">${escapedForXml(words)}</text>`;
        return `<path d="${path}" style="fill: ${look.fill}; stroke: ${look.line}; stroke-width: 1;"/>${text}`;
      });
      return `<g class="key">${marks.join("")}</g>`;
    },
  };
}
