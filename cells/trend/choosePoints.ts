import type { Problem } from "../errors";
import type { Evaluated } from "../language";
import type { TrendBlock } from "../page/schema";
import { State, stateName } from "../quantity/state";
import type { Table } from "../table/table";
import type { FitPoints } from "./lineFit";

/** The samples that go into a fit, and why the others do not. */
export interface Chosen {
  readonly rows: Int32Array;
  readonly points: FitPoints;
  readonly leftOut: Readonly<Record<string, number>>;
  readonly problems: readonly Problem[];
  /** How many of the points have a σ of which only a part is known. */
  readonly partlyKnown: number;
  /** How many of the points lean on an assumed σ, at least. */
  readonly assumed: number;
}

/**
 * Chooses the rows of a fit: where the condition holds, both values are there, nobody left them out, and, for methods that
 * weigh, both σ are known.
 */
export function choosePoints(block: TrendBlock, table: Table, x: Evaluated, y: Evaluated, where: Uint8Array | undefined, needsErrors: boolean): Chosen {
  const { excluded, problems } = leftOutRows(block, table);
  const leftOut: Record<string, number> = {};
  const count = (why: string): void => void (leftOut[why] = (leftOut[why] ?? 0) + 1);
  const kept: number[] = [];
  for (let row = 0; row < table.rows; row++) {
    const state = Math.max(stateAt(x, row), stateAt(y, row), table.setAside[row] === 1 ? State.setAside : State.present);
    if (where !== undefined && where[row] !== 1) count("outside the condition");
    else if (excluded.has(row)) count("left out of this fit");
    else if (state !== State.present) count(stateName(state));
    else if (needsErrors && !(known(x, row) && known(y, row))) count("without σ");
    else kept.push(row);
  }
  const rows = Int32Array.from(kept);
  return {
    rows,
    points: pointsAt(rows, x, y),
    leftOut,
    problems,
    partlyKnown: rows.reduce((sum, row) => sum + (flagged(x.lowerBound, row) || flagged(y.lowerBound, row) ? 1 : 0), 0),
    assumed: Math.max(x.assumedCount, y.assumedCount),
  };
}

function flagged(flags: Uint8Array, row: number): boolean {
  return (flags.length === 1 ? flags[0] : flags[row]) === 1;
}

/** One value for all rows stands at each of them. */
export function valueAt(values: Float64Array, row: number): number {
  return (values.length === 1 ? values[0] : values[row]) ?? NaN;
}

function stateAt(evaluated: Evaluated, row: number): number {
  return (evaluated.state.length === 1 ? evaluated.state[0] : evaluated.state[row]) ?? State.missing;
}

function known(evaluated: Evaluated, row: number): boolean {
  return valueAt(evaluated.sigmaPerSample, row) >= 0;
}

/** The points of some rows: values, per-sample σ and the error correlation of x and y. */
export function pointsAt(rows: Int32Array, x: Evaluated, y: Evaluated): FitPoints {
  const n = rows.length;
  const both = x.covariance(y);
  const points = { x: new Float64Array(n), y: new Float64Array(n), sigmaX: new Float64Array(n), sigmaY: new Float64Array(n), correlation: new Float64Array(n) };
  for (let i = 0; i < n; i++) {
    const row = rows[i] ?? 0;
    const p = valueAt(x.sigmaPerSample, row);
    const q = valueAt(y.sigmaPerSample, row);
    points.x[i] = valueAt(x.value, row);
    points.y[i] = valueAt(y.value, row);
    points.sigmaX[i] = p;
    points.sigmaY[i] = q;
    const correlation = p > 0 && q > 0 ? valueAt(both, row) / (p * q) : 0;
    points.correlation[i] = Number.isFinite(correlation) ? Math.max(-1, Math.min(1, correlation)) : 0;
  }
  return points;
}

/** Rows that somebody left out of this fit; an entry that fits no row, or names another sample, is an error and leaves nothing out. */
function leftOutRows(block: TrendBlock, table: Table): { excluded: ReadonlySet<number>; problems: Problem[] } {
  const excluded = new Set<number>();
  const problems: Problem[] = [];
  const entries = block.leaveOut ?? [];
  if (entries.length === 0) return { excluded, problems };
  const byId = new Map<number | string, number[]>();
  table.rowIds.forEach((id, row) => byId.set(id, [...(byId.get(id) ?? []), row]));
  entries.forEach((entry, index) => {
    const at = { severity: "error" as const, block: block.id, field: `leaveOut[${index}]`, row: entry.row };
    const rows = byId.get(entry.row) ?? [];
    if (rows.length === 0) {
      problems.push({
        code: "no-such-row",
        ...at,
        text: `Row ${entry.row} is left out of this fit, but ${table.handle} has no row ${entry.row}. Remove this entry or choose the sample again.`,
      });
      return;
    }
    const fitting = entry.sample === undefined ? rows : rows.filter((row) => table.samples[row] === entry.sample);
    if (fitting.length === 0) {
      problems.push({
        code: "sample-mismatch",
        ...at,
        text: `Row ${entry.row} is left out as sample "${entry.sample ?? ""}", but in ${table.handle} it is "${table.samples[rows[0] ?? 0] ?? ""}". Nothing was left out; choose the sample again.`,
      });
    } else if (fitting.length > 1) {
      problems.push({
        code: "ambiguous-row",
        ...at,
        text: `Row ${entry.row} stands for ${fitting.length} rows of ${table.handle}. Say which sample is meant.`,
      });
    } else for (const row of fitting) excluded.add(row);
  });
  return { excluded, problems };
}
