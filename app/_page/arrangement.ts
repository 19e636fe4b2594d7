/** Columns of twelve that a block takes. */
export type BlockWidth = 4 | 6 | 8 | 12;

export const blockWidths: readonly BlockWidth[] = [4, 6, 8, 12];

/** The widths in words, as the menu has them. */
export const widthWords: Record<BlockWidth, string> = { 4: "a third", 6: "a half", 8: "two thirds", 12: "the full width" };

/**
 * Blocks in their order, put into rows: a row takes blocks as long as their widths come to no more than twelve columns.
 *
 * @param widthOf width of a block; 12 where it says none.
 */
export function packRows<B>(blocks: readonly B[], widthOf: (block: B) => BlockWidth): B[][] {
  const rows: B[][] = [];
  let taken = 12;
  for (const block of blocks) {
    const width = widthOf(block);
    const row = rows[rows.length - 1];
    if (row === undefined || taken + width > 12) {
      rows.push([block]);
      taken = width;
    } else {
      row.push(block);
      taken += width;
    }
  }
  return rows;
}

/** Key after which a block stands once it has moved up or down by one place; undefined where it is at the end already. */
export function placeAfterStep(order: readonly string[], key: string, step: -1 | 1): string | null | undefined {
  const at = order.indexOf(key);
  if (at < 0) return undefined;
  if (step === -1) return at === 0 ? undefined : (order[at - 2] ?? null);
  return at === order.length - 1 ? undefined : order[at + 1];
}
