import { blockSchema, type Problem } from "@/cells";
import * as Y from "yjs";
import type { Binned, PageBlock } from "./pageBlock";
import {
  entriesOf,
  entryFault,
  fieldFault,
  fieldNames,
  hasText,
  isBlockKind,
  isListOf,
  isRequiredList,
  listOf,
  type BlockKind,
  type BlockMap,
  type ListName,
} from "./shape";

interface Read {
  readonly page: PageBlock | null;
  readonly problems: readonly Problem[];
}

/** What says that a data block's content comes from elsewhere; without any of them it is typed. */
const contents = ["source", "stack", "join"] as const;

const problem = (block: string, code: string, text: string): Problem => ({ code, severity: "error", block, text });

function readBinned(value: unknown): Binned | undefined {
  if (typeof value !== "object" || value === null || !("by" in value) || !("at" in value)) return undefined;
  return { by: String(value.by), at: String(value.at) };
}

/** A list is written when something is in it, when its kind demands it, or when it was given as `[]`. */
function isWritten(map: BlockMap, list: ListName, length: number): boolean {
  if (list === "typed") return contents.every((field) => map.get(field) === undefined);
  if (length > 0 || isRequiredList(list)) return true;
  const empty = map.get("empty");
  return Array.isArray(empty) && empty.includes(list);
}

/** The fields of a block as the page document has them, unjudged. Fields of other releases are left where they are. */
function gather(map: BlockMap, kind: BlockKind): Record<string, unknown> {
  const fields: Record<string, unknown> = {};
  for (const field of fieldNames(kind)) {
    const value = map.get(field);
    if (isListOf(kind, field)) {
      const container = listOf(map, field);
      const entries = container === undefined ? [] : entriesOf(container).map((e) => e.entry);
      if (isWritten(map, field, entries.length)) fields[field] = entries;
    } else if (field === "text" && hasText(kind)) fields.text = value instanceof Y.Text ? value.toString() : "";
    else if (value !== undefined && !(value instanceof Y.AbstractType)) fields[field] = value;
  }
  return fields;
}

/** Takes out what cannot be read and says so, each in a sentence. */
function mend(handle: string, kind: BlockKind, fields: Record<string, unknown>): readonly string[] {
  const faults: string[] = [];
  for (const [field, value] of Object.entries(fields)) {
    const fault = fieldFault(kind, field, value);
    if (fault === null) continue;
    if (isListOf(kind, field) && Array.isArray(value)) {
      fields[field] = value.filter((entry) => {
        const entrysFault = entryFault(kind, field, entry);
        if (entrysFault !== null) faults.push(entrysFault);
        return entrysFault === null;
      });
    } else {
      faults.push(fault);
      delete fields[field];
    }
  }
  const stated = contents.filter((field) => fields[field] !== undefined);
  for (const field of stated.slice(1)) {
    delete fields[field];
    faults.push(`Two people gave the table ${handle} different contents at once; it is read as ${stated[0] ?? ""}. Choose its content again.`);
  }
  return faults;
}

/**
 * Reads one live block. A field of the wrong form is left out and named; a block without what its kind needs is left off
 * the page and named. The rest of the page does not notice.
 */
export function readBlock(key: string, map: BlockMap): Read {
  const kind = map instanceof Y.Map ? map.get("kind") : undefined;
  const id = map instanceof Y.Map ? map.get("id") : undefined;
  const handle = typeof id === "string" ? id : key;
  if (!isBlockKind(kind)) {
    const text = `The block ${handle} is of a kind that this version does not know. Reload the page to get the present version.`;
    return { page: null, problems: [problem(handle, "unknown-kind", text)] };
  }
  const fields = gather(map, kind);
  let problems: readonly Problem[] = [];
  let parsed = blockSchema.safeParse(fields);
  if (!parsed.success) {
    problems = mend(handle, kind, fields).map((text) => problem(handle, "unreadable-field", text));
    parsed = blockSchema.safeParse(fields);
  }
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    const where = (issue?.path ?? []).map(String).join(" → ");
    const text = `The block ${handle} cannot be read (${where}: ${issue?.message ?? "incomplete"}). Lay it into the bin, or undo the edit that broke it.`;
    return { page: null, problems: [...problems, problem(handle, "unreadable-block", text)] };
  }
  const place = map.get("place");
  const binned = readBinned(map.get("binned"));
  return { page: { key, order: typeof place === "string" ? place : "a0", block: parsed.data, ...(binned === undefined ? {} : { binned }) }, problems };
}
