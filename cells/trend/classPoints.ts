import { CellError, type Problem } from "../errors";
import { aggregateOf, type Evaluated } from "../language";
import type { TrendBlock } from "../page/schema";
import { State, stateName } from "../quantity/state";
import type { Table } from "../table/table";
import { valueAt, type Chosen } from "./choosePoints";
import { covariance, type LinearForm, type Term } from "./linearForm";
import type { RawPulls } from "./pulls";
import type { ClassPoint } from "./sampleSource";

/** Classes that go into a fit, each a point with the errors of its means. */
export interface ChosenClasses extends Chosen {
  readonly classes: readonly ClassPoint[];
}

/** Means of fewer samples than this have a σ that is itself known badly. */
const FEW = 4;

/**
 * The points of a line through class means, `mean(x, Group)`: each with the σ of its two means and the error correlation that
 * they have because they are taken over the same samples. What is common to all classes (a body) is not in these.
 *
 * A class is chosen whole: the condition must hold for all of its samples or for none, since its mean is taken over all of them.
 *
 * @throws CellError where the two axes are not of the same classes, or the condition divides a class
 */
export function chooseClasses(block: TrendBlock, table: Table, x: Evaluated, y: Evaluated, where: Uint8Array | undefined, needsErrors: boolean): ChosenClasses {
  const names = x.byClass ?? [];
  if (y.byClass === undefined || x.byClass === undefined || x.splitColumn !== y.splitColumn)
    throw new CellError(
      "not-per-sample",
      `On x there is ${inWords(x)} and on y ${inWords(y)}, which are no points together. Give both axes a value for each sample, or for each class of one column.`,
      { field: "y" },
    );
  const column = table.columns.find((each) => each.kind === "text" && each.name === x.splitColumn);
  const labels = column?.kind === "text" ? column.text : table.classes;
  const chosen = where === undefined ? undefined : wholeClasses(names, labels, table, where);
  const { excluded, problems } = leftOutClasses(block, names);
  const leftOut: Record<string, number> = {};
  const count = (why: string): void => void (leftOut[why] = (leftOut[why] ?? 0) + 1);
  const rows: number[] = [];
  const classes: ClassPoint[] = [];
  names.forEach((name, place) => {
    const state = Math.max(x.state[place] ?? State.missing, y.state[place] ?? State.missing);
    const point: ClassPoint = { name, x: termsAt(x, place), y: termsAt(y, place) };
    const known = [...point.x, ...point.y].every(({ variable }) => variable.sigma >= 0);
    if (chosen?.has(name) === false) count("outside the condition");
    else if (excluded.has(name)) count("left out of this fit");
    else if (state !== State.present) count(stateName(state));
    else if (needsErrors && (!known || (point.x.length === 0 && point.y.length === 0))) count("without σ");
    else {
      rows.push(place);
      classes.push(point);
    }
  });
  const few = classes.filter((point) => samplesOf(point) < FEW);
  if (few.length > 0)
    problems.push({
      code: "few-in-class",
      severity: "note",
      block: block.id,
      text: `${few.map(({ name }) => name).join(", ")}: the means are taken over fewer than ${FEW} samples, so their σ, which weigh the points, are themselves known badly.`,
    });
  const n = rows.length;
  const points = { x: new Float64Array(n), y: new Float64Array(n), sigmaX: new Float64Array(n), sigmaY: new Float64Array(n), correlation: new Float64Array(n) };
  classes.forEach((point, i) => {
    const ofX: LinearForm = { value: 0, terms: point.x };
    const ofY: LinearForm = { value: 0, terms: point.y };
    const p = Math.sqrt(Math.max(0, covariance(ofX, ofX)));
    const q = Math.sqrt(Math.max(0, covariance(ofY, ofY)));
    points.x[i] = valueAt(x.value, rows[i] ?? 0);
    points.y[i] = valueAt(y.value, rows[i] ?? 0);
    points.sigmaX[i] = p;
    points.sigmaY[i] = q;
    points.correlation[i] = p > 0 && q > 0 ? Math.max(-1, Math.min(1, covariance(ofX, ofY) / (p * q))) : 0;
  });
  return { rows: Int32Array.from(rows), points, leftOut, problems, partlyKnown: 0, assumed: 0, classes };
}

function inWords({ byClass, splitColumn }: Evaluated): string {
  return byClass === undefined ? "a value for each sample" : `a value for each class of ${splitColumn ?? "a column"}`;
}

/** What one class's value depends on and no other's does. */
function termsAt(evaluated: Evaluated, place: number): Term[] {
  return evaluated.common.flatMap(({ variable, partial, place: own }) => (own === place ? [{ variable, partial: partial[place] ?? 0 }] : []));
}

/** The fewest samples that one of a point's means is taken over. */
function samplesOf(point: ClassPoint): number {
  let least = Number.POSITIVE_INFINITY;
  for (const { variable } of [...point.x, ...point.y]) least = Math.min(least, aggregateOf(variable)?.rows.length ?? least);
  return least;
}

function wholeClasses(names: readonly string[], labels: readonly string[], table: Table, where: Uint8Array): ReadonlySet<string> {
  const inside = new Map<string, number>();
  const all = new Map<string, number>();
  labels.forEach((label, row) => {
    if (table.setAside[row] === 1) return;
    all.set(label, (all.get(label) ?? 0) + 1);
    if (where[row] === 1) inside.set(label, (inside.get(label) ?? 0) + 1);
  });
  const divided = names.filter((name) => inside.has(name) && inside.get(name) !== all.get(name));
  if (divided.length > 0)
    throw new CellError(
      "condition-divides-class",
      `The condition holds for some samples of ${divided.join(", ")} and not for others, and a class's mean is taken over all of them. Choose whole classes, as in Group != "CI"; to leave samples out of the means, set them aside.`,
      { field: "where" },
    );
  return new Set(inside.keys());
}

/** Classes that somebody left out of this fit, named in the place of a row. */
function leftOutClasses(block: TrendBlock, names: readonly string[]): { excluded: ReadonlySet<string>; problems: Problem[] } {
  const excluded = new Set<string>();
  const problems: Problem[] = [];
  (block.leaveOut ?? []).forEach((entry, index) => {
    const name = String(entry.row);
    if (names.includes(name)) excluded.add(name);
    else
      problems.push({
        code: "no-such-row",
        severity: "error",
        block: block.id,
        field: `leaveOut[${index}]`,
        row: entry.row,
        text: `Row ${entry.row} is left out, but this line goes through the means of classes, and none is called so. Leave out a class by its name, or set the sample aside.`,
      });
  });
  return { excluded, problems };
}

/**
 * Pulls of the single samples behind class means: how far each lies from the means it is in, times how these move the line. Raw;
 * see pulls.ts.
 *
 * @param move how the line's slope and intercept answer each point
 */
export function samplePulls(
  classes: readonly ClassPoint[],
  move: { readonly slopeX: Float64Array; readonly slopeY: Float64Array; readonly interceptX: Float64Array; readonly interceptY: Float64Array },
): RawPulls & { readonly rows: Int32Array } {
  const slopes = new Map<number, number>();
  const intercepts = new Map<number, number>();
  const gather = (terms: readonly Term[], onSlope: number, onIntercept: number): void => {
    for (const { variable, partial } of terms) {
      const aggregated = aggregateOf(variable);
      if (aggregated === undefined) continue;
      aggregated.rows.forEach((row, i) => {
        const away = (aggregated.influence[i] ?? 0) * ((aggregated.measured.value[row] ?? NaN) - aggregated.value) * partial;
        slopes.set(row, (slopes.get(row) ?? 0) + onSlope * away);
        intercepts.set(row, (intercepts.get(row) ?? 0) + onIntercept * away);
      });
    }
  };
  classes.forEach((point, i) => {
    gather(point.x, move.slopeX[i] ?? 0, move.interceptX[i] ?? 0);
    gather(point.y, move.slopeY[i] ?? 0, move.interceptY[i] ?? 0);
  });
  const rows = [...slopes.keys()].sort((a, b) => a - b);
  return {
    rows: Int32Array.from(rows),
    slope: Float64Array.from(rows, (row) => slopes.get(row) ?? 0),
    intercept: Float64Array.from(rows, (row) => intercepts.get(row) ?? 0),
  };
}
