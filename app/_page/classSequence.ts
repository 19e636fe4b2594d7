import type { PageResults, Table } from "@/cells";

const known = new WeakMap<Table, readonly string[]>();

/** Classes of a table in order of first appearance; remembered, as tables never change. */
function classesOf(table: Table): readonly string[] {
  let found = known.get(table);
  if (found === undefined) {
    found = [...new Set(table.classes)].filter((name) => name !== "");
    known.set(table, found);
  }
  return found;
}

/**
 * The place of every class in the page's sequence: in the order in which blocks, and rows in them, name it first. Marker and
 * colour hang on this place, so it is the same in a live page and in its snapshot.
 *
 * @param before the sequence so far, kept when nothing changed.
 */
export function classSequence(results: PageResults | null, before: ReadonlyMap<string, number>): ReadonlyMap<string, number> {
  const sequence = new Map<string, number>();
  for (const result of results?.blocks.values() ?? []) {
    if (result.kind !== "data" || result.table === undefined) continue;
    for (const name of classesOf(result.table)) if (!sequence.has(name)) sequence.set(name, sequence.size);
  }
  const same = sequence.size === before.size && [...sequence].every(([name, place]) => before.get(name) === place);
  return same ? before : sequence;
}
