import type { BlockKind, BlockResult, PageResults, Table } from "@/cells";

/** The table a data block came to; undefined while nothing is known or where it could not be read. */
export function tableOf(results: PageResults | null, handle: string | undefined): Table | undefined {
  if (handle === undefined) return undefined;
  const result = results?.blocks.get(handle);
  return result?.kind === "data" ? result.table : undefined;
}

/** Result of a block, if it is of the kind asked for. */
export function resultOf<K extends BlockKind>(results: PageResults | null, handle: string, kind: K): Extract<BlockResult, { kind: K }> | undefined {
  const result = results?.blocks.get(handle);
  return result?.kind === kind ? (result as Extract<BlockResult, { kind: K }>) : undefined;
}

/** The handle of the block that a result is of. */
export function handleOf(results: PageResults | null, result: BlockResult): string {
  for (const [handle, each] of results?.blocks ?? []) if (each === result) return handle;
  return "";
}
