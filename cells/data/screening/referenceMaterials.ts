import { State } from "../../quantity/state";
import { parseUnit, sigmaToCanonical, toCanonical } from "../../quantity/unit";
import { resolveSpecies } from "../../species";
import { referenceMaterialRows } from "../../species/reference/referenceMaterials";
import type { ReferenceMaterialRow } from "../../species/reference/rows";
import type { Table } from "../../table/table";
import { shown, type Flags } from "./flags";

/** Bias that is flagged where neither the analysis nor the recommended value has an uncertainty; common practice, no source. */
const WITHOUT_SIGMA = 0.05;

function squeeze(name: string): string {
  return name.toLowerCase().replace(/[\s_-]+/gu, "");
}

const byMaterial = new Map<string, ReferenceMaterialRow[]>();
for (const row of referenceMaterialRows) byMaterial.set(squeeze(row.material), [...(byMaterial.get(squeeze(row.material)) ?? []), row]);

/** Reference materials analysed in the same table, against their recommended values: off by more than two joint σ. */
export function screenReferenceMaterials(table: Table, flags: Flags): void {
  for (let row = 0; row < table.rows; row++) {
    if (table.setAside[row] === 1) continue;
    const recommended = byMaterial.get(squeeze(table.samples[row] ?? ""));
    for (const each of recommended ?? []) compare(table, row, each, flags);
  }
}

function compare(table: Table, row: number, recommended: ReferenceMaterialRow, flags: Flags): void {
  const unit = parseUnit(recommended.unit);
  const resolution = resolveSpecies(table, recommended.quantity.replace(/T$/u, "t"));
  if (unit === undefined || resolution?.ok !== true || resolution.state[row] !== State.present) return;
  const candidate = resolution.candidates[resolution.choice[row] ?? 0];
  if (candidate === undefined || candidate.terms.some((term) => term.column.unit.dimension !== unit.dimension)) return;
  let value = 0;
  let variance = 0;
  for (const term of candidate.terms) {
    value += term.factor * (term.column.value[row] ?? Number.NaN);
    const sigma = term.factor * (term.column.sigma[row] ?? Number.NaN);
    variance += sigma * sigma;
  }
  const expected = toCanonical(recommended.value, unit);
  const own = Math.sqrt(variance);
  const given = recommended.uncertainty === null ? Number.NaN : sigmaToCanonical(recommended.uncertainty, unit);
  const known = Number.isFinite(own) || Number.isFinite(given);
  const joint = Math.sqrt((Number.isFinite(own) ? own * own : 0) + (Number.isFinite(given) ? given * given : 0));
  const bias = value - expected;
  if (known ? Math.abs(bias) <= 2 * joint : Math.abs(bias) <= WITHOUT_SIGMA * expected) return;
  const per = `${bias < 0 ? "−" : "+"}${Math.abs((bias / expected) * 100).toFixed(1)} %`;
  const memory = recommended.checked === "from memory" ? ", recommended value from memory" : "";
  flags.flag(
    "reference material",
    row,
    candidate.terms[0]?.column.name,
    `${recommended.quantity} ${shown(value, unit, 4)} against the recommended ${recommended.value} ${unit.symbol} of ${recommended.material} (${per}; ${recommended.source}${memory})`,
  );
}
