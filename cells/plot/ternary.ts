import { isPlainName } from "../language";
import type { PlotBlock } from "../page/schema";
import { plotAxis } from "../page/references";
import type { Drawing } from "./drawing";

/**
 * A ternary as a scatter of shares: x is that of the first corner in the sum of the three, y that of the second. Both are
 * expressions of their own, so that σ, correlation, and the check that the three can be added at all come with them.
 */
export function ternaryBlock(block: PlotBlock, drawing: Drawing): PlotBlock {
  const bracketed = (text: string): string => (isPlainName(text.trim()) ? text.trim() : `(${text.trim()})`);
  const share = (of: string, corners: readonly string[]): string => `${bracketed(of)} / (${corners.map(bracketed).join(" + ")})`;
  const first = block.drawn.find((drawn) => "data" in drawn && drawn.z !== undefined);
  const mainZ = first !== undefined && "data" in first ? first.z : undefined;
  const drawn = block.drawn.map((line, place) => {
    if (!("data" in line)) return line;
    const [x, y, z] = [line.x ?? plotAxis(block, "x"), line.y ?? plotAxis(block, "y"), line.z ?? mainZ];
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
  return { ...rest, drawn };
}
