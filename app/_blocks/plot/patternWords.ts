import type { Annotations } from "plotly.js";
import type { PlotResult } from "@/cells";
import { spreadLabels } from "./axisTicks";
import type { Drawing } from "./traces";

type Write = (px: number, py: number, text: string, size: number, color: string, weight: number, extra: Partial<Annotations>) => Partial<Annotations>;

/** Room for an element's temperature, and for its symbol alone, in pixels. */
const withTemperature = 33;
const alone = 17;

/** Under a pattern: each element's symbol with its condensation temperature below, drawn apart where places crowd, with a leader to its place. */
export function patternWords(result: PlotResult, { frame, palette, projector }: Drawing, write: Write): Partial<Annotations>[] {
  const left = frame.margin.l;
  const right = frame.width - frame.margin.r;
  const columns = (result.columns ?? [])
    .map((column) => ({ ...column, px: frame.px(column.x) }))
    .filter(({ px }) => px >= left - 1 && px <= right + 1)
    .sort((a, b) => a.px - b.px);
  const longest = Math.max(2, ...columns.map(({ of }) => of.length));
  const hasRoom = columns.length * withTemperature <= right - left;
  const apart = Math.max(hasRoom ? withTemperature : alone, longest > 3 ? longest * 6.5 : 0);
  const middles = spreadLabels(
    columns.map(({ px }) => px),
    apart,
    left + 8,
    right - 8,
  );
  const bottom = frame.height - frame.margin.b;
  const base = { xanchor: "center", yanchor: "top", bgcolor: "rgba(0,0,0,0)" } as const;
  return columns.flatMap(({ of, temperature, px }, i) => {
    const at = middles[i] ?? px;
    const leader: Partial<Annotations> = {
      text: "",
      showarrow: true,
      arrowhead: 0,
      arrowwidth: 0.8,
      arrowcolor: palette.second,
      xref: "paper",
      yref: "paper",
      axref: "pixel",
      ayref: "pixel",
      x: (px - left) / (right - left),
      y: 0,
      ax: at - px,
      ay: 10,
      standoff: 0,
    };
    return [
      leader,
      write(at, bottom + 11, of, projector ? 15 : 12, palette.ink, 600, base),
      ...(hasRoom && temperature !== null ? [write(at, bottom + 27, String(temperature), projector ? 13 : 11, palette.second, 400, base)] : []),
    ];
  });
}
