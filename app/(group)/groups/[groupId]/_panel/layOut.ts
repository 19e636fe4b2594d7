import type { BlockKind } from "@/cells";

/** A page as the panel draws it. */
export interface PanelPage {
  readonly id: string;
  readonly outline: readonly { readonly key: string; readonly kind: string; readonly name: string; readonly width: number; readonly source?: string }[];
}

export interface PanelSource {
  readonly sha256: string;
  readonly name: string;
}

/** A layer of a column: one block. Blocks side by side on the page part one bed among them. */
export interface Layer {
  readonly key: string;
  readonly kind: BlockKind;
  readonly name: string;
  readonly source?: string;
  readonly x: number;
  readonly y: number;
  readonly w: number;
  readonly h: number;
  readonly last: boolean;
}

export interface Column {
  readonly pageId: string;
  readonly x: number;
  readonly height: number;
  readonly layers: readonly Layer[];
}

/** Joins the layers of two neighbours that use one source; `older` where one of them holds another version of it. */
export interface Band {
  readonly label: string;
  readonly older: boolean;
  readonly left: { readonly x: number; readonly top: number; readonly bottom: number };
  readonly right: { readonly x: number; readonly top: number; readonly bottom: number };
}

export const COLUMN = 80;
export const PITCH = 208;

/** How thick a bed is drawn, by what it holds: a page's true heights are known to nobody but its readers. */
const thickness: Record<BlockKind, number> = { data: 80, formula: 56, plot: 88, trend: 52, budget: 64, note: 28 };
const isKind = (kind: string): kind is BlockKind => Object.hasOwn(thickness, kind);

/** Pages in an order in which neighbours share sources, as far as one line allows; from the first page on, greedily. */
export function orderBySources<P extends PanelPage>(pages: readonly P[]): P[] {
  const left = [...pages];
  const ordered: P[] = [];
  while (left.length > 0) {
    const last = ordered.at(-1);
    const shared = left.map((page) => (last ? sharedSources(last, page) : 0));
    const next = shared.indexOf(Math.max(...shared));
    ordered.push(...left.splice(next, 1));
  }
  return ordered;
}

function sharedSources(a: PanelPage, b: PanelPage): number {
  const of = (page: PanelPage) => new Set(page.outline.flatMap((block) => block.source ?? []));
  const mine = of(a);
  return [...of(b)].filter((source) => mine.has(source)).length;
}

/** The panel: columns side by side in the given order, and the bands between neighbours. Pixels, from the top of the columns. */
export function layOut(pages: readonly PanelPage[], sources: readonly PanelSource[]): { columns: Column[]; bands: Band[] } {
  const columns = pages.map((page, n) => column(page, n * PITCH));
  const bands: Band[] = [];
  for (let n = 1; n < columns.length; n++) {
    const [left, right] = [columns[n - 1], columns[n]];
    if (left && right) bands.push(...between(left, right, new Map(sources.map((source) => [source.sha256, stem(source.name)]))));
  }
  return { columns, bands };
}

function column(page: PanelPage, x: number): Column {
  const layers: Layer[] = [];
  let y = 0;
  for (const bed of beds(page.outline)) {
    const h = Math.max(...bed.map((block) => thickness[block.kind]));
    const total = bed.reduce((sum, block) => sum + block.width, 0);
    let left = x;
    bed.forEach((block, n) => {
      const w = (COLUMN * block.width) / total;
      layers.push({ ...block, x: left, y, w, h, last: n === bed.length - 1 });
      left += w;
    });
    y += h;
  }
  return { pageId: page.id, x, height: y, layers };
}

type Block = PanelPage["outline"][number] & { readonly kind: BlockKind };

/** Blocks that stand side by side: as many as fit into twelve columns. */
function beds(outline: PanelPage["outline"]): Block[][] {
  const found: Block[][] = [];
  let used = 12;
  for (const block of outline) {
    if (!isKind(block.kind)) continue;
    if (used + block.width > 12) {
      found.push([]);
      used = 0;
    }
    found.at(-1)?.push({ ...block, kind: block.kind });
    used += block.width;
  }
  return found;
}

function between(left: Column, right: Column, names: ReadonlyMap<string, string>): Band[] {
  const bands: Band[] = [];
  for (const a of left.layers) {
    for (const b of right.layers) {
      if (!a.source || !b.source) continue;
      const [nameA, nameB] = [names.get(a.source), names.get(b.source)];
      const older = a.source !== b.source;
      if (older && (nameA === undefined || nameA !== nameB)) continue;
      const label = nameA ?? "a source";
      bands.push({
        label: older ? `${label}, another version` : label,
        older,
        left: { x: left.x + COLUMN, top: a.y, bottom: a.y + a.h },
        right: { x: right.x, top: b.y, bottom: b.y + b.h },
      });
    }
  }
  return bands;
}

/** A file's name without its ending. */
function stem(name: string): string {
  return name.replace(/\.[A-Za-z0-9]{1,5}$/, "");
}
