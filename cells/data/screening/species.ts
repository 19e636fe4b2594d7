import { State } from "../../quantity/state";
import { measuredColumns, resolveSpecies } from "../../species";
import type { Table } from "../../table/table";
import { shown, type Flags } from "./flags";

type Candidates = Extract<ReturnType<typeof resolveSpecies>, { ok: true }>["candidates"];
type Candidate = Candidates[number];

/** Where neither way to a number has a σ, a difference of this part of the larger is flagged; common practice, no source. */
const WITHOUT_SIGMA = 0.05;

/** Elements that a row gives in more than one way, differing by more than two of their joint σ. */
export function screenSpecies(table: Table, flags: Flags): void {
  const elements = new Map<string, number>();
  for (const { species, column } of measuredColumns(table))
    if (species !== undefined && column.unit.dimension === "mass fraction") elements.set(species.element, (elements.get(species.element) ?? 0) + 1);
  for (const [element, columns] of elements) {
    if (columns < 2) continue;
    const resolution = resolveSpecies(table, element === "Fe" ? "Fe_total" : element);
    if (resolution?.ok !== true) continue;
    // Troilite's sulphur is a part of the sulphur, not another measurement of it.
    const candidates = resolution.candidates.filter((candidate) => element !== "S" || candidate.terms.every((term) => term.column.species !== "FeS"));
    const [first, ...others] = candidates;
    if (first !== undefined) for (const other of others) compare(table, element, first, other, flags);
  }
}

function compare(table: Table, element: string, a: Candidate, b: Candidate, flags: Flags): void {
  const unit = a.terms[0]?.column.unit;
  if (unit === undefined) return;
  for (let row = 0; row < table.rows; row++) {
    if (table.setAside[row] === 1) continue;
    const [x, y] = [valueAt(a, row), valueAt(b, row)];
    const difference = Math.abs(x - y);
    if (!(difference > 1e-12 * Math.abs(x))) continue;
    const [sx, sy] = [sigmaAt(a, row), sigmaAt(b, row)];
    const known = Number.isFinite(sx) || Number.isFinite(sy);
    const joint = Math.sqrt((Number.isFinite(sx) ? sx * sx : 0) + (Number.isFinite(sy) ? sy * sy : 0));
    if (known ? difference <= 2 * joint : difference <= WITHOUT_SIGMA * Math.max(Math.abs(x), Math.abs(y))) continue;
    const by = known && joint > 0 ? `, ${(difference / joint).toFixed(1)}σ apart` : "";
    flags.flag("species disagree", row, a.terms[0]?.column.name, `${element} is ${shown(x, unit)} by ${waysOf(a)} and ${shown(y, unit)} by ${waysOf(b)}${by}`);
  }
}

function waysOf(candidate: Candidate): string {
  return candidate.terms.map((term) => term.column.name).join(" + ");
}

/** NaN where any of its terms has no number. */
function valueAt(candidate: Candidate, row: number): number {
  let value = 0;
  for (const term of candidate.terms) value += term.column.state[row] === State.present ? term.factor * (term.column.value[row] ?? Number.NaN) : Number.NaN;
  return value;
}

function sigmaAt(candidate: Candidate, row: number): number {
  let variance = 0;
  for (const term of candidate.terms) {
    const sigma = term.factor * (term.column.sigma[row] ?? Number.NaN);
    variance += sigma * sigma;
  }
  return Math.sqrt(variance);
}
