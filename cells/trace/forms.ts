import type { CommonVariable } from "../language";
import type { TraceNode } from "../page/results";
import { covariance, variance, type LinearForm } from "../trend";
import { combine, type Term } from "../trend/linearForm";
import type { ClassPoint } from "../trend/sampleSource";
import { isSampleVariable, type SampleSource, type SampleVariable } from "../trend/trendFit";
import { joinedBranches, type Branch } from "./branches";
import { commonNode, nameOfRow, type Tracing } from "./commons";
import { areCorrelated } from "./expression";
import { leavesOf } from "./leaves";
import { listSamples } from "./listSamples";
import { byShare, orNull, short } from "./node";
import { merged, sampleCells, type Pull } from "./sampleCells";

/** Theil–Sen's pulls cost the square of the number of samples, too much for an answer to a question. */
const MOST_PULLS = 2000;

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
    branches.push({ node: samplesNode(tracing, source, parts, share), inputs: parts.map(({ variable }) => variable) });
  }
  return joinedBranches(branches, areCorrelated);
}

type Parts = readonly { readonly variable: SampleVariable; readonly term: Term }[];

/** The samples of a fit, each with its part of what they bring to the number. */
function samplesNode(tracing: Tracing, source: SampleSource, parts: Parts, share: number | null): TraceNode {
  const n = source.rows.length;
  const { errors } = source;
  const notes = [`${n} ${source.classes === undefined ? "samples" : "classes"} of ${source.table.handle}`];
  if (errors.from === "errors" && errors.extraY > 0)
    notes.push(`Beside their errors they scatter by ${short(errors.extraY)} (1σ upwards), which is part of their share.`);
  if (errors.from === "residuals") notes.push("The σ comes from how far the samples lie from the line; the shares are by how much the line hangs on each.");
  const from =
    share === null ? [] : source.classes === undefined ? sampleNodes(tracing, source, parts, share) : classNodes(tracing, source, source.classes, parts, share);
  if (errors.from === "unknown")
    notes.push(
      from.length === 0
        ? "How the σ divides between the samples is not known."
        : "The shares are by how far each sample pulls the line, since this method has no other.",
    );
  return { kind: "fit", label: `samples of ${source.handle}`, value: null, sigma: null, unit: "", share, notes, from };
}

/** How the number moves with x and y of the i-th point. */
function influenceOf({ influence }: SampleSource, parts: Parts, i: number): { readonly dx: number; readonly dy: number } {
  let [dx, dy] = [0, 0];
  for (const { variable, term } of parts) {
    const by = term.partial * variable.scale;
    dx += by * ((variable.which === 0 ? influence.slopeX : influence.interceptX)[i] ?? 0);
    dy += by * ((variable.which === 0 ? influence.slopeY : influence.interceptY)[i] ?? 0);
  }
  return { dx, dy };
}

/** Variance that each sample brings to the number, but for a common factor; undefined where that is not known. */
function sampleWeights(source: SampleSource, parts: Parts): Float64Array | undefined {
  const { rows, errors, x, y } = source;
  if (errors.from === "unknown") return pulledWeights(source, parts);
  const [xx, xy, yy] = [x.covariance(x), x.covariance(y), y.covariance(y)];
  return Float64Array.from(rows, (row, i) => {
    const { dx, dy } = influenceOf(source, parts, i);
    const extra = dy * dy * errors.extraY * errors.extraY;
    return errors.from === "residuals" ? extra : dx * dx * at(xx, row) + 2 * dx * dy * at(xy, row) + dy * dy * at(yy, row) + extra;
  });
}

function pulledWeights(source: SampleSource, parts: Parts): Float64Array | undefined {
  const n = source.rows.length;
  if (n > MOST_PULLS || source.classes !== undefined) return undefined;
  const pulls = source.pulls();
  return Float64Array.from({ length: n }, (_, i) => {
    let sum = 0;
    for (const { variable, term } of parts) sum += term.partial * variable.scale * ((variable.which === 0 ? pulls.slope : pulls.intercept)[i] ?? 0);
    return sum * sum;
  });
}

function at(values: Float64Array, row: number): number {
  const value = (values.length === 1 ? values[0] : values[row]) ?? 0;
  return Number.isFinite(value) ? value : 0;
}

function sampleNodes({ context }: Tracing, source: SampleSource, parts: Parts, share: number): TraceNode[] {
  const { rows, table, x, y, errors } = source;
  const weights = sampleWeights(source, parts);
  if (weights === undefined || !weights.some((weight) => weight > 0)) return [];
  const [inX, inY] = [x.inputs, y.inputs];
  return listSamples(rows.length, weights, share, (i, own) => {
    const row = rows[i] ?? 0;
    const { dx, dy } = influenceOf(source, parts, i);
    const pulls = merged([
      ...inX.map((input): Pull => ({ variable: input.variable, partial: dx * at(input.partial, row) })),
      ...inY.map((input): Pull => ({ variable: input.variable, partial: dy * at(input.partial, row) })),
    ]);
    const weight = weights[i] ?? 0;
    const extra = errors.from === "errors" ? dy * dy * errors.extraY * errors.extraY : 0;
    const cells = sampleCells(context, pulls, row, own, errors.from === "errors" ? weight : null);
    const scatter: TraceNode[] =
      extra > 0 && own !== null && weight > 0
        ? [
            {
              kind: "constant",
              label: `scatter of the samples of ${source.handle} beyond their errors`,
              value: null,
              sigma: null,
              unit: "",
              share: (own * extra) / weight,
              notes: [],
              from: [],
            },
          ]
        : [];
    return {
      kind: "result",
      label: nameOfRow(table.samples[row], table.rowIds[row]),
      value: null,
      sigma: null,
      unit: "",
      share: own,
      notes: [`x ${point(x.value, x.sigma, row)}, y ${point(y.value, y.sigma, row)}`],
      from: byShare([...cells, ...scatter]),
    };
  });
}

/** The classes of a fit through their means, each down to the means it is made of. */
function classNodes(tracing: Tracing, source: SampleSource, classes: readonly ClassPoint[], parts: Parts, share: number): TraceNode[] {
  const { errors } = source;
  const trend = tracing.context.block(source.handle);
  const aggregates = trend?.kind === "trend" ? [trend.x, trend.y].flatMap((text) => leavesOf(tracing.context.scope(trend.data), text).aggregates) : [];
  const forms = classes.map(({ x, y }, i) => {
    const { dx, dy } = influenceOf(source, parts, i);
    const form = combine(0, [
      [{ value: 0, terms: x }, dx],
      [{ value: 0, terms: y }, dy],
    ]);
    return { form, extra: dy * dy * errors.extraY * errors.extraY };
  });
  if (errors.from === "unknown") return [];
  const weights = Float64Array.from(forms, ({ form, extra }) => (errors.from === "errors" ? Math.max(0, variance(form)) : 0) + extra);
  if (!weights.some((weight) => weight > 0)) return [];
  return listSamples(classes.length, weights, share, (i, own) => {
    const { form } = forms[i] ?? { form: { value: 0, terms: [] } };
    const weight = weights[i] ?? 0;
    const isDivided = errors.from === "errors" && own !== null && weight > 0;
    const branches = form.terms
      .filter(({ partial }) => partial !== 0)
      .map((term): Branch<CommonVariable> => {
        const part = isDivided ? (own * covariance({ value: 0, terms: [term] }, form)) / weight : null;
        return { node: commonNode(tracing, term.variable, part, aggregates), inputs: [term.variable] };
      });
    const { from, notes } = joinedBranches(branches, areCorrelated);
    return { kind: "result", label: classes[i]?.name ?? "", value: null, sigma: null, unit: "", share: own, notes, from };
  });
}

function point(values: Float64Array, sigmas: Float64Array, row: number): string {
  const sigma = orNull(sigmas[row]);
  return `${short(values[row] ?? Number.NaN, 5)}${sigma === null ? "" : ` ± ${short(sigma, 2)}`}`;
}
