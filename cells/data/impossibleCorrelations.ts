import type { ColumnCorrelation } from "../table/table";

/** Pivots down to this count as 0, so that correlations of exactly ±1 may stand. */
const ROUNDING = -1e-9;

/**
 * Rows in which declared error correlations cannot hold together: their matrix, 1 on the diagonal and 0 where nothing is
 * declared, has a negative eigenvalue. By elimination without a square root (L D Lᵀ; Golub & Van Loan, Matrix Computations,
 * § 4.1.2): a negative pivot, or one of 0 with something left in its column, says so.
 *
 * @returns the columns that take part, and the rows, ascending
 */
export function impossibleCorrelations(
  correlations: readonly ColumnCorrelation[],
  rows: number,
): { readonly columns: readonly string[]; readonly rows: readonly number[] } {
  const columns = [...new Set(correlations.flatMap(({ of }) => [...of]))];
  if (columns.length < 3) return { columns, rows: [] };
  const n = columns.length;
  const places = correlations.map(({ of, value }) => ({ i: columns.indexOf(of[0]), j: columns.indexOf(of[1]), value }));
  const found: number[] = [];
  let before = "";
  let isBefore = false;
  for (let row = 0; row < rows; row++) {
    const values = places.map(({ value }) => value[row] ?? 0);
    const key = values.join();
    if (key !== before) {
      before = key;
      const m = new Float64Array(n * n);
      for (let i = 0; i < n; i++) m[i * n + i] = 1;
      places.forEach(({ i, j }, place) => {
        m[i * n + j] = values[place] ?? 0;
        m[j * n + i] = values[place] ?? 0;
      });
      isBefore = hasNegative(m, n);
    }
    if (isBefore) found.push(row);
  }
  return { columns, rows: found };
}

/** Whether a symmetric matrix has a negative eigenvalue. Changed in place. */
function hasNegative(m: Float64Array, n: number): boolean {
  for (let k = 0; k < n; k++) {
    const pivot = m[k * n + k] ?? 0;
    if (pivot < ROUNDING) return true;
    for (let i = k + 1; i < n; i++) {
      const below = m[i * n + k] ?? 0;
      if (pivot <= -ROUNDING) {
        if (Math.abs(below) > 1e-6) return true;
        continue;
      }
      for (let j = k + 1; j < n; j++) m[i * n + j] = (m[i * n + j] ?? 0) - (below * (m[k * n + j] ?? 0)) / pivot;
    }
  }
  return false;
}
