import type { BlockKind } from "@/cells";

/** One block as the rail sees it. */
export interface RailBlock {
  readonly key: string;
  readonly handle: string;
  readonly kind: BlockKind;
  readonly name: string;
  /** Top and height on the page, and width, in pixels. */
  readonly top: number;
  readonly height: number;
  readonly width: number;
  readonly problem: boolean;
}

/** A layer of the section: a block, drawn to scale. Blocks side by side share a bed and are parted by a lateral change. */
export interface RailLayer extends RailBlock {
  readonly x: number;
  readonly y: number;
  readonly w: number;
  readonly h: number;
  /** Place in its bed, and whether it is the last there. */
  readonly place: number;
  readonly last: boolean;
}

export interface RailBox {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

/** No layer is thinner than a finger can hit; beds with two names are high enough for both. */
const LEAST_LAYER = 14;
const LEAST_SHARED = 24;

/**
 * The page as a measured section: thickness of a bed ∝ its blocks' height, with a least thickness so that everything can be
 * reached. Where least thicknesses alone exceed the box, all are scaled down together.
 */
export function layOutRail(blocks: readonly RailBlock[], box: RailBox): RailLayer[] {
  const beds: RailBlock[][] = [];
  for (const block of blocks) {
    const bed = beds[beds.length - 1];
    if (bed?.[0] !== undefined && Math.abs(bed[0].top - block.top) < 4) bed.push(block);
    else beds.push([block]);
  }
  const heights = beds.map((bed) => Math.max(1, ...bed.map((b) => b.height)));
  const least = beds.map((bed) => (bed.length > 1 ? LEAST_SHARED : LEAST_LAYER));
  const thicknesses = share(heights, least, box.height);
  const layers: RailLayer[] = [];
  let y = box.y;
  beds.forEach((bed, i) => {
    const h = thicknesses[i] ?? 0;
    const sum = bed.reduce((total, b) => total + Math.max(1, b.width), 0);
    let x = box.x;
    bed.forEach((block, place) => {
      const w = (box.width * Math.max(1, block.width)) / sum;
      layers.push({ ...block, x, y, w, h, place, last: place === bed.length - 1 });
      x += w;
    });
    y += h;
  });
  return layers;
}

/** Divides `total` in proportion to `parts`, none below its `least`. */
function share(parts: readonly number[], least: readonly number[], total: number): number[] {
  const needed = least.reduce((a, b) => a + b, 0);
  if (needed >= total) return least.map((l) => (l * total) / Math.max(1, needed));
  const fixed = new Set<number>();
  for (;;) {
    let left = total;
    let sum = 0;
    parts.forEach((part, i) => {
      if (fixed.has(i)) left -= least[i] ?? 0;
      else sum += part;
    });
    const small = parts.findIndex((part, i) => !fixed.has(i) && (part * left) / sum < (least[i] ?? 0));
    if (small < 0) return parts.map((part, i) => (fixed.has(i) ? (least[i] ?? 0) : (part * left) / sum));
    fixed.add(small);
  }
}

/** Where a place on the page (pixels from its top) stands on the rail. */
export function railPlace(layers: readonly RailLayer[], pageY: number): number {
  const first = layers[0];
  if (first === undefined) return 0;
  let at = first.y;
  for (const layer of layers) {
    if (layer.place !== 0) continue;
    const bed = layers.filter((l) => l.y === layer.y);
    const height = Math.max(...bed.map((l) => l.height));
    if (pageY <= layer.top) return at;
    if (pageY < layer.top + height) return layer.y + ((pageY - layer.top) / height) * layer.h;
    at = layer.y + layer.h;
  }
  return at;
}

/** A jagged way down from (x, y) over h: how a torn edge or a lateral change of facies is drawn. Always the same for the same layer. */
export function jagged(x: number, y: number, h: number, amplitude: number, torn: boolean): string {
  const teeth = Math.max(2, Math.round(h / (torn ? 12 : 16)));
  const step = h / teeth;
  let path = "";
  for (let j = 1; j <= teeth * 2; j++) {
    const irregular = 0.35 + ((j * j * 37 + j * 11) % 17) / 17;
    const across = x + (j % 2 === 1 ? amplitude * 0.4 : -amplitude) * irregular;
    const down = y + (j + (j < teeth * 2 ? (((j * j * 23 + j * 7) % 13) / 13 - 0.5) * 0.8 : 0)) * (step / 2);
    path += `L${across.toFixed(1)} ${down.toFixed(1)}`;
  }
  return path;
}

/** Outline of a layer, its right edge straight, torn, or a jagged boundary to the block beside it. */
export function layerPath(layer: RailLayer, amplitude: number): { outline: string; edge: string } {
  const { x, y, w, h } = layer;
  const right = x + w;
  const edge = !layer.last ? jagged(right, y, h, amplitude, false) : layer.problem ? jagged(right - 1, y, h, amplitude * 1.35, true) : `L${right} ${y + h}`;
  // The next block in the bed is drawn over this one's right side, so a straight left side suffices.
  return { outline: `M${x} ${y}L${right} ${y}${edge}L${x} ${y + h}Z`, edge: `M${right} ${y}${edge}` };
}
