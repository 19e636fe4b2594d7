import { evaluateTrend, fitOf } from "../../../cells/trend";
import { bodyLookup } from "../../../cells/species";
import type { BlockContext } from "../../../cells/page/context";
import type { BlockResult, TrendResult } from "../../../cells/page/results";
import type { TrendBlock } from "../../../cells/page/schema";
import type { Problem } from "../../../cells/errors";
import type { Table } from "../../../cells/table/table";
import { scopeOf, tableOf } from "../language/scopes";

/** What a trend is evaluated with when no whole page is needed: one table, aliases CI and BSE, other trends' results. */
export function contextOf(
  table: Table,
  given: { readonly lines?: Readonly<Record<string, string>>; readonly others?: readonly TrendResult[]; readonly dataProblems?: readonly Problem[] } = {},
): BlockContext {
  const results = new Map<string, BlockResult>((given.others ?? []).map((result) => [fitOf(result)?.handle ?? "?", result]));
  results.set(table.handle, {
    kind: "data",
    samples: table.rows,
    setAside: 0,
    valuesSetAside: 0,
    amended: 0,
    columns: [],
    screening: [],
    proposed: false,
    table,
    problems: given.dataProblems ?? [],
    bodiesUsed: {},
  });
  const scope = scopeOf(table, given.lines ?? {});
  return {
    bodies: bodyLookup({ CI: "CI_PLJ14", BSE: "BSE_MS95" }),
    aliases: ["CI", "BSE"],
    scope: () => scope,
    result: (handle) => results.get(handle),
    block: () => undefined,
    expand: (text) => text,
  };
}

export function trend(fields: Partial<TrendBlock> = {}): TrendBlock {
  return { kind: "trend", id: "t", data: "ch", x: "X", y: "Y", method: "york", ...fields };
}

export interface Points {
  readonly x: readonly (number | null)[];
  readonly y: readonly (number | null)[];
  readonly sigmaX?: readonly (number | null)[];
  readonly sigmaY?: readonly (number | null)[];
  readonly group?: readonly string[];
}

/** A table of two plain numbers a sample, X and Y. */
export function pointsTable({ x, y, sigmaX, sigmaY, group }: Points): Table {
  return tableOf({
    X: { unit: "1", species: null, value: x, ...(sigmaX === undefined ? {} : { sigma: sigmaX }) },
    Y: { unit: "1", species: null, value: y, ...(sigmaY === undefined ? {} : { sigma: sigmaY }) },
    ...(group === undefined ? {} : { Group: group }),
  });
}

export function fitPoints(points: Points, fields: Partial<TrendBlock> = {}): TrendResult {
  return evaluateTrend(trend(fields), contextOf(pointsTable(points)));
}

export function codes(result: TrendResult): string[] {
  return result.problems.map((problem) => problem.code);
}
