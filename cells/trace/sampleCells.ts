import { declaredCorrelation } from "../language";
import type { ColumnVariable } from "../language";
import type { BlockContext } from "../page/context";
import type { TraceNode } from "../page/results";
import { joinedBranches, type Branch } from "./branches";
import { cellNodes } from "./cells";

/** A measured column, and how a number moves with its value in one row. */
export interface Pull {
  readonly variable: ColumnVariable;
  readonly partial: number;
}

/** The variance that one row's measured values bring to a number, declared correlations counted half to each. */
export function variancesOf(pulls: readonly Pull[], row: number): Float64Array {
  const sizes = pulls.map(({ variable, partial }) => known(partial * (variable.column.sigma[row] ?? Number.NaN)));
  return Float64Array.from(pulls, (pull, i) => {
    const own = sizes[i] ?? 0;
    return pulls.reduce((sum, other, j) => {
      const rho = i === j ? 1 : known(declaredCorrelation(pull.variable, other.variable)?.[row] ?? 0);
      return sum + rho * own * (sizes[j] ?? 0);
    }, 0);
  });
}

/**
 * The cells behind what one row brings to a number.
 *
 * @param total variance that `share` stands for; null where the cells have no part of it that is known
 */
export function sampleCells(context: BlockContext, pulls: readonly Pull[], row: number, share: number | null, total: number | null): TraceNode[] {
  const moving = pulls.filter(({ partial }) => partial !== 0 && partial === partial);
  const variances = variancesOf(moving, row);
  const branches = moving.flatMap((pull, i): Branch<Pull>[] => {
    const { column, table } = pull.variable;
    const isKnown = share !== null && total !== null && total > 0 && (column.sigma[row] ?? Number.NaN) >= 0;
    return cellNodes(context, table, column, row, isKnown ? (share * (variances[i] ?? 0)) / total : null).map((node) => ({ node, inputs: [pull] }));
  });
  return joinedBranches(branches, (a, b) => known(declaredCorrelation(a.variable, b.variable)?.[row] ?? 0) !== 0).from;
}

/** The same column met twice, as in x and in y, is one. */
export function merged(pulls: readonly Pull[]): Pull[] {
  const found: Pull[] = [];
  for (const pull of pulls) {
    const at = found.findIndex(({ variable }) => variable.table === pull.variable.table && variable.column === pull.variable.column);
    const same = found[at];
    if (same === undefined) found.push(pull);
    else found[at] = { ...same, partial: same.partial + pull.partial };
  }
  return found;
}

function known(x: number): number {
  return Number.isFinite(x) ? x : 0;
}
