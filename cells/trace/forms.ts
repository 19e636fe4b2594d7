import type { CommonVariable } from "../language";
import type { TraceNode } from "../page/results";
import { covariance, variance, type LinearForm } from "../trend";
import type { Term } from "../trend/linearForm";
import { isSampleVariable, type SampleSource, type SampleVariable } from "../trend/trendFit";
import { joinedBranches, type Branch } from "./branches";
import { commonNode, nameOfRow, type Tracing } from "./commons";
import { areCorrelated } from "./expression";
import { byShare, orNull, short } from "./node";

/** Samples of a fit that are listed one by one. */
const MOST_SAMPLES = 40;

/** The branches of a number that is known as a form of what it depends on; slope and intercept of one fit are one branch. */
export function formBranches(tracing: Tracing, form: LinearForm): { from: TraceNode[]; notes: string[] } {
  const total = variance(form);
  const terms = form.terms.filter(({ partial }) => partial !== 0);
  const shareOf = (term: Term): number | null => (total > 0 && term.variable.sigma >= 0 ? covariance({ value: 0, terms: [term] }, form) / total : null);
  const branches: Branch<CommonVariable>[] = [];
  const fits = new Map<SampleSource, { variable: SampleVariable; term: Term }[]>();
  for (const term of terms) {
    const { variable } = term;
    if (isSampleVariable(variable)) fits.set(variable.of, [...(fits.get(variable.of) ?? []), { variable, term }]);
    else branches.push({ node: commonNode(tracing, variable, shareOf(term)), inputs: [variable] });
  }
  for (const [source, parts] of fits) {
    const shares = parts.map(({ term }) => shareOf(term));
    const share = shares.every((part) => part === null) ? null : shares.reduce<number>((sum, part) => sum + (part ?? 0), 0);
    branches.push({ node: samplesNode(source, parts, share), inputs: parts.map(({ variable }) => variable) });
  }
  return joinedBranches(branches, areCorrelated);
}

/** The samples of a fit, each with its part of what they bring to the number. */
function samplesNode(source: SampleSource, parts: readonly { readonly variable: SampleVariable; readonly term: Term }[], share: number | null): TraceNode {
  const n = source.rows.length;
  const { errors } = source;
  const notes = [`${n} ${source.classes === undefined ? "samples" : "classes"} of ${source.table.handle}`];
  if (errors.from === "errors" && errors.extraY > 0)
    notes.push(`Beside their errors they scatter by ${short(errors.extraY)} (1σ upwards), which is part of their share.`);
  if (errors.from === "residuals") notes.push("The σ comes from how far the samples lie from the line.");
  if (errors.from === "unknown") notes.push("How the σ divides between the samples is not known for this method.");
  const weights = errors.from === "unknown" || source.classes !== undefined ? undefined : sampleWeights(source, parts);
  return {
    kind: "fit",
    label: `samples of ${source.handle}`,
    value: null,
    sigma: null,
    unit: "",
    share,
    notes,
    from: weights === undefined || share === null ? [] : sampleNodes(source, weights, share),
  };
}

/** Variance that each sample brings to the number, but for a common factor. */
function sampleWeights(source: SampleSource, parts: readonly { readonly variable: SampleVariable; readonly term: Term }[]): Float64Array {
  const { rows, influence, errors, x, y } = source;
  const [xx, xy, yy] = [x.covariance(x), x.covariance(y), y.covariance(y)];
  const at = (values: Float64Array, row: number): number => {
    const value = (values.length === 1 ? values[0] : values[row]) ?? 0;
    return Number.isFinite(value) ? value : 0;
  };
  return Float64Array.from(rows, (row, i) => {
    let [dx, dy] = [0, 0];
    for (const { variable, term } of parts) {
      dx += term.partial * ((variable.which === 0 ? influence.slopeX : influence.interceptX)[i] ?? 0);
      dy += term.partial * ((variable.which === 0 ? influence.slopeY : influence.interceptY)[i] ?? 0);
    }
    const extra = dy * dy * errors.extraY * errors.extraY;
    return errors.from === "residuals" ? extra : dx * dx * at(xx, row) + 2 * dx * dy * at(xy, row) + dy * dy * at(yy, row) + extra;
  });
}

function sampleNodes(source: SampleSource, weights: Float64Array, share: number): TraceNode[] {
  const { rows, table, x, y } = source;
  let total = 0;
  for (const weight of weights) total += weight;
  if (!(total > 0)) return [];
  const order = Array.from(weights, (_, i) => i).sort((a, b) => (weights[b] ?? 0) - (weights[a] ?? 0) || a - b);
  const nodes = order.slice(0, MOST_SAMPLES).map((i): TraceNode => {
    const row = rows[i] ?? 0;
    return {
      kind: "result",
      label: nameOfRow(table.samples[row], table.rowIds[row]),
      value: null,
      sigma: null,
      unit: "",
      share: (share * (weights[i] ?? 0)) / total,
      notes: [`row ${table.rowIds[row] ?? ""}: x ${point(x.value, x.sigma, row)}, y ${point(y.value, y.sigma, row)}`],
      from: [],
    };
  });
  const rest = order.slice(MOST_SAMPLES);
  if (rest.length === 0) return byShare(nodes);
  const left = rest.reduce((sum, i) => sum + (weights[i] ?? 0), 0);
  return [
    ...byShare(nodes),
    { kind: "aggregate", label: `${rest.length} more samples`, value: null, sigma: null, unit: "", share: (share * left) / total, notes: [], from: [] },
  ];
}

function point(values: Float64Array, sigmas: Float64Array, row: number): string {
  const sigma = orNull(sigmas[row]);
  return `${short(values[row] ?? Number.NaN, 5)}${sigma === null ? "" : ` ± ${short(sigma, 2)}`}`;
}
