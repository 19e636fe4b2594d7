import * as Y from "yjs";
import { partOf } from "./roles";
import { blocksOf, byPlace, isBlockKind, pageOf } from "./shape";

/** One line of a page's outline, as lists of pages draw it. */
export interface OutlineLine {
  readonly key: string;
  readonly id: string;
  readonly kind: string;
  readonly name: string;
  readonly width: number;
  /** SHA-256 of its source, for data blocks. */
  readonly source?: string;
}

/** What lists of pages show of a page. */
export interface Heading {
  readonly title: string;
  readonly outline: readonly OutlineLine[];
}

const shown: ReadonlySet<string> = new Set(["id", "name", "width", "source", "place", "binned"]);

/** Whether a transaction changed what the heading says; typing in a formula does not. */
export function touchesHeading(transaction: Y.Transaction): boolean {
  for (const [type, keys] of transaction.changed) {
    const part = partOf(transaction.doc, type);
    if (part === null || part.is === "list" || part.is === "text" || part.is === "bodies" || part.is === "ownBodies") continue;
    if (part.is !== "block" || [...keys].some((key) => key !== null && shown.has(key))) return true;
  }
  return false;
}

/** Title and outline of a live page, without its bin. Reads a few fields of each block and no list. */
export function headingOf(doc: Y.Doc): Heading {
  const lines: { place: string; key: string; line: OutlineLine }[] = [];
  for (const [key, block] of blocksOf(doc).entries()) {
    if (!(block instanceof Y.Map) || block.has("binned")) continue;
    const [kind, id, name, width, place, source] = ["kind", "id", "name", "width", "place", "source"].map((field): unknown => block.get(field));
    if (!isBlockKind(kind) || typeof id !== "string") continue;
    const hash = typeof source === "object" && source !== null && "sha256" in source && typeof source.sha256 === "string" ? { source: source.sha256 } : {};
    const line = { key, id, kind, name: typeof name === "string" && name !== "" ? name : id, width: typeof width === "number" ? width : 12, ...hash };
    lines.push({ place: typeof place === "string" ? place : "a0", key, line });
  }
  const title = pageOf(doc).get("title");
  return { title: typeof title === "string" ? title : "", outline: lines.sort(byPlace).map((l) => l.line) };
}
