import { parseSpecies, parseUnit, units, type Column, type Role, type UncertaintyKind } from "@/cells";
import type { Option } from "@/app/_ui/Select";

export const roleOptions: readonly Option<Role>[] = [
  { value: "sample", label: "sample name" },
  { value: "class", label: "class" },
  { value: "text", label: "text" },
  { value: "reference", label: "reference" },
  { value: "quantity", label: "quantity" },
  { value: "uncertainty", label: "uncertainty of" },
];

export const kindOptions: readonly Option<UncertaintyKind>[] = [
  { value: "1 sigma", label: "1σ" },
  { value: "2 sigma", label: "2σ" },
  { value: "1 sigma relative %", label: "1σ, % of value" },
  { value: "2 sigma relative %", label: "2σ, % of value" },
  { value: "95 % interval", label: "± of 95 %" },
];

export const unitOptions: readonly Option[] = [...Object.keys(units).map((symbol) => ({ value: symbol, label: symbol === "1" ? "ratio" : symbol }))];

/** The unit as the options have it; a unit nobody knows stays as it is written, so that its problem can be said. */
export function unitSymbol(unit: string | undefined): string {
  if (unit === undefined) return "1";
  return parseUnit(unit)?.symbol ?? unit;
}

/** Name of a column, as formulas use it. */
export function columnName(column: Column): string {
  return column.name ?? column.header ?? "";
}

/** The column in another role, with only what that role has. */
export function inRole(column: Column, role: Role, quantities: readonly string[]): Column {
  const common: Column = {
    role,
    ...(column.header === undefined ? {} : { header: column.header }),
    ...(column.position === undefined ? {} : { position: column.position }),
    ...(column.name === undefined ? {} : { name: column.name }),
  };
  if (role === "quantity") {
    const name = columnName(column);
    return {
      ...common,
      ...(column.species === undefined ? (parseSpecies(name) === undefined ? {} : { species: name }) : { species: column.species }),
      unit: column.unit ?? "wt%",
    };
  }
  if (role === "uncertainty") return { ...common, of: column.of ?? quantities[0] ?? "", as: column.as ?? "1 sigma" };
  return common;
}

/** Columns named in one line of text, "Sample, Class, SiO2 (wt%), MgO (wt%)", as a typed table starts with. */
export function columnsFromText(text: string): Column[] {
  const columns: Column[] = [];
  for (const part of text.split(/[,\n;\t]/)) {
    const match = /^\s*(.*?)\s*(?:[([]\s*(.*?)\s*[)\]])?\s*$/.exec(part);
    const name = match?.[1] ?? "";
    if (name === "" || columns.some((c) => c.name === name)) continue;
    const unit = match?.[2];
    const plain = name.toLowerCase();
    if (/^(sample|name|id|specimen)s?$/.test(plain)) columns.push({ name, role: "sample" });
    else if (/^(class|group|type|rock)$/.test(plain)) columns.push({ name, role: "class" });
    else if (/^(reference|ref|doi|citation)$/.test(plain)) columns.push({ name, role: "reference" });
    else if (unit !== undefined || parseSpecies(name) !== undefined)
      columns.push({ name, role: "quantity", ...(parseSpecies(name) === undefined ? {} : { species: name }), unit: unit ?? "wt%" });
    else columns.push({ name, role: "text" });
  }
  return columns;
}
