/**
 * The look of a class of samples: a colour and a marker shape, fixed as a pair across the whole page. Colours are those of
 * Okabe & Ito 2008 (Color Universal Design); the outline, darker or lighter, carries a contrast of 3 : 1 on either ground.
 */
export type MarkerShape = "circle" | "square" | "diamond" | "triangle-up" | "triangle-down" | "hexagon" | "star" | "pentagon";

export interface ClassStyle {
  /** Also the name of Plotly's symbol. */
  readonly shape: MarkerShape;
  /** Place in the colour sequence, 0 to 7: `--class-N`, `--class-N-line` in globals.css (a test holds the two together). */
  readonly color: number;
  readonly plane: ClassColors;
  readonly polars: ClassColors;
}

export interface ClassColors {
  readonly fill: string;
  readonly line: string;
}

const colors: readonly { readonly plane: ClassColors; readonly polars: ClassColors }[] = [
  { plane: { fill: "#0072B2", line: "#0072B2" }, polars: { fill: "#4AA3DE", line: "#4AA3DE" } },
  { plane: { fill: "#E69F00", line: "#A87400" }, polars: { fill: "#E69F00", line: "#E6A817" } },
  { plane: { fill: "#CC79A7", line: "#A8457F" }, polars: { fill: "#CC79A7", line: "#D98BB6" } },
  { plane: { fill: "#009E73", line: "#00795A" }, polars: { fill: "#12B088", line: "#12B088" } },
  { plane: { fill: "#D55E00", line: "#C25400" }, polars: { fill: "#E8762B", line: "#F0863F" } },
  { plane: { fill: "#56B4E9", line: "#2A7FB4" }, polars: { fill: "#56B4E9", line: "#7CC6F0" } },
  { plane: { fill: "#F0E442", line: "#8A8000" }, polars: { fill: "#F0E442", line: "#F0E442" } },
  { plane: { fill: "#444B50", line: "#444B50" }, polars: { fill: "#B4BABF", line: "#B4BABF" } },
];

const shapes: readonly MarkerShape[] = ["circle", "square", "diamond", "triangle-up", "triangle-down", "hexagon", "star", "pentagon"];

/** Marker and colours of the class at a place in the page's class sequence; pairs repeat after 64 classes. */
export function classStyle(index: number): ClassStyle {
  const color = index % colors.length;
  const shape = shapes[(index + Math.floor(index / colors.length)) % shapes.length] ?? "circle";
  const pair = colors[color] ?? { plane: { fill: "#444B50", line: "#444B50" }, polars: { fill: "#B4BABF", line: "#B4BABF" } };
  return { shape, color, ...pair };
}

/** CSS value of a class's outline, which follows the light: for ticks and lines on paper. */
export function classLine(index: number): string {
  return index < 0 ? "var(--second)" : `var(--class-${classStyle(index).color}-line)`;
}

/** CSS value of a class's fill, which follows the light. */
export function classFill(index: number): string {
  return index < 0 ? "var(--paper)" : `var(--class-${classStyle(index).color})`;
}

function polygon(cx: number, cy: number, r: number, corners: number, turn: number, inner = 1): string {
  const n = inner === 1 ? corners : corners * 2;
  let path = "";
  for (let i = 0; i < n; i++) {
    const angle = turn + (i * 2 * Math.PI) / n;
    const radius = inner !== 1 && i % 2 === 1 ? r * inner : r;
    path += `${i === 0 ? "M" : "L"}${(cx + radius * Math.cos(angle)).toFixed(2)} ${(cy + radius * Math.sin(angle)).toFixed(2)}`;
  }
  return `${path}Z`;
}

/** SVG path of a marker around (cx, cy), drawn so that all shapes look equally heavy at radius `r`. */
export function markerPath(shape: MarkerShape, cx: number, cy: number, r: number): string {
  const up = -Math.PI / 2;
  switch (shape) {
    case "circle":
      return `M${cx - r} ${cy}a${r} ${r} 0 1 0 ${2 * r} 0a${r} ${r} 0 1 0 ${-2 * r} 0Z`;
    case "square":
      return polygon(cx, cy, r * 1.25, 4, Math.PI / 4);
    case "diamond":
      return polygon(cx, cy, r * 1.26, 4, up);
    case "triangle-up":
      return polygon(cx, cy + r * 0.22, r * 1.32, 3, up);
    case "triangle-down":
      return polygon(cx, cy - r * 0.22, r * 1.32, 3, -up);
    case "hexagon":
      return polygon(cx, cy, r * 1.12, 6, 0);
    case "star":
      return polygon(cx, cy, r * 1.4, 5, up, 0.42);
    case "pentagon":
      return polygon(cx, cy, r * 1.15, 5, up);
  }
}
