import type { Annotations, Data } from "plotly.js";
import type { PlotResult } from "@/cells";
import { basisInWords } from "@/app/_blocks/shared/words";
import { chemicalMarkup } from "./chemicalMarkup";
import { HEIGHT, ternaryAxes, ternaryGrid, ternaryPoint } from "./ternary";
import { silent, type Drawing } from "./traces";

const TICK = 6;

/** The triangle under everything: grid, edges, ticks outside. */
export function ternaryTraces({ frame, palette }: Drawing): Data[] {
  const perPixel = (frame.view.x[1] - frame.view.x[0]) / (frame.width - frame.margin.l - frame.margin.r);
  const grid: { x: (number | null)[]; y: (number | null)[] } = { x: [], y: [] };
  const ticks: { x: (number | null)[]; y: (number | null)[] } = { x: [], y: [] };
  for (const axis of ternaryAxes)
    for (const share of ternaryGrid(frame)) {
      const [a, b] = [axis.from(share), axis.to(share)];
      grid.x.push(a[0], b[0], null);
      grid.y.push(a[1], b[1], null);
      ticks.x.push(a[0], a[0] + axis.outward[0] * TICK * perPixel, null);
      ticks.y.push(a[1], a[1] + axis.outward[1] * TICK * perPixel, null);
    }
  const corners = [ternaryPoint(0, 0), ternaryPoint(1, 0), ternaryPoint(0, 1), ternaryPoint(0, 0)];
  return [
    { ...silent, type: "scatter", mode: "lines", cliponaxis: false, ...grid, line: { color: palette.hairline, width: 1 } } as Data,
    { ...silent, type: "scatter", mode: "lines", cliponaxis: false, ...ticks, line: { color: palette.ink, width: 1 } } as Data,
    {
      ...silent,
      type: "scatter",
      mode: "lines",
      cliponaxis: false,
      x: corners.map(([u]) => u),
      y: corners.map(([, v]) => v),
      line: { color: palette.ink, width: 1.2 },
    } as Data,
  ];
}

/** What the sum of a ternary is made of and that it is brought to 100 %: `% by mass, MgO + SiO2 + Al2O3 = 100`. */
export function sumInWords(result: PlotResult): string {
  const { corners } = result;
  if (corners === undefined) return "";
  const basis = basisInWords(result.x.basis);
  return `%${basis === "" ? "" : ` ${basis}`}, normalised to ${corners.x} + ${corners.y} + ${corners.z} = 100`;
}

type Write = (px: number, py: number, text: string, size: number, color: string, weight: number, extra: Partial<Annotations>) => Partial<Annotations>;

/** All that is written around the triangle: corners, axes along their edges, figures at the grid, and the sum. */
export function ternaryWords(result: PlotResult, { frame, palette, projector }: Drawing, write: Write): Partial<Annotations>[] {
  const { corners } = result;
  const isIn = (px: number, py: number): boolean => px > 2 && px < frame.width - 2 && py > 2 && py < frame.height - 2;
  const notes: Partial<Annotations>[] = [];
  const put = (px: number, py: number, text: string, size: number, color: string, weight: number, extra: Partial<Annotations> = {}): void => {
    if (isIn(px, py)) notes.push(write(px, py, text, size, color, weight, { xanchor: "center", yanchor: "middle", bgcolor: "rgba(0,0,0,0)", ...extra }));
  };
  const size = projector ? 14 : 11;
  for (const axis of ternaryAxes) {
    for (const share of ternaryGrid(frame)) {
      const [u, v] = axis.from(share);
      put(frame.px(u) + axis.outward[0] * 17, frame.py(v) - axis.outward[1] * 15, String(Number((share * 100).toPrecision(6))), size, palette.second, 400);
    }
    if (corners === undefined) continue;
    const [u, v] = axis.from(0.5);
    // Outwards from the middle of the edge: its normal is 30° off its ticks.
    const normal = { x: [0, 1], y: [HEIGHT, -0.5], z: [-HEIGHT, -0.5] }[axis.corner];
    const [dx = 0, dy = 0] = normal;
    const text = axis.corner !== "x" ? `← ${chemicalMarkup(corners[axis.corner])}, %` : `${chemicalMarkup(corners[axis.corner])}, % →`;
    put(frame.px(u) + dx * 36, frame.py(v) + dy * 36, text, 12, palette.ink, 500, {
      textangle: String(axis.corner === "x" ? 0 : axis.corner === "y" ? 60 : -60),
    });
  }
  if (corners !== undefined) {
    const at = { x: ternaryPoint(1, 0), y: ternaryPoint(0, 1), z: ternaryPoint(0, 0) };
    put(frame.px(at.y[0]), frame.py(at.y[1]) - 14, chemicalMarkup(corners.y), 14, palette.ink, 600);
    put(frame.px(at.x[0]) + 14, frame.py(at.x[1]) + 14, chemicalMarkup(corners.x), 14, palette.ink, 600);
    put(frame.px(at.z[0]) - 14, frame.py(at.z[1]) + 14, chemicalMarkup(corners.z), 14, palette.ink, 600);
    notes.push(
      write(frame.width / 2, frame.height - 10, chemicalMarkup(sumInWords(result)), 11, palette.second, 400, { xanchor: "center", yanchor: "middle" }),
    );
  }
  return notes;
}
