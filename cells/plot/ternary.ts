import { isPlainName } from "../language";
import type { PlotLayer, PlotResult } from "../page/results";
import type { PlotBlock } from "../page/schema";
import { plotAxis } from "../page/references";
import { State } from "../quantity/state";
import { compact } from "./axes";
import type { Drawing } from "./drawing";

/**
 * A ternary as a scatter of shares: x is that of the first corner in the sum of the three, y that of the second. Both are
 * expressions of their own, so that σ, correlation, and the check that the three can be added at all come with them.
 */
export function ternaryBlock(block: PlotBlock, drawing: Drawing): PlotBlock {
  const main = mainCorners(block);
  const drawn = block.drawn.map((line, place) => {
    if (!("data" in line)) return line;
    const [x, y, z] = [line.x ?? plotAxis(block, "x"), line.y ?? plotAxis(block, "y"), line.z ?? main.z];
    const missing = (
      [
        ["x", x],
        ["y", y],
        ["z", z],
      ] as const
    ).find(([, text]) => text === undefined || text.trim() === "");
    if (x === undefined || y === undefined || z === undefined || missing !== undefined) {
      const { x: _ownX, y: _ownY, ...without } = line;
      if (line.hidden === true) return without;
      drawing.note({
        code: "no-axis",
        severity: "error",
        block: block.id,
        field: `drawn[${place}].${missing?.[0] ?? "z"}`,
        text: `A ternary has three corners, and the samples of ${line.data} have no expression for ${missing?.[0] ?? "z"}. Give one, such as Ca.`,
      });
      return { ...without, hidden: true };
    }
    return { ...line, x: share(x, [x, y, z]), y: share(y, [x, y, z]) };
  });
  const { x: _x, y: _y, ...rest } = block;
  if (drawn.some((line) => "data" in line && "x" in line && line.x !== undefined)) return { ...rest, drawn };
  // Nothing but bodies and budgets: the plot's own corners are the axes.
  const { x, y, z } = main;
  return isGiven(x) && isGiven(y) && isGiven(z) ? { ...rest, drawn, x: share(x, [x, y, z]), y: share(y, [x, y, z]) } : { ...rest, drawn };
}

const isGiven = (text: string | undefined): text is string => text !== undefined && text.trim() !== "";

function bracketed(text: string): string {
  return isPlainName(text.trim()) ? text.trim() : `(${text.trim()})`;
}

function share(of: string, corners: readonly string[]): string {
  return `${bracketed(of)} / (${corners.map(bracketed).join(" + ")})`;
}

/** The plot's own corners, else those of its first line of samples that has them. */
function mainCorners(block: PlotBlock): { readonly x: string | undefined; readonly y: string | undefined; readonly z: string | undefined } {
  const first = block.drawn.find((drawn) => "data" in drawn && drawn.z !== undefined);
  return { x: plotAxis(block, "x"), y: plotAxis(block, "y"), z: block.z ?? (first !== undefined && "data" in first ? first.z : undefined) };
}

/** What stands at the corners, for people; undefined where one is not given. */
export function cornersOf(block: PlotBlock): PlotResult["corners"] {
  const { x, y, z } = mainCorners(block);
  return isGiven(x) && isGiven(y) && isGiven(z) ? { x: compact(x), y: compact(y), z: compact(z) } : undefined;
}

/** A share below 0 or above 1, from a negative value, lies outside the triangle: such samples are out of domain, and said to be. */
export function keepInside(drawing: Drawing, layer: PlotLayer, place: number): void {
  if (layer.what !== "samples") return;
  const { x, y, state } = layer.points;
  let outside = 0;
  for (let row = 0; row < state.length; row++) {
    const [a, b] = [x[row] ?? Number.NaN, y[row] ?? Number.NaN];
    if (Number.isNaN(a) || Number.isNaN(b) || (a >= 0 && b >= 0 && a + b <= 1 + 1e-12)) continue;
    state[row] = State.outOfDomain;
    x[row] = Number.NaN;
    y[row] = Number.NaN;
    outside++;
  }
  if (outside > 0)
    drawing.warn(
      "outside-triangle",
      `drawn[${place}]`,
      `${outside} ${outside === 1 ? "sample" : "samples"} of ${layer.data} would lie outside the triangle, since a corner has a negative value there. Such samples are counted as out of domain.`,
    );
}
