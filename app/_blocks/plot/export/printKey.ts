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
  const across = MARK + GAP + Math.ceil(Math.max(...entries.map(({ words }) => roughWidth(words, SIZE))));
  const columns = Math.min(entries.length, Math.max(1, Math.floor((width - 2 * EDGE + GAP) / across)));
  const left = (width - columns * across + GAP) / 2;
  const height = Math.ceil(entries.length / columns) * ROW + 10;
  return {
    height,
    svg: (top) => {
      const marks = entries.map(({ index, words }, i) => {
        const x = left + (i % columns) * across;
        const y = top + Math.floor(i / columns) * ROW + ROW / 2;
        const look = looks(index, palette);
        const path = markerPath(index < 0 ? "circle" : classStyle(index).shape, x + 5, y, 3.75);
        const text = `<text x="${x + MARK}" y="${y + 4}" style="font-family: 'IBM Plex Sans', 'Helvetica Neue', Arial, sans-serif; font-size: ${SIZE}px; fill: ${palette.ink};">${escapedForXml(words)}</text>`;
        return `<path d="${path}" style="fill: ${look.fill}; stroke: ${look.line}; stroke-width: 1;"/>${text}`;
      });
      return `<g class="key">${marks.join("")}</g>`;
    },
  };
}
