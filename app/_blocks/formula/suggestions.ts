import { counted } from "@/app/_ui/concise";
import { functions, writeName, type FormulaBlock, type OwnBody, type PageResults } from "@/cells";
import { resultOf, tableOf } from "@/app/_blocks/shared/tableOf";

/** Something that may be written at the caret. */
export interface Suggestion {
  readonly label: string;
  readonly insert: string;
  /** Unit, basis or shape of the call, beside the label. */
  readonly detail: string;
  readonly help: string;
  /** Higher comes first among equals. */
  readonly boost: number;
}

/** Elements a formula of a species names: `Al2O3` gives Al and O. */
export function elementsIn(species: string): readonly string[] {
  if (!/^([A-Z][a-z]?\d*)+$/.test(species)) return [];
  return Array.from(new Set(species.match(/[A-Z][a-z]?/gu) ?? []));
}

/**
 * What may be written in a formula block: columns of its data, the elements they hold, other lines, results of trends and
 * budgets, bodies, functions.
 */
export function suggestionsFor(
  block: FormulaBlock,
  results: PageResults | null,
  bodies: Readonly<Record<string, string>>,
  ownBodies: Readonly<Record<string, OwnBody>> = {},
): Suggestion[] {
  const found = new Map<string, Suggestion>();
  const add = (label: string, detail: string, help: string, boost: number, insert = writeName(label)): void => {
    if (!found.has(label)) found.set(label, { label, insert, detail, help, boost });
  };
  const data = block.data === undefined ? undefined : resultOf(results, block.data, "data");
  const table = tableOf(results, block.data);
  for (const column of table?.columns ?? []) {
    if (column.kind === "quantity") {
      const summary = data?.columns.find((c) => c.name === column.name);
      add(
        column.name,
        column.unit.symbol === "1" ? "no unit" : column.unit.symbol,
        summary === undefined ? "" : `Column of ${block.data}, ${counted(summary.n, "value")}.`,
        5,
      );
    } else if (column.role === "class") add(column.name, "class", `Compare with a class in quotes: ${column.name} == "CV".`, 3);
  }
  for (const column of table?.columns ?? []) {
    if (column.kind !== "quantity" || column.species === undefined) continue;
    for (const element of elementsIn(column.species))
      if (element !== "O" || column.species === "O") add(element, "mass", `${element} from ${column.name}, by atomic weights.`, 4);
  }
  for (const [handle, result] of results?.blocks ?? []) {
    if (result.kind === "formula")
      for (const line of result.lines)
        add(
          handle === block.id ? line.name : `${handle}.${line.name}`,
          line.unit === "1" ? (line.basis === "mass" ? "by mass" : line.basis === "atoms" ? "by atoms" : "") : line.unit,
          `Line of ${handle}.`,
          2,
          handle === block.id ? writeName(line.name) : `${handle}.${writeName(line.name)}`,
        );
    else if (result.kind === "trend")
      for (const part of ["slope", "intercept"]) add(`${handle}.${part}`, "", `Of the trend ${handle}.`, 0, `${handle}.${part}`);
    else if (result.kind === "budget") add(`${handle}.solved`, result.solved?.unit ?? "", `Solved amount of the budget ${handle}.`, 0, `${handle}.solved`);
  }
  for (const [alias, compilation] of Object.entries(bodies)) add(alias, "body", `Stands for ${compilation} on this page.`, 1);
  for (const [id, { name, source, fromMemory }] of Object.entries(ownBodies))
    add(id, name, fromMemory ? "The group's own, written down from memory." : `The group's own, from ${source}.`, 0);
  for (const f of functions) add(f.name, f.form, f.help, -1, `${f.name}(`);
  return Array.from(found.values());
}
