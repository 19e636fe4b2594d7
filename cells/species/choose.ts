import type { Basis } from "../page/schema";
import { State } from "../quantity/state";
import { units, type Unit } from "../quantity/unit";
import type { Table } from "../table/table";
import type { Candidate, ResolutionWarning, Resolved } from "./resolution";
import { shortNumber } from "./speciesOfBody";

/** Which state to report where no candidate has a number: the one that says most. */
const informative: readonly number[] = [State.belowDetection, State.outOfDomain, State.setAside, State.missing];

/**
 * Chooses a candidate for every row: among those that have a number there, the first with a σ, else the first. For iron the
 * order alone decides between a total and the sum of parts. Cost: rows × candidates.
 */
export function choose(table: Table, name: string, candidates: readonly Candidate[], species?: string): Resolved {
  const choice = new Uint16Array(table.rows);
  const state = new Uint8Array(table.rows);
  const differing: string[] = [];
  let differ = 0;
  for (let row = 0; row < table.rows; row++) {
    let best = -1;
    let withSigma = false;
    let reported: number = State.missing;
    let reportedBy = 0;
    for (const [index, candidate] of candidates.entries()) {
      const found = stateAt(candidate, row);
      if (found !== State.present) {
        if (best < 0 && informative.indexOf(found) < informative.indexOf(reported)) [reported, reportedBy] = [found, index];
        continue;
      }
      const sigma = Number.isFinite(sigmaAt(candidate, row));
      // A total wins over a sum of parts, whether its σ is known or not.
      const mayReplace = best < 0 || (sigma && !withSigma && candidate.terms.length === 1);
      if (best >= 0 && disagree(candidates[best], candidate, row)) {
        differ++;
        if (differing.length < 3) differing.push(describe(table, candidates[best], candidate, row));
      }
      if (mayReplace) [best, withSigma] = [index, sigma];
    }
    choice[row] = best < 0 ? reportedBy : best;
    state[row] = table.setAside[row] === 1 ? State.setAside : best < 0 ? reported : State.present;
  }
  const first = candidates[0]?.terms[0]?.column;
  const warnings: ResolutionWarning[] = [];
  if (differ > 0) {
    const more = differ > differing.length ? ` and ${differ - differing.length} more` : "";
    warnings.push({
      code: "species-disagree",
      text: `${name} can be had in more than one way, and in ${differ === 1 ? "one row" : `${differ} rows`} they differ beyond their σ: ${differing.join("; ")}${more}. The column with a σ is used, else the first.`,
    });
  }
  const basis: Basis | undefined = first?.basis;
  return {
    ok: true,
    name,
    ...(species === undefined ? {} : { species }),
    unit: shownUnit(candidates),
    ...(basis === undefined ? {} : { basis }),
    candidates,
    choice,
    state,
    warnings,
  };
}

/** Moles per mass convert to a mass fraction, which is then shown in wt%. */
function shownUnit(candidates: readonly Candidate[]): Unit {
  const term = candidates[0]?.terms[0];
  if (term === undefined) return units["1"];
  return term.column.unit.dimension === "amount per mass" && term.factor !== 1 ? units["wt%"] : term.column.unit;
}

function stateAt(candidate: Candidate, row: number): number {
  let worst: number = State.present;
  for (const term of candidate.terms) worst = Math.max(worst, term.column.state[row] ?? State.missing);
  // A part that is missing leaves the sum unknown, whatever is known of the others.
  return worst;
}

function valueAt(candidate: Candidate, row: number): number {
  let value = 0;
  for (const term of candidate.terms) value += term.factor * (term.column.value[row] ?? Number.NaN);
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

/** Two ways to one number differ by more than two of their joint σ; where neither has a σ, by more than 5 %. */
function disagree(a: Candidate | undefined, b: Candidate, row: number): boolean {
  // Troilite and sulphur, or one part and a total, are not two measurements of one thing.
  if (a === undefined || isSulphide(a) !== isSulphide(b)) return false;
  const [x, y] = [valueAt(a, row), valueAt(b, row)];
  const [sx, sy] = [sigmaAt(a, row), sigmaAt(b, row)];
  if (!Number.isFinite(sx) && !Number.isFinite(sy)) return Math.abs(x - y) > 0.05 * Math.max(Math.abs(x), Math.abs(y));
  const joint = Math.sqrt((Number.isFinite(sx) ? sx * sx : 0) + (Number.isFinite(sy) ? sy * sy : 0));
  return Math.abs(x - y) > 2 * joint && Math.abs(x - y) > 1e-12 * Math.abs(x);
}

function isSulphide(candidate: Candidate): boolean {
  return candidate.terms.length === 1 && candidate.terms[0]?.column.species === "FeS";
}

function describe(table: Table, a: Candidate | undefined, b: Candidate, row: number): string {
  const unit = a === undefined ? units["wt%"] : shownUnit([a]);
  const write = (candidate: Candidate | undefined): string =>
    candidate === undefined ? "" : `${shortNumber(Number((valueAt(candidate, row) * unit.per).toPrecision(4)))} ${unit.symbol}`;
  const sample = table.samples[row];
  const where = sample === undefined || sample === "" ? `row ${String(table.rowIds[row])}` : `${sample} (row ${String(table.rowIds[row])})`;
  return `${where}: ${a?.sentence ?? ""} gives ${write(a)}, ${b.sentence} gives ${write(b)}`;
}
