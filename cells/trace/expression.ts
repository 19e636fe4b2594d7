import { evaluateExpression, traceRow, type CommonVariable, type Evaluated, type Scope, type TracedColumn, type TracedInput } from "../language";
import type { TraceNode } from "../page/results";
import { State, stateName } from "../quantity/state";
import { resolveSpecies, type Candidate, type Resolved } from "../species";
import type { QuantityColumn, Table } from "../table/table";
import { variableCovariance } from "../trend/linearForm";
import { joinedBranches, type Branch } from "./branches";
import { cellNodes } from "./cells";
import { commonNode, type Tracing } from "./commons";
import { leavesOf, type Leaves } from "./leaves";
import { inUnit, listed } from "./node";

/**
 * Where one entry of an expression comes from: what it names, by conversion from which cells; bodies, fits, means and amounts;
 * the numbers written in it. Shares of the variance sum to 1 over the branches.
 *
 * @param index entry of the result; 0 where it has one only
 * @returns null where there is no such entry
 */
export function expressionNode(tracing: Tracing, scope: Scope, text: string, label: string, block: string, index: number): TraceNode | null {
  const evaluated = evaluateExpression(scope, text, { block });
  if (index < 0 || index >= evaluated.rows || !Number.isInteger(index)) return null;
  const leaves = leavesOf(scope, text);
  const traced = traceRow(evaluated, index);
  const sigma = evaluated.sigma[index] ?? Number.NaN;
  const known = Number.isFinite(sigma);
  const perSample = evaluated.perSample ? measuredBranches(tracing, evaluated, leaves, traced.inputs, index) : [];
  const commons = traced.inputs.flatMap((input): Branch<TracedInput>[] =>
    input.kind === "common" ? [{ node: commonNode(tracing, input.variable, known ? input.share : null, leaves.aggregates), inputs: [input] }] : [],
  );
  const joined = joinedBranches([...perSample, ...commons], correlated);
  const constants = leaves.numbers.map(({ text: written, value }): TraceNode => ({
    kind: "constant",
    label: written,
    value,
    sigma: 0,
    unit: "",
    share: known ? 0 : null,
    notes: ["Written in the formula, without error."],
    from: [],
  }));
  const state = evaluated.state[index] ?? State.missing;
  const isPresent = state === State.present;
  return {
    kind: "result",
    label,
    value: isPresent ? (evaluated.value[index] ?? null) : null,
    sigma: isPresent && known ? sigma : null,
    unit: evaluated.unit.symbol,
    basis: evaluated.basis,
    share: isPresent && known ? 1 : null,
    notes: [...rootNotes(evaluated, leaves, traced.inputs, traced.bodies, index, state), ...(isPresent && known ? joined.notes : [])],
    from: [...joined.from, ...unique(constants)],
  };
}

function rootNotes(
  evaluated: Evaluated,
  leaves: Leaves,
  inputs: readonly TracedInput[],
  bodies: Readonly<Record<string, string>>,
  index: number,
  state: number,
): string[] {
  const notes: string[] = [];
  if (state !== State.present) notes.push(`It has no value: it is ${stateName(state)}.`);
  if (evaluated.remark !== null) notes.push(`${evaluated.remark.charAt(0).toUpperCase()}${evaluated.remark.slice(1)}.`);
  for (const { block, name, text } of leaves.lines) notes.push(`By way of ${name} = ${text} (${block}).`);
  for (const [written, id] of Object.entries(bodies)) if (written !== id) notes.push(`${written} is ${id} on this page.`);
  if (evaluated.lowerBound[index] === 1) {
    const unknown = inputs
      .filter((input) => Number.isNaN(input.sigma))
      .map((input) => (input.kind === "column" ? input.variable.column.name : input.variable.label));
    notes.push(`The σ is a lower bound: that of ${listed(unknown) || "an input"} is unknown.`);
  } else if (state === State.present && !Number.isFinite(evaluated.sigma[index])) notes.push("Its σ is unknown: no input has one.");
  if (evaluated.nearEdge[index] === 1)
    notes.push("A divisor or the argument of a function is large in σ against its value, so the σ given, of first order, is a rough one.");
  for (const { text } of evaluated.problems) notes.push(text);
  return notes;
}

/** A name of the expression and the columns that give it in this row. */
interface Named {
  readonly names: string[];
  readonly table: Table;
  readonly resolution: Resolved;
  readonly candidates: Candidate[];
  readonly columns: Set<QuantityColumn>;
}

function measuredBranches(tracing: Tracing, evaluated: Evaluated, leaves: Leaves, inputs: readonly TracedInput[], row: number): Branch<TracedInput>[] {
  const traced = inputs.filter((input): input is TracedColumn => input.kind === "column");
  const known = Number.isFinite(evaluated.sigma[row]);
  return namesInRow(leaves, row).flatMap((named): Branch<TracedInput>[] => {
    const own = traced.filter((input) => named.columns.has(input.variable.column));
    const isAbsent = (named.resolution.state[row] ?? State.missing) !== State.present;
    // What only decides, as in a condition, has no part in the number.
    if (own.length === 0 && !isAbsent) return [];
    const shares = own.map((input) => input.share);
    const share =
      known && shares.some((part, i) => part !== null && !Number.isNaN(own[i]?.sigma)) ? shares.reduce<number>((sum, part) => sum + (part ?? 0), 0) : null;
    return [{ node: conversionNode(tracing, named, own, row, share), inputs: own }];
  });
}

/** Names that share a column are one branch, since its error is one. */
function namesInRow(leaves: Leaves, row: number): Named[] {
  const found: Named[] = [];
  for (const { table, name } of leaves.measured) {
    const resolution = resolveSpecies(table, name);
    if (resolution?.ok !== true) continue;
    const candidate = resolution.candidates[resolution.choice[row] ?? 0];
    if (candidate === undefined) continue;
    const columns = candidate.terms.map(({ column }) => column);
    const same = found.find((each) => each.table === table && columns.some((column) => each.columns.has(column)));
    if (same === undefined) found.push({ names: [name], table, resolution, candidates: [candidate], columns: new Set(columns) });
    else {
      same.names.push(name);
      same.candidates.push(candidate);
      for (const column of columns) same.columns.add(column);
    }
  }
  return found;
}

function conversionNode({ context }: Tracing, named: Named, inputs: readonly TracedColumn[], row: number, share: number | null): TraceNode {
  const { names, table, resolution, candidates, columns } = named;
  const [candidate] = candidates;
  const single = names.length === 1 && candidate !== undefined;
  const state = resolution.state[row] ?? State.missing;
  let value = 0;
  let variance = 0;
  for (const { column, factor } of single ? candidate.terms : []) {
    value += factor * (column.value[row] ?? Number.NaN);
    const sigma = factor * (column.sigma[row] ?? Number.NaN);
    variance += sigma * sigma;
  }
  const number = single && state === State.present ? inUnit(value, Math.sqrt(variance), resolution.unit) : { value: null, sigma: null, unit: "" };
  const notes = candidates.filter((each, i) => !each.asItStands || each.sentence !== names[i]).map(({ sentence }) => sentence);
  if (state !== State.present) notes.push(`It is ${stateName(state)} here.`);
  return {
    kind: "conversion",
    label: names.join(", "),
    ...number,
    share,
    notes: [...new Set(notes)],
    from: [...columns].flatMap((column) => {
      const input = inputs.find((each) => each.variable.column === column);
      return cellNodes(context, table, column, row, share === null || input === undefined || Number.isNaN(input.sigma) ? null : input.share);
    }),
  };
}

function correlated(a: TracedInput, b: TracedInput): boolean {
  if (a.kind === "column" && b.kind === "column") {
    if (a.variable.table !== b.variable.table) return false;
    const pair = a.variable.table.correlations.find(({ of }) => of.includes(a.variable.column.name) && of.includes(b.variable.column.name));
    return (pair?.value[a.row] ?? 0) !== 0 && pair !== undefined && Number.isFinite(pair.value[a.row]);
  }
  return a.kind === "common" && b.kind === "common" && areCorrelated(a.variable, b.variable);
}

export function areCorrelated(a: CommonVariable, b: CommonVariable): boolean {
  const covariance = variableCovariance(a, b);
  return Number.isFinite(covariance) && covariance !== 0;
}

function unique(nodes: readonly TraceNode[]): TraceNode[] {
  return nodes.filter((node, i) => nodes.findIndex((other) => other.label === node.label) === i);
}
