import { converted, single, termFor, type Measured } from "./candidates";
import type { Species } from "./forms";
import type { Candidate, Refused } from "./resolution";
import { shortNumber } from "./speciesOfBody";

/** Oxides that are parts as soon as the table says elsewhere where the rest of the iron is. */
const bareOxides: ReadonlySet<string> = new Set(["FeO", "Fe2O3"]);

/**
 * Iron over a table. A total wins. Without one, the parts are added as iron, all that the table has. A bare Fe, FeO or Fe2O3
 * that stands alone may be the total or a part, a difference of up to a factor of two, and must be told which. A total is
 * never added to a part, and a part alone is never taken for the whole.
 *
 * @param columns the table's iron columns by mass
 * @param species what is asked for
 * @param own the column that has the asked name, where one has
 */
export function ironCandidates(
  columns: readonly Measured[],
  name: string,
  species: Species,
  own: Measured | undefined,
): { readonly ok: true; readonly candidates: readonly Candidate[] } | Refused | undefined {
  if (columns.length === 0) return undefined;
  const told = columns.filter((m) => !isUntold(m, columns));
  const totals = told.filter((m) => m.species?.iron === "total");
  if (species.iron === "total" || species.name === "Fe") return wholeIron(columns, told, totals, name, species, own);
  // A person who named a column FeO and gave it a species has said what it is.
  if (own !== undefined && told.includes(own)) return { ok: true, candidates: [single(own, name)] };
  const same = told
    .filter((m) => m.species?.name === species.name || m.species?.chemical.formula === species.chemical.formula)
    .filter((m) => m.species?.iron !== "total");
  if (same.length > 0) return { ok: true, candidates: same.map((m) => converted(m, species)) };
  const untold = columns.find((m) => m.species?.chemical.formula === species.chemical.formula && isUntold(m, columns));
  if (untold !== undefined) return mustBeTold(name, untold);
  const total = totals[0];
  if (total === undefined) return undefined;
  const text = `${name} is a part of the iron, and this table gives it as a total only, in ${total.column.name}. Write FeOt, Fe2O3t or Fe_total for the total.`;
  return { ok: false, name, code: "iron-total-only", column: total.column.name, text };
}

function wholeIron(
  columns: readonly Measured[],
  told: readonly Measured[],
  totals: readonly Measured[],
  name: string,
  species: Species,
  own: Measured | undefined,
): { readonly ok: true; readonly candidates: readonly Candidate[] } | Refused {
  const wanted: Species = species.name === "Fe" ? { ...species, iron: "total" } : species;
  const candidates: Candidate[] = [];
  const ownTotal = own !== undefined && totals.includes(own) ? own : undefined;
  if (ownTotal !== undefined)
    candidates.push(ownTotal.species?.chemical.formula === species.chemical.formula ? single(ownTotal, name) : converted(ownTotal, wanted));
  const rest = totals.filter((m) => m !== ownTotal);
  for (const m of rest) if (m.species?.chemical.formula === species.chemical.formula) candidates.push(converted(m, wanted));
  for (const m of rest) if (m.species?.chemical.formula !== species.chemical.formula) candidates.push(converted(m, wanted));
  const bareIron = columns.find((m) => m.species?.name === "Fe");
  const parts = onePerForm(told.filter((m) => m.species?.iron !== "total"));
  if (parts.length > 1 && bareIron === undefined) candidates.push(sum(parts, wanted));
  if (candidates.length > 0) return { ok: true, candidates };
  const untold = columns.find((m) => isUntold(m, columns));
  if (untold !== undefined) return mustBeTold(name, untold);
  const part = parts[0]?.column.name ?? "";
  const text = `${name} means all the iron, and this table gives only a part of it, in ${part}. Add a column with the rest or the total, or write ${part} where the part is meant.`;
  return { ok: false, name, code: "iron-part-only", column: part, text };
}

/** Whether a column is a bare Fe, FeO or Fe2O3 of which nothing says if it is the total. */
function isUntold(of: Measured, columns: readonly Measured[]): boolean {
  if (of.species?.iron !== "untold") return false;
  if (of.species.name === "Fe") return true;
  // FeO beside Fe2O3, metal, sulphide or a total is ferrous iron; beside a bare Fe nothing is said.
  return !columns.some(
    (m) => m.species !== undefined && m.species.name !== of.species?.name && (m.species.iron !== "untold" || bareOxides.has(m.species.name)),
  );
}

function onePerForm(parts: readonly Measured[]): readonly Measured[] {
  const forms = new Map<string, Measured>();
  for (const part of parts) {
    const form = part.species?.name.replace(/_ferr(?:ous|ic)$/u, "") ?? "";
    if (!forms.has(form)) forms.set(form, part);
  }
  return [...forms.values()];
}

function sum(parts: readonly Measured[], to: Species): Candidate {
  const terms = parts.map((part) => termFor(part, to));
  const written = terms.map((term) => (term.factor === 1 ? term.column.name : `${term.column.name} × ${shortNumber(term.factor)}`));
  return { terms, asItStands: false, sentence: `${to.name} = ${written.join(" + ")}` };
}

function mustBeTold(name: string, of: Measured): Refused {
  const bare = of.species?.name ?? "Fe";
  const column = of.column.name;
  const choices =
    bare === "Fe"
      ? "Fe_total (all the iron) or Fe_metal (the metal alone)"
      : `${bare}t (all the iron, written as ${bare}) or ${bare}_${bare === "FeO" ? "ferrous" : "ferric"} (${bare} alone)`;
  const text = `The column ${column} does not say whether it is all the iron or a part of it, so ${name} cannot be had from it. Set its species in the data block to ${choices}.`;
  return { ok: false, name, code: "iron-untold", column, text };
}
