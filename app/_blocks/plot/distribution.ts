import { extent } from "@/app/_blocks/shared/spread";
import { State, type PlotLayer, type PlotResult } from "@/cells";

/** A distribution laid out: every sample at its value across, in the row of its class, swarmed where samples crowd. */
export interface Distribution {
  readonly result: PlotResult;
  /** Names of the rows, from the lowest; row i lies at height i. */
  readonly rows: readonly string[];
}

/** Bins across in which samples stand one beside the other. */
const bins = 80;
/** Half the height of a swarm, in rows. */
const reach = 0.38;
const bodiesRow = "bodies";

function present(layer: Extract<PlotLayer, { what: "samples" }>, index: number): boolean {
  return layer.points.state[index] === State.present && Number.isFinite(layer.points.x[index] ?? NaN);
}

/** Heights of samples of one row: the first of a bin in the middle, the next above, below, and so on, packed to fit. */
function swarm(values: readonly { readonly index: number; readonly x: number }[], low: number, high: number): ReadonlyMap<number, number> {
  const filled = new Map<number, number>();
  const steps = new Map<number, number>();
  let most = 1;
  for (const { index, x } of [...values].sort((a, b) => a.x - b.x || a.index - b.index)) {
    const bin = high === low ? 0 : Math.floor(((x - low) / (high - low)) * bins);
    const n = filled.get(bin) ?? 0;
    filled.set(bin, n + 1);
    most = Math.max(most, n + 1);
    steps.set(index, n % 2 === 1 ? (n + 1) / 2 : -n / 2);
  }
  const unit = Math.min(0.12, (2 * reach) / most);
  return new Map(Array.from(steps, ([index, step]) => [index, step * unit]));
}

/** Lays samples out in rows by class, the page's first class on top; bodies get the lowest row. */
export function layOutDistribution(result: PlotResult, classIndex: (name: string) => number): Distribution {
  const layers = result.layers.filter((layer) => layer.what === "samples");
  const names = new Set<string>();
  const all: number[] = [];
  for (const layer of layers) {
    for (let i = 0; i < layer.points.x.length; i++) {
      if (!present(layer, i)) continue;
      names.add(layer.classes[i] ?? "");
      all.push(layer.points.x[i] ?? 0);
    }
  }
  const [low, high] = extent(all) ?? [0, 1];
  const place = (name: string): number => (name === "" ? Infinity : classIndex(name));
  const classes = Array.from(names).sort((a, b) => place(b) - place(a));
  const hasBodies = result.layers.some((layer) => layer.what === "bodies");
  const rows = [...(hasBodies ? [bodiesRow] : []), ...classes.map((name) => (name === "" ? "no class" : name))];
  const rowOf = (name: string): number => classes.indexOf(name) + (hasBodies ? 1 : 0);
  const laid = result.layers.flatMap((layer): PlotLayer[] => {
    if (layer.what === "bodies") return [{ ...layer, bodies: layer.bodies.map(({ ellipse: _, ...body }) => ({ ...body, y: 0, sigmaY: null })) }];
    if (layer.what === "annotation") return [layer];
    if (layer.what !== "samples") return [];
    const y = new Float64Array(layer.points.x.length).fill(NaN);
    for (const name of classes) {
      const values = Array.from(layer.points.x, (x, index) => ({ index, x })).filter(
        ({ index }) => present(layer, index) && (layer.classes[index] ?? "") === name,
      );
      for (const [index, offset] of swarm(values, low, high)) y[index] = rowOf(name) + offset;
    }
    return [{ ...layer, ellipses: 0, points: { ...layer.points, y } }];
  });
  return { result: { ...result, layers: laid }, rows };
}
