import type { FileProposal } from "@/app/_page/engineProtocol";
import { parseSpecies, parseUnit, type Column } from "@/cells";
import { columnName } from "./columnWords";

/** The mapping of a file while a person looks at it: the proposal, with their changes. */
export interface Mapping {
  readonly columns: readonly Column[];
  /** Why each column was guessed so; "" where a person decided. */
  readonly reasons: readonly string[];
}

export function proposedMapping(proposal: FileProposal, known?: readonly Column[]): Mapping {
  if (known === undefined || known.length === 0) return { columns: proposal.columns.map((c) => c.column), reasons: proposal.columns.map((c) => c.reason) };
  // A mapping that was saved before stands for the columns it names; new ones get the proposal's.
  const columns = proposal.columns.map(
    ({ column }, i) => known.find((k) => k.header === column.header && (k.position === undefined || k.position === i + 1)) ?? column,
  );
  return { columns, reasons: columns.map((c, i) => (known.includes(c) ? "as it was saved" : (proposal.columns[i]?.reason ?? ""))) };
}

export function changedMapping(mapping: Mapping, index: number, column: Column): Mapping {
  const before = mapping.columns[index];
  const oldName = before === undefined ? "" : columnName(before);
  const newName = columnName(column);
  const columns = mapping.columns.map((c, i) => {
    if (i === index) return column;
    // Uncertainties follow the quantity they belong to when it is given another name.
    return c.role === "uncertainty" && c.of === oldName && oldName !== newName && column.role === "quantity" ? { ...c, of: newName } : c;
  });
  return { columns, reasons: mapping.reasons.map((r, i) => (i === index ? "" : r)) };
}

export function quantityNames(columns: readonly Column[]): string[] {
  return columns.filter((c) => c.role === "quantity").map(columnName);
}

/** What is wrong with one column's mapping; null where it can be saved. */
export function columnFault(columns: readonly Column[], index: number): string | null {
  const column = columns[index];
  if (column === undefined) return null;
  const name = columnName(column);
  if (name.trim() === "") return "Give this column a name.";
  if (columns.some((c, i) => i < index && columnName(c) === name)) return `Two columns are called ${name}. Give one of them another name.`;
  if (column.role === "quantity") {
    if (column.unit !== undefined && parseUnit(column.unit) === undefined) return `The unit ${column.unit} is not known. Choose one from the list.`;
    if (column.species !== undefined && parseSpecies(column.species) === undefined)
      return `${column.species} is no species known here. Write it as SiO2, Mg or FeOt, or leave it empty.`;
  }
  if (column.role === "uncertainty" && !quantityNames(columns).includes(column.of ?? ""))
    return "Choose the quantity this is the uncertainty of, or take the column as text.";
  return null;
}

/** What is wrong with the mapping as a whole. */
export function mappingFault(columns: readonly Column[]): string | null {
  const faults = columns.filter((_, i) => columnFault(columns, i) !== null).length;
  if (faults > 0) return faults === 1 ? "One column needs a decision before this can be saved." : `${faults} columns need a decision before this can be saved.`;
  if (columns.filter((c) => c.role === "sample").length > 1) return "Two columns are taken as sample names. Take one of them as text.";
  if (columns.filter((c) => c.role === "class").length > 1) return "Two columns are taken as class. Take one of them as text.";
  return null;
}

/** The columns as they are stored: a name that only repeats the header is left out. */
export function storedColumns(columns: readonly Column[]): Column[] {
  return columns.map((column) => {
    if (column.name === undefined || column.name !== column.header) return column;
    const { name: _, ...rest } = column;
    return rest;
  });
}
