import type { QuantityColumn, Table, TableColumn, TextColumn } from "../../../cells/table/table";
import { State } from "../../../cells/quantity/state";
import { parseUnit, sigmaToCanonical, toCanonical } from "../../../cells/quantity/unit";
import { bodyLookup } from "../../../cells/species";
import type { Named, Scope } from "../../../cells/language";
import type { Basis } from "../../../cells/page/schema";

export interface QuantityGiven {
  readonly unit?: string;
  readonly species?: string | null;
  readonly basis?: Basis;
  /** In `unit`; null is missing, "<" below detection. */
  readonly value: readonly (number | null | "<")[];
  readonly sigma?: readonly (number | null)[];
  readonly assumed?: readonly number[];
}

/** A table for tests: quantities in wt% of the species of their names unless said otherwise, and columns of text. */
export function tableOf(
  given: Readonly<Record<string, QuantityGiven | readonly string[]>>,
  extra: { readonly handle?: string; readonly setAside?: readonly number[]; readonly correlations?: Table["correlations"] } = {},
): Table {
  const rows = Math.max(...Object.values(given).map((column) => ("value" in column ? column.value.length : column.length)));
  const columns = Object.entries(given).map(([name, column]): TableColumn => ("value" in column ? quantity(name, column) : text(name, column)));
  const classes = columns.find((column): column is TextColumn => column.kind === "text" && column.role === "class")?.text;
  return {
    handle: extra.handle ?? "ch",
    rows,
    rowIds: Array.from({ length: rows }, (_, i) => i + 1),
    samples: Array.from({ length: rows }, (_, i) => `S${i + 1}`),
    classes: classes ?? new Array<string>(rows).fill(""),
    origins: Array.from({ length: rows }, (_, i) => [{ table: extra.handle ?? "ch", row: i + 1 }]),
    setAside: Uint8Array.from({ length: rows }, (_, i) => (extra.setAside?.includes(i) === true ? 1 : 0)),
    columns,
    correlations: extra.correlations ?? [],
  };
}

function text(name: string, values: readonly string[]): TextColumn {
  return { kind: "text", name, role: name === "Group" ? "class" : "text", text: values };
}

function quantity(name: string, given: QuantityGiven): QuantityColumn {
  const unit = parseUnit(given.unit ?? "wt%");
  if (unit === undefined) throw new Error(`no unit ${given.unit ?? ""}`);
  const species = given.species === undefined ? (unit.dimension === "mass fraction" ? name : undefined) : (given.species ?? undefined);
  const n = given.value.length;
  return {
    kind: "quantity",
    name,
    ...(species === undefined ? {} : { species }),
    unit,
    ...(given.basis === undefined ? {} : { basis: given.basis }),
    value: Float64Array.from(given.value, (v) => (typeof v === "number" ? toCanonical(v, unit) : Number.NaN)),
    sigma: Float64Array.from({ length: n }, (_, i) => {
      const s = given.sigma?.[i] ?? null;
      return s === null ? Number.NaN : sigmaToCanonical(s, unit);
    }),
    state: Uint8Array.from(given.value, (v) => (v === null ? State.missing : v === "<" ? State.belowDetection : State.present)),
    limit: new Float64Array(n).fill(Number.NaN),
    assumed: Uint8Array.from({ length: n }, (_, i) => given.assumed?.[i] ?? 0),
    raw: given.value.map(String),
    rawSigma: new Array<string>(n).fill(""),
    amended: new Uint8Array(n),
  };
}

/** A scope over a table, with lines `name: expression` and other named things. */
export function scopeOf(table: Table | null, lines: Readonly<Record<string, string>> = {}, named: Readonly<Record<string, Named>> = {}): Scope {
  const scope: Scope = {
    table,
    bodies: bodyLookup({ CI: "CI_PLJ14", BSE: "BSE_MS95" }),
    lookup: (name, member) => {
      const key = member === undefined ? name : `${name}.${member}`;
      if (Object.hasOwn(named, key)) return named[key];
      const line = member === undefined || name === "r" ? (member ?? name) : undefined;
      const text = line !== undefined && Object.hasOwn(lines, line) ? lines[line] : undefined;
      return line === undefined || text === undefined ? undefined : { kind: "line", block: "r", name: line, text, scope };
    },
  };
  return scope;
}

/** The error that a piece of work throws, as code, place and sentence; fails where it throws none. */
export function errorOf(work: () => unknown): { readonly code: string; readonly span: readonly [number, number] | undefined; readonly text: string } {
  try {
    work();
  } catch (error) {
    if (error instanceof Error && error.name === "CellError" && "code" in error && "place" in error) {
      const { span } = error.place as { span?: readonly [number, number] };
      return { code: String(error.code), span, text: error.message };
    }
    throw error;
  }
  throw new Error("expected an error, and there was none");
}
