import { CellError } from "../errors";
import type { CommonVariable } from "../language";
import type { RowId } from "../page/schema";
import { State, stateName } from "../quantity/state";
import { measuredColumns, parseSpecies, resolveSpecies, type Resolved } from "../species";
import type { QuantityColumn, Table } from "../table/table";
import { combine, exact, type LinearForm } from "./algebra";
import type { Access } from "./readSubstance";
import type { Known, Substance } from "./substance";

/** One row of a table as a substance: its elements by conversion, each measured cell an input with its σ. */
export function sampleOf(data: string, which: { readonly sample: string } | { readonly row: RowId }, access: Access): Substance {
  const table = tableOf(data, access);
  const row = "sample" in which ? rowOfSample(table, which.sample) : rowOfId(table, which.row);
  const sample = table.samples[row] ?? "";
  const name = sample === "" ? `row ${String(table.rowIds[row])} of ${table.handle}` : `${sample} of ${table.handle}`;
  if (table.setAside[row] === 1)
    throw new CellError("set-aside", `${name} is set aside, so nothing is calculated from it. Take it back in, or choose another.`);
  return { name, elements: elementsIn(table), at: (element) => elementAt(table, element, row, name) };
}

function tableOf(data: string, access: Access): Table {
  const { table } = access.context.scope(data);
  if (table === null) throw new CellError("no-table", `There is no table ${data}.`);
  if (table.renormalised !== undefined) access.note(table.renormalised, "warning");
  return table;
}

function rowOfSample(table: Table, sample: string): number {
  const rows = table.samples.flatMap((name, row) => (name === sample ? [row] : []));
  const [row] = rows;
  if (row === undefined) throw new CellError("no-such-sample", `${table.handle} has no sample "${sample}".`);
  if (rows.length > 1) {
    const ids = rows.map((r) => String(table.rowIds[r])).join(", ");
    throw new CellError("ambiguous-sample", `${table.handle} has ${rows.length} samples named "${sample}", in rows ${ids}. Choose one by its row.`);
  }
  return row;
}

function rowOfId(table: Table, id: RowId): number {
  const row = table.rowIds.findIndex((known) => known === id);
  if (row < 0) throw new CellError("no-such-row", `${table.handle} has no row ${String(id)}.`);
  return row;
}

/** Elements that some mass column of the table measures, in the table's order. */
function elementsIn(table: Table): string[] {
  const elements = new Set<string>();
  for (const { column, species } of measuredColumns(table))
    if (species !== undefined && column.unit.dimension === "mass fraction") elements.add(species.element);
  return [...elements];
}

/** What a table says of an element in general: how it is had, or why it is not. */
function resolveElement(table: Table, element: string): Resolved | string {
  const resolution = resolveSpecies(table, element);
  if (resolution === undefined) return `${table.handle} gives no ${element}.`;
  if (!resolution.ok) return resolution.text;
  if (resolution.species === undefined || parseSpecies(resolution.species)?.element !== element)
    return `The column ${element} of ${table.handle} does not give the mass fraction of ${element}.`;
  return resolution.unit.dimension === "mass fraction" ? resolution : `${element} of ${table.handle} is no mass fraction.`;
}

function elementAt(table: Table, element: string, row: number, name: string): Known {
  const resolved = resolveElement(table, element);
  if (typeof resolved === "string") return resolved;
  const state = resolved.state[row] ?? State.missing;
  if (state !== State.present) return `${element} of ${name} is ${stateName(state)}.`;
  const candidate = resolved.candidates[resolved.choice[row] ?? 0];
  if (candidate === undefined) return `${element} of ${name} is missing.`;
  const terms = candidate.terms.map(({ column, factor }) => ({ variable: cell(table, column, row, name), partial: factor }));
  return combine(
    terms.reduce((sum, { variable, partial }) => sum + variable.value * partial, 0),
    terms.map((term): [LinearForm, number] => [{ value: term.variable.value, terms: [{ variable: term.variable, partial: 1 }] }, term.partial]),
  );
}

function cell(table: Table, column: QuantityColumn, row: number, name: string): CommonVariable {
  const key = (of: string): string => `cell:${table.handle}:${String(table.rowIds[row])}:${of}`;
  const sigma = column.sigma[row] ?? Number.NaN;
  return {
    key: key(column.name),
    label: `${column.name} of ${name}`,
    value: column.value[row] ?? Number.NaN,
    sigma,
    unit: column.unit,
    covarianceWith: (other) => {
      for (const { of, value } of table.correlations) {
        const partner = of[0] === column.name ? of[1] : of[1] === column.name ? of[0] : undefined;
        if (partner !== undefined && other.key === key(partner)) return (value[row] ?? Number.NaN) * sigma * other.sigma;
      }
      return 0;
    },
    ...(column.assumed[row] === 1 ? { notes: ["Its σ is assumed."] } : {}),
  };
}

/** Moments of a class: means and the covariance of the means, by element. */
interface Mean {
  readonly rows: readonly number[];
  readonly values: ReadonlyMap<string, Float64Array>;
}

/**
 * The mean of the complete cases of a class: the samples that have every element the budget's expressions need. Its σ is the
 * standard error, s/√n, and the elements covary as the samples do, cov/n; one sample has no standard error.
 */
export function meanOfClass(data: string, name: string, access: Access): Substance {
  const table = tableOf(data, access);
  const members = table.classes.flatMap((of, row) => (of === name && table.setAside[row] !== 1 ? [row] : []));
  if (members.length === 0) throw new CellError("no-such-class", `${table.handle} has no sample of class "${name}" in use.`);
  const called = `the mean of ${name} in ${table.handle}`;
  const resolved = new Map(elementsIn(table).map((element) => [element, resolveElement(table, element)]));
  const valueAt = (element: string, row: number): number => {
    const known = resolved.get(element);
    if (known === undefined || typeof known === "string" || known.state[row] !== State.present) return Number.NaN;
    const candidate = known.candidates[known.choice[row] ?? 0];
    return candidate === undefined ? Number.NaN : candidate.terms.reduce((sum, { column, factor }) => sum + factor * (column.value[row] ?? Number.NaN), 0);
  };
  const wanted = access.needed.filter((element) => typeof resolved.get(element) === "object");
  const complete = members.filter((row) => wanted.every((element) => Number.isFinite(valueAt(element, row))));
  if (complete.length === 0)
    throw new CellError("no-complete-case", `No sample of class "${name}" in ${table.handle} has all of ${wanted.join(", ")}, so there is no mean of them.`);
  if (complete.length < members.length)
    access.note(
      `The mean of ${name} in ${table.handle} is that of ${complete.length} of its ${members.length} samples: the others lack one of ${wanted.join(", ")}.`,
    );
  const values = new Map<string, Float64Array>();
  for (const element of resolved.keys()) {
    const column = Float64Array.from(complete, (row) => valueAt(element, row));
    if (column.every((value) => Number.isFinite(value))) values.set(element, column);
  }
  const mean: Mean = { rows: complete, values };
  return {
    name: called,
    elements: [...values.keys()],
    at: (element) => {
      const known = resolved.get(element);
      if (known === undefined) return `${table.handle} gives no ${element}.`;
      if (typeof known === "string") return known;
      return meanAt(mean, element, `${data}:${name}`, called) ?? `Not all of the ${complete.length} samples that ${called} is made of have ${element}.`;
    },
  };
}

function meanAt(mean: Mean, element: string, id: string, called: string): LinearForm | undefined {
  const own = mean.values.get(element);
  if (own === undefined) return undefined;
  const n = own.length;
  const average = averageOf(own);
  const key = (of: string): string => `mean:${id}:${of}`;
  const covarianceOf = (other: Float64Array): number => {
    if (n < 2) return Number.NaN;
    const otherAverage = averageOf(other);
    let sum = 0;
    for (let i = 0; i < n; i++) sum += ((own[i] ?? 0) - average) * ((other[i] ?? 0) - otherAverage);
    return sum / (n - 1) / n;
  };
  const sigma = Math.sqrt(covarianceOf(own));
  if (sigma === 0) return exact(average);
  const variable: CommonVariable = {
    key: key(element),
    label: `${element} of ${called}`,
    value: average,
    sigma,
    covarianceWith: (other) => {
      for (const [of, column] of mean.values) if (other.key === key(of)) return covarianceOf(column);
      return 0;
    },
    notes: [n < 2 ? "One sample has no standard error." : `Standard error of ${n} samples`],
  };
  return { value: average, terms: [{ variable, partial: 1 }] };
}

function averageOf(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value;
  return sum / values.length;
}
