import { evaluateData } from "../../../cells/data";
import type { Problem } from "../../../cells/errors";
import type { BlockContext } from "../../../cells/page/context";
import type { DataResult } from "../../../cells/page/results";
import type { DataBlock } from "../../../cells/page/schema";
import { fromCanonical, sigmaFromCanonical } from "../../../cells/quantity/unit";
import { stateName } from "../../../cells/quantity/state";
import { bodyLookup } from "../../../cells/species";
import type { QuantityColumn, Table, TextColumn } from "../../../cells/table/table";

/** A page of data blocks alone: each may read those before it. */
export class DataPage {
  private readonly blocks = new Map<string, DataBlock>();
  private readonly results = new Map<string, DataResult>();

  /** A block over a CSV text. */
  source(id: string, csv: string, more: Partial<DataBlock> = {}): DataResult {
    return this.add({ id, kind: "data", source: { file: `${id}.csv` }, ...more }, new TextEncoder().encode(csv));
  }

  add(block: DataBlock, source?: Uint8Array): DataResult {
    const result = evaluateData(block, this.context(), source);
    this.blocks.set(block.id, block);
    this.results.set(block.id, result);
    return result;
  }

  private context(): BlockContext {
    return {
      bodies: bodyLookup({}),
      aliases: [],
      scope: () => {
        throw new Error("a data block has no use of a scope");
      },
      expand: (text) => text,
      result: (handle) => this.results.get(handle),
      block: (handle) => this.blocks.get(handle),
    };
  }
}

/** A data block over a CSV text, alone on its page. */
export function read(csv: string, more: Partial<DataBlock> = {}): DataResult {
  return new DataPage().source("ch", csv, more);
}

export function tableOf(result: DataResult): Table {
  if (result.table === undefined) throw new Error(`no table: ${result.problems.map((problem) => problem.text).join(" ")}`);
  return result.table;
}

export function quantity(result: DataResult, name: string): QuantityColumn {
  const column = tableOf(result).columns.find((each) => each.name === name);
  if (column?.kind !== "quantity")
    throw new Error(
      `no quantity ${name} among ${tableOf(result)
        .columns.map((each) => each.name)
        .join(", ")}`,
    );
  return column;
}

export function words(result: DataResult, name: string): readonly string[] {
  const column = tableOf(result).columns.find((each): each is TextColumn => each.kind === "text" && each.name === name);
  if (column === undefined) throw new Error(`no words ${name}`);
  return column.text;
}

/** Values in the column's own unit; null where there is none. */
export function valuesOf(result: DataResult, name: string): (number | null)[] {
  const column = quantity(result, name);
  return Array.from(column.value, (value) => (Number.isNaN(value) ? null : fromCanonical(value, column.unit)));
}

/** 1σ in the column's own unit; null where unknown. */
export function sigmasOf(result: DataResult, name: string): (number | null)[] {
  const column = quantity(result, name);
  return Array.from(column.sigma, (sigma) => (Number.isNaN(sigma) ? null : sigmaFromCanonical(sigma, column.unit)));
}

export function statesOf(result: DataResult, name: string): string[] {
  return Array.from(quantity(result, name).state, stateName);
}

export function problemsOf(result: DataResult, code: string): readonly Problem[] {
  return result.problems.filter((problem) => problem.code === code);
}

/** The one problem of that code; fails where there is none, or several. */
export function problemOf(result: DataResult, code: string): Problem {
  const [problem, other] = problemsOf(result, code);
  if (problem === undefined || other !== undefined)
    throw new Error(`expected one problem ${code}, got ${result.problems.map((each) => `${each.code}: ${each.text}`).join("\n")}`);
  return problem;
}

export function errorsOf(result: DataResult): readonly string[] {
  return result.problems.filter((problem) => problem.severity === "error").map((problem) => problem.code);
}

export const sample = { header: "Sample", role: "sample" } as const;
export const wtpct = (species: string, header = species): NonNullable<DataBlock["columns"]>[number] => ({
  header,
  name: species,
  role: "quantity",
  species,
  unit: "wt%",
});
