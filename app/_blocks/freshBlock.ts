import { parseLines, type Block, type BlockKind } from "@/cells";

export interface FreshBlockPlace {
  /** Blocks of the page, in order. */
  readonly blocks: readonly Block[];
  /** The block it will stand after; null at the top. */
  readonly after: Block | null;
  readonly bodies: Readonly<Record<string, string>>;
}

const stems: Record<BlockKind, string> = { data: "d", formula: "f", plot: "p", trend: "t", budget: "b", note: "n" };

function freeHandle(kind: BlockKind, blocks: readonly Block[]): string {
  const taken = new Set(blocks.flatMap((b) => [b.id, ...(b.formerly ?? [])]));
  for (let n = 1; ; n++) {
    const handle = n === 1 ? stems[kind] : `${stems[kind]}${n}`;
    if (!taken.has(handle)) return handle;
  }
}

/** The table a new block most likely means: the one it stands under, or that the block above it reads. */
function nearestTable({ blocks, after }: FreshBlockPlace): string | undefined {
  if (after?.kind === "data") return after.id;
  if (after !== null && "data" in after && after.data !== undefined) return after.data;
  const before = after === null ? blocks : blocks.slice(0, blocks.indexOf(after) + 1);
  const tables = (before.some((b) => b.kind === "data") ? before : blocks).filter((b) => b.kind === "data");
  return tables[tables.length - 1]?.id;
}

/**
 * What a new plot or trend of a table draws first: the two last results of the formula block nearest above that reads the table
 * and gives at least two, then of the first one below. Empty where there is none, so that the fields ask for it.
 */
function firstAxes(table: string | undefined, { blocks, after }: FreshBlockPlace): { readonly x: string; readonly y: string } {
  const above = after === null ? 0 : blocks.indexOf(after) + 1;
  for (const block of [...blocks.slice(0, above).reverse(), ...blocks.slice(above)]) {
    if (block.kind !== "formula" || block.data === undefined || block.data !== table) continue;
    const [x, y] = parseLines(block.text).lines.slice(-2);
    if (x !== undefined && y !== undefined) return { x: x.name, y: y.name };
  }
  return { x: "", y: "" };
}

/** A new block of a kind, as empty as may be, that reads from what stands nearest. */
export function freshBlock(kind: BlockKind, place: FreshBlockPlace): Block {
  const id = freeHandle(kind, place.blocks);
  const table = nearestTable(place);
  switch (kind) {
    case "data":
      return { id, kind, typed: [] };
    case "formula":
      return { id, kind, text: "", ...(table === undefined ? {} : { data: table }) };
    case "plot":
      return { id, kind, plot: "scatter", drawn: table === undefined ? [] : [{ data: table, ...firstAxes(table, place), ellipses: "1 sigma" }] };
    case "trend":
      return { id, kind, data: table ?? "d", ...firstAxes(table, place), method: "york", width: 6 };
    case "budget":
      return { id, kind, start: { body: "BSE" in place.bodies ? "BSE" : (Object.keys(place.bodies)[0] ?? "BSE_MS95") }, steps: [], report: [] };
    case "note":
      return { id, kind, text: "" };
  }
}
