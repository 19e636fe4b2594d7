import { handleSchema, renameInText } from "@/cells";
import * as Y from "yjs";
import { EditError, kindOf, requireBlock } from "./editing";
import { editText } from "./editText";
import { rewriteExpressions, rewriteNote, type Rewrite } from "./expressions";
import { naturalKey } from "./entryKeys";
import { renameInValue } from "./references";
import { blocksOf, entriesOf, hasText, isBlockKind, listOf, listsOf, LOCAL, type BlockMap, type EntryMap } from "./shape";

type Entry = Readonly<Record<string, unknown>>;

/** Walks over every plain value of a block (fields, entries of lists) and writes back those that `change` made anew. */
function rewriteValues(block: BlockMap, change: (key: string, value: unknown) => unknown): void {
  const kind = kindOf(block);
  for (const [field, value] of [...block.entries()]) {
    if (value instanceof Y.AbstractType || field === "id" || field === "formerly") continue;
    const next = change(field, value);
    if (next !== value) block.set(field, next);
  }
  for (const list of listsOf[kind]) {
    const map = listOf(block, list);
    if (map === undefined) continue;
    for (const { key, place, entry } of entriesOf(map)) {
      const next = change("", entry);
      if (next !== entry) map.set(key, { place, entry: next });
    }
  }
}

/** Rewrites the shared text of a formula or a note. */
function rewriteText(block: BlockMap, rewrite: Rewrite): void {
  const text = block.get("text");
  if (!(text instanceof Y.Text)) return;
  const present = text.toString();
  editText(text, kindOf(block) === "note" ? rewriteNote(present, rewrite) : rewrite(present));
}

const known = (doc: Y.Doc): readonly BlockMap[] => [...blocksOf(doc).values()].filter((b) => b instanceof Y.Map && isBlockKind(b.get("kind")));

/** Gives a block a new handle and rewrites every use, in one transaction (rule D4); the old one goes into `formerly`. */
export function renameHandle(doc: Y.Doc, key: string, handle: string): void {
  const block = requireBlock(doc, key);
  const old = String(block.get("id"));
  if (handle === old) return;
  const parsed = handleSchema.safeParse(handle);
  if (!parsed.success) throw new EditError(`“${handle}” cannot be a handle: ${parsed.error.issues[0]?.message ?? "choose another"}.`);
  if (known(doc).some((b) => b !== block && b.get("id") === handle)) throw new EditError(`Another block is called ${handle} already. Choose another handle.`);
  const rewrite: Rewrite = (text) => renameInText(text, (name, member) => (name === old && member !== undefined ? { name: handle, member } : undefined));
  doc.transact(() => {
    const formerly = block.get("formerly");
    const past = Array.isArray(formerly) ? formerly.filter((h: unknown): h is string => typeof h === "string" && h !== handle && h !== old) : [];
    block.set("id", handle);
    block.set("formerly", [...past, old].slice(-50));
    for (const other of known(doc)) {
      rewriteValues(other, (field, value) =>
        rewriteExpressions(
          field,
          renameInValue(field, value, (h) => (h === old ? handle : h)),
          rewrite,
        ),
      );
      if (hasText(kindOf(other))) rewriteText(other, rewrite);
    }
  }, LOCAL);
}

/** Moves an entry to the key its new content has by nature. */
function rewriteEntries(
  map: EntryMap,
  list: "columns" | "assumed" | "amendments" | "setAside" | "correlations" | "typed",
  change: (entry: Entry) => Entry,
): void {
  for (const { key, place, entry } of entriesOf(map)) {
    const next = change(entry);
    if (next === entry) continue;
    const at = naturalKey(list, next) ?? key;
    if (at !== key) map.delete(key);
    map.set(at, { place, entry: next });
  }
}

/** Renames a column in the table's own lists. */
function renameInTable(block: BlockMap, from: string, to: string): void {
  const swap = (entry: Entry, field: string): Entry => (entry[field] === from ? { ...entry, [field]: to } : entry);
  const columns = listOf(block, "columns");
  if (columns !== undefined) {
    rewriteEntries(columns, "columns", (entry) => {
      const named = entry.name === from || (entry.name === undefined && entry.header === from) ? { ...entry, name: to } : entry;
      return swap(named, "of");
    });
  }
  for (const list of ["assumed", "amendments", "setAside"] as const) {
    const map = listOf(block, list);
    if (map !== undefined) rewriteEntries(map, list, (entry) => swap(entry, "column"));
  }
  const correlations = listOf(block, "correlations");
  if (correlations !== undefined) {
    rewriteEntries(correlations, "correlations", (entry) => {
      const of = Array.isArray(entry.of) && entry.of.includes(from) ? entry.of.map((c: unknown) => (c === from ? to : c)) : entry.of;
      return swap(of === entry.of ? entry : { ...entry, of }, "value");
    });
  }
  const typed = listOf(block, "typed");
  if (typed !== undefined) {
    rewriteEntries(typed, "typed", (entry) => {
      const cells = entry.cells;
      if (typeof cells !== "object" || cells === null || !(from in cells)) return entry;
      return { ...entry, cells: Object.fromEntries(Object.entries(cells).map(([name, cell]) => [name === from ? to : name, cell])) };
    });
  }
}

/**
 * Gives a column of a table a new name and rewrites every use, in one transaction: bare in the blocks that stand on this
 * table, `handle.name` everywhere.
 */
export function renameColumn(doc: Y.Doc, key: string, from: string, to: string): void {
  const table = requireBlock(doc, key);
  if (kindOf(table) !== "data") throw new EditError("Only a table has columns.");
  if (to.length < 1 || to.length > 80) throw new EditError("A column's name has 1 to 80 characters.");
  if (/[`\n\r]/u.test(to)) throw new EditError("A column's name holds no backtick and no line break, since formulas could not write it. Choose another name.");
  const columns = listOf(table, "columns");
  const typed = listOf(table, "typed");
  const has = (name: string): boolean =>
    (columns !== undefined && entriesOf(columns).some(({ entry }) => (entry.name ?? entry.header) === name)) ||
    (typed !== undefined && entriesOf(typed).some(({ entry }) => typeof entry.cells === "object" && entry.cells !== null && name in entry.cells));
  if (!has(from)) throw new EditError(`The table has no column of its own called ${from}, so there is nothing to rename.`);
  if (from !== to && has(to)) {
    throw new EditError(`The table has a column called ${to} already. Choose another name.`);
  }
  const handle = String(table.get("id"));
  const qualified: Rewrite = (text) => renameInText(text, (name, member) => (name === handle && member === from ? { name: handle, member: to } : undefined));
  const bare: Rewrite = (text) =>
    renameInText(text, (name, member) =>
      member === undefined && name === from ? { name: to } : name === handle && member === from ? { name: handle, member: to } : undefined,
    );
  doc.transact(() => {
    renameInTable(table, from, to);
    for (const block of known(doc)) {
      const own = block.get("data") === handle;
      rewriteValues(block, (field, value) => {
        // A line of a plot names its own table.
        const line = field === "" && typeof value === "object" && value !== null && "data" in value ? value.data === handle : own;
        return rewriteExpressions(field, value, line ? bare : qualified);
      });
      if (hasText(kindOf(block))) rewriteText(block, own ? bare : qualified);
    }
  }, LOCAL);
}
