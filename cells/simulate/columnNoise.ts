import type { ColumnVariable } from "../language";
import { declaredCorrelation } from "../language/uncertainty";
import { lowerRoot } from "../trend/jointDraws";
import type { SimulationWish } from "./simulated";
import { normalsOf } from "./streams";

/**
 * Draws of the errors of one row's measured values, with the correlations that the table declares. Undefined for a value that
 * stands still: it has no σ, or is not there.
 *
 * @param columns in an order that does not depend on the expression
 */
export function columnNoise(columns: readonly ColumnVariable[], row: number, { draws, seed }: SimulationWish): readonly (Float64Array | undefined)[] {
  const moves = columns.map(({ column }) => (column.sigma[row] as number) > 0 && Number.isFinite(column.value[row]));
  const normals = columns.map(({ table, column }, i) =>
    moves[i] === true ? normalsOf(seed, `${column.name}|${String(table.rowIds[row])}`, draws) : undefined,
  );
  const root = lowerRoot(columns.map((a, i) => Float64Array.from(columns, (b, j) => (i === j ? 1 : correlation(a, b, row)))));
  return columns.map(({ column }, i) => {
    if (normals[i] === undefined) return undefined;
    const sigma = column.sigma[row] as number;
    const own = new Float64Array(draws);
    for (let j = 0; j <= i; j++) {
      const [factor, z] = [sigma * (root[i]?.[j] ?? 0), normals[j]];
      if (factor === 0 || z === undefined) continue;
      for (let k = 0; k < draws; k++) own[k] = (own[k] as number) + factor * (z[k] as number);
    }
    return own;
  });
}

function correlation(a: ColumnVariable, b: ColumnVariable, row: number): number {
  const rho = declaredCorrelation(a, b)?.[row] ?? 0;
  return rho === rho ? rho : 0;
}
