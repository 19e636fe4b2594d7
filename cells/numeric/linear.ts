/** A symmetric 2×2 matrix, as covariances of two numbers are. */
export interface Symmetric2 {
  readonly xx: number;
  readonly xy: number;
  readonly yy: number;
}

/** Determinant of a symmetric 2×2 matrix. */
export function determinant2(m: Symmetric2): number {
  return m.xx * m.yy - m.xy * m.xy;
}

/** vᵀ M⁻¹ v for v = (x, y); NaN where M is not positive definite. */
export function inverseForm2(m: Symmetric2, x: number, y: number): number {
  const determinant = determinant2(m);
  if (!(m.xx > 0 && m.yy > 0 && determinant > 0)) return NaN;
  return (x * x * m.yy - 2 * x * y * m.xy + y * y * m.xx) / determinant;
}

/** aᵀ M b for a square matrix by rows; the covariance of two linear forms. */
export function bilinear(m: readonly Float64Array[], a: ArrayLike<number>, b: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < m.length; i++) {
    const row = m[i];
    let inner = 0;
    for (let j = 0; row !== undefined && j < row.length; j++) inner += (row[j] ?? 0) * (b[j] ?? 0);
    sum += (a[i] ?? 0) * inner;
  }
  return sum;
}

/**
 * Solves A x = b by elimination with row exchange. A and b are left as they are.
 *
 * @param a n×n by rows
 * @returns x, or undefined where A is singular to working precision
 */
export function solveLinear(a: readonly ArrayLike<number>[], b: ArrayLike<number>): Float64Array | undefined {
  const n = a.length;
  const rows = a.map((row) => Float64Array.from(row));
  const x = Float64Array.from(b);
  let largest = 0;
  for (const row of rows) for (const entry of row) largest = Math.max(largest, Math.abs(entry));
  for (let column = 0; column < n; column++) {
    let pivot = column;
    for (let i = column + 1; i < n; i++) if (Math.abs(rows[i]?.[column] ?? 0) > Math.abs(rows[pivot]?.[column] ?? 0)) pivot = i;
    const top = rows[pivot];
    const other = rows[column];
    if (top === undefined || other === undefined) return undefined;
    const head = top[column] ?? 0;
    if (!(Math.abs(head) > largest * 1e-15)) return undefined;
    rows[pivot] = other;
    rows[column] = top;
    const held = x[pivot] ?? 0;
    x[pivot] = x[column] ?? 0;
    x[column] = held;
    for (let i = column + 1; i < n; i++) {
      const row = rows[i];
      if (row === undefined) return undefined;
      const factor = (row[column] ?? 0) / head;
      if (factor === 0) continue;
      for (let j = column; j < n; j++) row[j] = (row[j] ?? 0) - factor * (top[j] ?? 0);
      x[i] = (x[i] ?? 0) - factor * (x[column] ?? 0);
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i] ?? 0;
    const row = rows[i];
    for (let j = i + 1; j < n; j++) sum -= (row?.[j] ?? 0) * (x[j] ?? 0);
    x[i] = sum / (row?.[i] ?? NaN);
  }
  return x;
}
