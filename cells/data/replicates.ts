import { chiSquareSurvival } from "../numeric";
import type { DataBlock, RowId } from "../page/schema";
import { State } from "../quantity/state";
import type { ColumnCorrelation, QuantityColumn, Table, TableColumn, TextColumn } from "../table/table";
import { copyCell, draftColumn, isSubstituted, type DraftColumn } from "./draft";
import { counted, listed, type Problems } from "./problems";

type Rule = NonNullable<DataBlock["replicates"]>;

/** What a merged table was made from, for traces. Neither JSON nor a message between threads takes it along. */
export interface Unmerged {
  readonly table: Table;
  /** Rows of that table behind each row of the merged one. */
  readonly groups: readonly (readonly number[])[];
  readonly rule: Rule;
}

const unmergedKey = Symbol("unmerged");

/** The table as it was before analyses of one sample were merged; undefined where none were. */
export function unmergedOf(table: Table): Unmerged | undefined {
  return (table as Table & { readonly [unmergedKey]?: Unmerged })[unmergedKey];
}

/**
 * Makes one row a sample out of the analyses of one name; rows set aside stay as rows of their own, and so do rows without a
 * name. Every merged row keeps the origins of all its analyses.
 *
 * - `weighted`: mean weighted by 1/σ², with σ = 1/√Σ(1/σ²). Analyses without a σ have no weight and are counted; where none
 *   has one, the plain mean is taken. A scatter beyond the σ (χ², p < 0.05) is said, and does not widen σ.
 * - `mean`: plain mean, with σ = s/√n of the analyses themselves; where they are all equal s says nothing, and the σ is that
 *   of the mean of their own (√Σσ²/n), unknown where one of theirs is.
 * - `prefer`: the value of the table or laboratory that stands first in the list, value by value; where that has no number,
 *   the next. Two that stand equally high and differ are an error, and the value is out of domain.
 */
export function mergeReplicates(table: Table, rule: Rule, problems: Problems): Table {
  const groups = groupRows(table, problems);
  const merged = groups.filter((group) => group.length > 1);
  if (merged.length === 0) return table;
  const merger = new Merger(table, groups, rule, problems);
  const columns = table.columns.map((column): TableColumn => (column.kind === "text" ? mergeWords(column, groups, table, problems) : merger.column(column)));
  merger.summarise(merged.length);
  const first = (group: readonly number[]): number => group[0] ?? 0;
  const made: Table & { readonly [unmergedKey]: Unmerged } = {
    ...table,
    [unmergedKey]: { table, groups, rule },
    rows: groups.length,
    rowIds: groups.map((group): RowId => table.rowIds[first(group)] ?? first(group) + 1),
    samples: groups.map((group) => table.samples[first(group)] ?? ""),
    classes:
      columns.find((column): column is TextColumn => column.kind === "text" && column.role === "class")?.text ?? new Array<string>(groups.length).fill(""),
    origins: groups.map((group) => group.flatMap((row) => table.origins[row] ?? [])),
    setAside: Uint8Array.from(groups, (group) => table.setAside[first(group)] ?? 0),
    columns,
    correlations: table.correlations.map((correlation) => merger.correlation(correlation)),
  };
  return made;
}

/** Rows that become one, in order of first appearance. */
function groupRows(table: Table, problems: Problems): readonly (readonly number[])[] {
  const groups: number[][] = [];
  const bySample = new Map<string, number[]>();
  let nameless = 0;
  for (let row = 0; row < table.rows; row++) {
    const sample = (table.samples[row] ?? "").trim().normalize("NFC");
    if (sample === "" && table.setAside[row] !== 1) nameless++;
    const known = sample === "" || table.setAside[row] === 1 ? undefined : bySample.get(sample);
    if (known !== undefined) {
      known.push(row);
      continue;
    }
    const group = [row];
    groups.push(group);
    if (sample !== "" && table.setAside[row] !== 1) bySample.set(sample, group);
  }
  if (nameless > 0)
    problems.warning(
      "replicates-nameless",
      `${counted(nameless, "row")} without a sample name ${nameless === 1 ? "stands" : "stand"} alone: nothing says what else is the same sample.`,
    );
  return groups;
}

function mergeWords(column: TextColumn, groups: readonly (readonly number[])[], table: Table, problems: Problems): TextColumn {
  const differing: string[] = [];
  const text = groups.map((group) => {
    const words = [...new Set(group.map((row) => column.text[row] ?? "").filter((word) => word !== ""))];
    if (column.role === "sample" || words.length <= 1) return words[0] ?? "";
    if (column.role !== "class") return words.join("; ");
    differing.push(`${table.samples[group[0] ?? 0] ?? ""} (${words.join(" or ")})`);
    return words[0] ?? "";
  });
  if (differing.length > 0)
    problems.warning("class-differs", `Analyses of one sample have different classes: ${listed(differing, 4)}. The first of each is used.`, {
      column: column.name,
    });
  return { ...column, text };
}

/** Which state to report where no analysis has a number: the one that says most. */
const informative: readonly number[] = [State.belowDetection, State.outOfDomain, State.setAside, State.missing];

class Merger {
  private readonly ranks: Float64Array | undefined;
  private withoutWeight = 0;
  private unweighted = 0;
  private filled = 0;
  private partlyBelow = 0;
  private readonly scattered: string[] = [];

  constructor(
    private readonly table: Table,
    private readonly groups: readonly (readonly number[])[],
    private readonly rule: Rule,
    private readonly problems: Problems,
  ) {
    this.ranks = typeof rule === "string" ? undefined : ranksOf(table, rule.prefer, problems);
  }

  column(from: QuantityColumn): DraftColumn {
    const made = draftColumn(from, this.groups.length);
    this.groups.forEach((group, at) => {
      const [only] = group;
      if (group.length === 1 && only !== undefined) copyCell(from, only, made, at);
      else if (this.ranks !== undefined) this.prefer(from, group, made, at, this.ranks);
      else this.average(from, group, made, at);
    });
    return made;
  }

  private average(from: QuantityColumn, group: readonly number[], made: DraftColumn, at: number): void {
    const present = group.filter((row) => from.state[row] === State.present);
    const [only] = present;
    if (only === undefined) {
      this.absent(from, group, made, at);
      return;
    }
    if (group.some((row) => from.state[row] === State.belowDetection)) this.partlyBelow++;
    if (present.length === 1) {
      copyCell(from, only, made, at);
      return;
    }
    const weights = this.rule === "weighted" ? this.weights(from, present) : undefined;
    const rows = weights === undefined ? present : present.filter((_, i) => (weights[i] ?? 0) > 0);
    const { value, sigma } = weights === undefined ? plainMean(from, present) : this.weightedMean(from, present, weights, at);
    made.value[at] = value;
    made.sigma[at] = sigma;
    made.state[at] = State.present;
    for (const row of rows) {
      if (from.assumed[row] === 1 && !Number.isNaN(sigma)) made.assumed[at] = 1;
      if (from.amended[row] === 1) made.amended[at] = 1;
      if (isSubstituted(from, row)) made.limit[at] = from.limit[row] ?? Number.NaN;
    }
    made.raw[at] = rows.map((row) => (from.raw[row] ?? "").trim()).join("; ");
    made.rawSigma[at] = rows.map((row) => (from.rawSigma[row] ?? "").trim()).join("; ");
    if (/^[; ]*$/u.test(made.rawSigma[at] ?? "")) made.rawSigma[at] = "";
  }

  /** Weights of the analyses; undefined where none has a σ. Values said to be exact leave no weight to others. */
  private weights(from: QuantityColumn, rows: readonly number[]): Float64Array | undefined {
    const exact = rows.some((row) => from.sigma[row] === 0);
    const weights = Float64Array.from(rows, (row) => {
      const sigma = from.sigma[row] ?? Number.NaN;
      if (exact) return sigma === 0 ? 1 : 0;
      return Number.isNaN(sigma) ? 0 : 1 / (sigma * sigma);
    });
    const having = weights.filter((weight) => weight > 0).length;
    if (having === 0) {
      this.unweighted++;
      return undefined;
    }
    this.withoutWeight += rows.length - having;
    return weights;
  }

  private weightedMean(from: QuantityColumn, rows: readonly number[], weights: Float64Array, at: number): { value: number; sigma: number } {
    let sum = 0;
    let weighted = 0;
    rows.forEach((row, i) => {
      const weight = weights[i] ?? 0;
      if (weight === 0) return;
      sum += weight;
      weighted += weight * (from.value[row] ?? Number.NaN);
    });
    const value = weighted / sum;
    if (rows.some((row) => from.sigma[row] === 0)) return { value, sigma: 0 };
    let S = 0;
    let n = 0;
    rows.forEach((row, i) => {
      const weight = weights[i] ?? 0;
      if (weight === 0) return;
      const miss = (from.value[row] ?? Number.NaN) - value;
      S += weight * miss * miss;
      n++;
    });
    if (n > 1 && chiSquareSurvival(S, n - 1) < 0.05) this.scattered.push(`${this.sample(at)} in ${from.name}`);
    return { value, sigma: 1 / Math.sqrt(sum) };
  }

  private prefer(from: QuantityColumn, group: readonly number[], made: DraftColumn, at: number, ranks: Float64Array): void {
    // A value below detection is a measurement too; only what is missing or set aside gives way to the next.
    const measured = group.filter((row) => from.state[row] === State.present || from.state[row] === State.belowDetection);
    const rankOf = (row: number): number => ranks[row] ?? Number.POSITIVE_INFINITY;
    const best = least(measured.map(rankOf));
    const chosen = measured.filter((row) => rankOf(row) === best);
    const [first] = chosen;
    if (first === undefined) {
      this.absent(from, group, made, at);
      return;
    }
    const same = (row: number): boolean =>
      from.state[row] === from.state[first] && Object.is(from.value[row], from.value[first]) && Object.is(from.sigma[row], from.sigma[first]);
    if (!chosen.every(same)) {
      made.state[at] = State.outOfDomain;
      made.raw[at] = chosen.map((row) => (from.raw[row] ?? "").trim()).join("; ");
      const ids = chosen.map((row) => String(this.table.rowIds[row] ?? row + 1));
      this.problems.oneOfMany(
        "error",
        "replicates-ambiguous",
        `${this.sample(at)}, ${from.name}: rows ${listed(ids)} stand equally high in the list of what is preferred, and differ. The value is left out; set one aside, add to the list, or merge by their mean.`,
        { row: this.table.rowIds[first] ?? first + 1, column: from.name },
        `more values of ${from.name} have no single preferred analysis`,
      );
      return;
    }
    if (best > least(group.map(rankOf))) this.filled++;
    copyCell(from, first, made, at);
  }

  private absent(from: QuantityColumn, group: readonly number[], made: DraftColumn, at: number): void {
    let place = informative.length;
    for (const row of group) {
      const found = informative.indexOf(from.state[row] ?? State.missing);
      // Of several limits the lowest says most.
      const lower = found === place && found === 0 && (from.limit[row] ?? Number.NaN) < (made.limit[at] ?? Number.NaN);
      if (found > place || (found === place && !lower)) continue;
      place = found;
      copyCell(from, row, made, at);
    }
  }

  /**
   * Error correlation of two merged values. Weighted: that of the two means, from the analyses that both rest on. Mean: the
   * mean of the analyses' own. Preferred: that of the one analysis both come from.
   */
  correlation({ of, value }: ColumnCorrelation): ColumnCorrelation {
    const [a, b] = of.map((name) => this.table.columns.find((column): column is QuantityColumn => column.kind === "quantity" && column.name === name));
    const merged = Float64Array.from(this.groups, (group) => {
      const [only] = group;
      if (group.length === 1 && only !== undefined) return value[only] ?? 0;
      if (a === undefined || b === undefined) return 0;
      const both = group.filter((row) => a.state[row] === State.present && b.state[row] === State.present);
      if (this.rule === "mean" || both.length === 0) return both.length === 0 ? 0 : both.reduce((sum, row) => sum + (value[row] ?? 0), 0) / both.length;
      if (this.ranks !== undefined) return this.preferredCorrelation(a, b, group, value, this.ranks);
      return weightedCorrelation(a, b, group, value);
    });
    return { of, value: merged };
  }

  private preferredCorrelation(a: QuantityColumn, b: QuantityColumn, group: readonly number[], value: Float64Array, ranks: Float64Array): number {
    const chosen = (column: QuantityColumn): number | undefined => {
      const measured = group.filter((row) => column.state[row] === State.present || column.state[row] === State.belowDetection);
      const best = least(measured.map((row) => ranks[row] ?? Number.POSITIVE_INFINITY));
      return measured.find((row) => ranks[row] === best);
    };
    const [x, y] = [chosen(a), chosen(b)];
    return x !== undefined && x === y ? (value[x] ?? 0) : 0;
  }

  private sample(at: number): string {
    const row = this.groups[at]?.[0] ?? 0;
    return this.table.samples[row] ?? "";
  }

  summarise(merged: number): void {
    const { problems } = this;
    const rules =
      typeof this.rule !== "string"
        ? `the value of ${listed(this.rule.prefer)}, in that order`
        : this.rule === "weighted"
          ? "means weighted by 1/σ², with σ = 1/√Σ(1/σ²)"
          : "plain means, with σ = s/√n of the analyses";
    problems.note("replicates", `${counted(merged, "sample")} with several analyses ${merged === 1 ? "is" : "are"} merged: ${rules}.`, { field: "replicates" });
    if (this.filled > 0)
      problems.note(
        "replicates-filled",
        `${counted(this.filled, "value")} that the preferred analysis does not give ${this.filled === 1 ? "is" : "are"} taken from the next.`,
      );
    if (this.withoutWeight > 0)
      problems.warning(
        "replicates-no-weight",
        `${counted(this.withoutWeight, "value")} without a σ ${this.withoutWeight === 1 ? "has" : "have"} no weight in a weighted mean and ${this.withoutWeight === 1 ? "is" : "are"} left out of it. Assume a σ to count them.`,
      );
    if (this.unweighted > 0)
      problems.warning(
        "replicates-unweighted",
        `In ${counted(this.unweighted, "place")} no analysis has a σ, so the plain mean is taken, with σ = s/√n. Assume a σ to weight them.`,
      );
    if (this.partlyBelow > 0)
      problems.warning(
        "replicates-below",
        `In ${counted(this.partlyBelow, "place")} some analyses of a sample are below detection and others are not; only the numbers are averaged, which leans high.`,
      );
    if (this.scattered.length > 0)
      problems.warning(
        "replicates-scatter",
        `Analyses scatter more than their σ allow (χ², p < 0.05) for ${listed(this.scattered, 5)}; the σ of the weighted mean does not hold there.`,
      );
  }
}

function plainMean(from: QuantityColumn, rows: readonly number[]): { readonly value: number; readonly sigma: number } {
  const n = rows.length;
  const value = rows.reduce((sum, row) => sum + (from.value[row] ?? Number.NaN), 0) / n;
  let squares = 0;
  let own = 0;
  for (const row of rows) {
    const miss = (from.value[row] ?? Number.NaN) - value;
    const sigma = from.sigma[row] ?? Number.NaN;
    squares += miss * miss;
    own += sigma * sigma;
  }
  // Analyses that agree to the last digit have no spread to take a σ from.
  if (rows.every((row) => from.value[row] === from.value[rows[0] ?? 0])) return { value: from.value[rows[0] ?? 0] ?? value, sigma: Math.sqrt(own) / n };
  return { value, sigma: Math.sqrt(squares / (n - 1) / n) };
}

/** Correlation of two weighted means: Σ ρ/(σx σy) over √(Σ 1/σx² · Σ 1/σy²), the sums over the analyses that each rests on. */
function weightedCorrelation(a: QuantityColumn, b: QuantityColumn, group: readonly number[], value: Float64Array): number {
  let [shared, x, y] = [0, 0, 0];
  for (const row of group) {
    const wx = weightOf(a, row);
    const wy = weightOf(b, row);
    x += wx;
    y += wy;
    shared += (value[row] ?? 0) * Math.sqrt(wx * wy);
  }
  return x > 0 && y > 0 ? shared / Math.sqrt(x * y) : 0;
}

function weightOf(column: QuantityColumn, row: number): number {
  const sigma = column.sigma[row] ?? Number.NaN;
  return column.state[row] === State.present && sigma > 0 ? 1 / (sigma * sigma) : 0;
}

/** Place of each row in the list: by the table it came from, or by a word in one of its columns of text. */
function ranksOf(table: Table, prefer: readonly string[], problems: Problems): Float64Array {
  const places = new Map(prefer.map((word, index) => [word.trim(), index]));
  const met = new Set<string>();
  const words = table.columns.filter((column): column is TextColumn => column.kind === "text" && column.role !== "sample" && column.role !== "class");
  const ranks = Float64Array.from({ length: table.rows }, (_, row) => {
    let rank = prefer.length;
    const said = [...(table.origins[row] ?? []).map((origin) => origin.table), ...words.map((column) => (column.text[row] ?? "").trim())];
    for (const word of said) {
      const place = places.get(word);
      if (place === undefined) continue;
      met.add(word);
      rank = Math.min(rank, place);
    }
    return rank;
  });
  const unmet = prefer.filter((word) => !met.has(word.trim()));
  if (unmet.length > 0)
    problems.warning(
      "prefer-unknown",
      `Nothing in this table is called ${listed(unmet.map((word) => `"${word}"`))}, which the list of what is preferred names. Write a table's handle, or a word of a column of text.`,
      { field: "replicates" },
    );
  return ranks;
}

function least(numbers: readonly number[]): number {
  return numbers.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
}
