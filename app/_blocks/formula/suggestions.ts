import { counted } from "@/app/_ui/concise";
import type { FormulaBlock, PageResults } from "@/cells";
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

/** The functions of the language, how each is called and what it does. */
export const functions: readonly { readonly name: string; readonly call: string; readonly help: string }[] = [
  { name: "atoms", call: "atoms(Mg)", help: "Number of atoms in place of mass; a ratio of two is by atoms." },
  { name: "mol", call: "mol(SiO2)", help: "Number of formula units in place of mass." },
  { name: "oxide", call: "oxide(Si, SiO2)", help: "An element written as its oxide, by mass." },
  { name: "norm", call: "norm(Na / Si, CI)", help: "Divided by the same expression on a body; has no basis, and the body's σ is common to all samples." },
  { name: "at", call: "at(Mg / Si, CI)", help: "The same expression on a body: one value." },
  { name: "mean", call: "mean(x), mean(x, Group)", help: "Mean over the samples, or class by class; σ is sd/√n." },
  { name: "median", call: "median(x)", help: "Median over the samples; σ is 1.2533 sd/√n." },
  { name: "sd", call: "sd(x)", help: "Standard deviation over the samples." },
  { name: "se", call: "se(x)", help: "Standard error of the mean." },
  { name: "wmean", call: "wmean(x)", help: "Mean weighted by the samples' own σ." },
  { name: "count", call: "count(x)", help: "How many samples have a value." },
  { name: "least", call: "least(x)", help: "Smallest value over the samples." },
  { name: "most", call: "most(x)", help: "Largest value over the samples." },
  { name: "log10", call: "log10(x)", help: "Decimal logarithm of a number without unit." },
  { name: "ln", call: "ln(x)", help: "Natural logarithm of a number without unit." },
  { name: "exp", call: "exp(x)", help: "Exponential of a number without unit." },
  { name: "sqrt", call: "sqrt(x)", help: "Square root." },
  { name: "abs", call: "abs(x)", help: "Size without sign." },
  { name: "min", call: "min(a, b)", help: "The smaller of two, sample by sample." },
  { name: "max", call: "max(a, b)", help: "The larger of two, sample by sample." },
  { name: "wtpct", call: "wtpct(20)", help: "A number read as wt%." },
  { name: "ugg", call: "ugg(5)", help: "A number read as µg/g." },
  { name: "as_wtpct", call: "as_wtpct(x)", help: "Shown in wt%." },
  { name: "as_ugg", call: "as_ugg(x)", help: "Shown in µg/g." },
  { name: "from_dex", call: "from_dex(x)", help: "A logarithmic abundance as a ratio of atoms." },
  { name: "to_dex", call: "to_dex(x)", help: "A ratio of atoms as a logarithmic abundance." },
  { name: "is_missing", call: "is_missing(x)", help: "True where there is no value." },
  { name: "is_below", call: "is_below(x)", help: "True where the value is below detection." },
];

const plainName = /^[\p{L}_][\p{L}\p{N}_]*$/u;

function asName(name: string): string {
  return plainName.test(name) ? name : `\`${name}\``;
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
export function suggestionsFor(block: FormulaBlock, results: PageResults | null, bodies: Readonly<Record<string, string>>): Suggestion[] {
  const found = new Map<string, Suggestion>();
  const add = (label: string, detail: string, help: string, boost: number, insert = asName(label)): void => {
    if (!found.has(label)) found.set(label, { label, insert, detail, help, boost });
  };
  const data = block.data === undefined ? undefined : resultOf(results, block.data, "data");
  const table = tableOf(results, block.data);
  for (const column of table?.columns ?? []) {
    if (column.kind === "quantity") {
      const summary = data?.columns.find((c) => c.name === column.name);
      add(column.name, column.unit.symbol === "1" ? "no unit" : column.unit.symbol, summary === undefined ? "" : `Column of ${block.data}, ${counted(summary.n, "value")}.`, 5);
    } else if (column.role === "class") add(column.name, "class", `Compare with a class in quotes: ${column.name} == "CV".`, 3);
  }
  for (const column of table?.columns ?? []) {
    if (column.kind !== "quantity" || column.species === undefined) continue;
    for (const element of elementsIn(column.species)) if (element !== "O" || column.species === "O") add(element, "mass", `${element} from ${column.name}, by atomic weights.`, 4);
  }
  for (const [handle, result] of results?.blocks ?? []) {
    if (result.kind === "formula") for (const line of result.lines) add(handle === block.id ? line.name : `${handle}.${line.name}`, line.unit === "1" ? (line.basis === "mass" ? "by mass" : line.basis === "atoms" ? "by atoms" : "") : line.unit, `Line of ${handle}.`, 2, handle === block.id ? asName(line.name) : `${handle}.${asName(line.name)}`);
    else if (result.kind === "trend") for (const part of ["slope", "intercept"]) add(`${handle}.${part}`, "", `Of the trend ${handle}.`, 0, `${handle}.${part}`);
    else if (result.kind === "budget") add(`${handle}.solved`, result.solved?.unit ?? "", `Solved amount of the budget ${handle}.`, 0, `${handle}.solved`);
  }
  for (const [alias, compilation] of Object.entries(bodies)) add(alias, "body", `Stands for ${compilation} on this page.`, 1);
  for (const f of functions) add(f.name, f.call, f.help, -1, `${f.name}(`);
  return Array.from(found.values());
}
