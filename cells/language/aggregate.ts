import { CellError } from "../errors";
import { State } from "../quantity/state";
import { units } from "../quantity/unit";
import { aggregateCovariance, aggregateValue, type AggregateValue } from "./aggregateValue";
import type { Compiler } from "./compiler";
import type { CompiledCondition, CompiledLabels, CompiledValue } from "./compiled";
import { isDimensionless } from "./dimension";
import { sourceOf, type Frame } from "./frame";
import type { AggregateName } from "./functions";
import { perSampleCovariance } from "./covariance";
import { structureOf } from "./graph";
import { plainNumber, shownUnit, type Meaning } from "./meaning";
import { measure, type Measurement } from "./measure";
import type { CommonVariable } from "./scope";
import { splitBy, type Split } from "./split";
import type { CallTree, Tree } from "./tree";

/**
 * `mean(x)`, `mean(x, "CV")`, `mean(x, Group)` and their like: one number of many samples. It is a common variable of its own,
 * with the scatter of the samples as its σ, and leans in turn on what is common to the samples (a body that normalised them),
 * which therefore counts once.
 */
export function aggregate(compiler: Compiler, tree: CallTree, name: AggregateName, frame: Frame): CompiledValue {
  const [first, second] = tree.args;
  if (first === undefined) throw new CellError("wrong-arguments", `${name} lacks an argument.`, { span: tree.span });
  if (frame.on !== "table")
    throw new CellError("not-on-body", `${name}( ) is taken over samples, and ${"body" in frame.on ? frame.on.body.id : "a composition"} is a single one.`, {
      span: tree.span,
    });
  const compiled = compiler.compile(first, frame);
  const of = compiled.kind === "condition" && name === "count" ? countable(compiler, compiled) : compiler.value(first, frame);
  const { over } = of;
  if (over === null || over.split !== null)
    throw new CellError(
      "not-per-sample",
      `${name}( ) needs a value for each sample, and ${sourceOf(first, frame)} has ${over === null ? "one for all" : "one for each class"}.`,
      { span: first.span },
    );
  const measured = measure(compiler, of);
  const present = presentRows(measured, over.table.setAside, compiled.kind === "condition");
  const key = `${name}(${structureOf(compiler.graph, of.node)})`;
  const text = `${name}(${sourceOf(first, frame)})`;
  const make = (rows: Int32Array, which: string): CommonVariable => variableOf(aggregateValue(name, measured, rows), key + which, text + which, of);
  const meaning = meaningOf(name, of, first);
  const shared = { compiler, tree, meaning, name, measured };
  if (second === undefined) return single(shared, make(present, ""));
  const chosen = classes(compiler, second, over.table, frame, first);
  if (typeof chosen === "string") {
    const { classes: names } = over.table;
    const rows = present.filter((row) => names[row] === chosen);
    if (!names.includes(chosen)) throw unknownClass(chosen, names, over.table.handle, second);
    return single(shared, make(rows, ` of ${chosen}`));
  }
  return byClass(
    shared,
    chosen,
    rowsByClass(present, chosen).map((rows, place) => make(rows, ` of ${chosen.classes[place] ?? ""}`)),
  );
}

interface Shared {
  readonly compiler: Compiler;
  readonly tree: CallTree;
  readonly meaning: Meaning;
  readonly name: AggregateName;
  readonly measured: Measurement;
}

const values = new WeakMap<CommonVariable, AggregateValue>();

/** The mean, median … that a common variable is, with its rows and how it moves with each; undefined for what is none. */
export function aggregateOf(variable: CommonVariable): AggregateValue | undefined {
  return values.get(variable);
}

function variableOf(aggregated: AggregateValue, key: string, label: string, of: CompiledValue): CommonVariable {
  const { name, rows, value, sigma, external, mswd } = aggregated;
  const notes = [`over ${rows.length} ${rows.length === 1 ? "sample" : "samples"}`];
  if (external !== undefined && mswd !== undefined && external === external)
    notes.push(`σ is the internal one; with the scatter it is ${short(external / sigma)} times that, MSWD ${short(mswd)}`);
  const unit = name === "count" ? units["1"] : shownUnit(of.meaning);
  const variable: CommonVariable = {
    key,
    label,
    value,
    sigma,
    notes,
    ...(unit === undefined ? {} : { unit }),
    covarianceWith: (other) => {
      const b = values.get(other);
      return b === undefined ? 0 : aggregateCovariance(aggregated, b, (row) => perSampleCovariance(aggregated.measured, b.measured)[row] ?? 0);
    },
  };
  values.set(variable, aggregated);
  return variable;
}

function single({ compiler, meaning, name, measured }: Shared, variable: CommonVariable): CompiledValue {
  const { graph } = compiler;
  const node = graph.param(variable.key, variable.value);
  compiler.variables.set(node, { sort: "common", node, variable });
  const aggregated = values.get(variable);
  if (aggregated !== undefined) {
    const links = measured.commons.map((common) => {
      if (common.sort === "class")
        throw new CellError(
          "class-mismatch",
          "A mean over all samples of what already has a value for each class is not calculated. Take it class by class too.",
        );
      return { to: common.node, partial: graph.param(`${variable.key}>${common.variable.key}`, weighedPartial(aggregated, measured.directPartial(common))) };
    });
    compiler.links.set(node, links);
  }
  const state = graph.constant(Number.isFinite(variable.value) ? State.present : State.missing);
  return { kind: "value", node, state, meaning, over: null, aggregate: name };
}

function byClass({ compiler, tree, meaning, name, measured }: Shared, split: Split, variables: readonly CommonVariable[]): CompiledValue {
  const { graph } = compiler;
  const label = `${variables[0]?.key ?? name}|by ${split.column}`;
  const load = (what: string, of: (variable: CommonVariable) => number): number => graph.load(Float64Array.from(variables, of), `${label}${what}`, split);
  const node = load("", (variable) => variable.value);
  compiler.variables.set(node, { sort: "class", node, split, variables });
  compiler.links.set(
    node,
    measured.commons.map((common) => {
      if (common.sort === "class" && common.split !== split)
        throw new CellError(
          "class-mismatch",
          `What is taken class by class of ${split.column} here was taken class by class of ${common.split.column} before.`,
          { span: tree.span },
        );
      const partials = measured.directPartial(common);
      return { to: common.node, partial: load(`>${common.node}`, (variable) => weighedPartial(values.get(variable), partials)) };
    }),
  );
  const state = graph.load(
    Uint8Array.from(variables, (variable) => (Number.isFinite(variable.value) ? State.present : State.missing)),
    `${label}:state`,
    split,
  );
  return { kind: "value", node, state, meaning, over: { table: split.table, split }, aggregate: name };
}

/** How the aggregate moves with something common to its samples: Σ aᵢ ∂xᵢ. */
function weighedPartial(aggregated: AggregateValue | undefined, partials: Float64Array): number {
  let sum = 0;
  aggregated?.rows.forEach((row, i) => (sum += (aggregated.influence[i] as number) * (partials[row] as number)));
  return sum === sum ? sum : 0;
}

/** Counting a condition counts the samples where it holds. */
function countable(compiler: Compiler, condition: CompiledCondition): CompiledValue {
  return { kind: "value", node: condition.node, state: condition.state, meaning: plainNumber, over: condition.over };
}

function presentRows(measured: Measurement, setAside: Uint8Array, onlyTrue: boolean): Int32Array {
  const rows = new Int32Array(measured.length);
  let n = 0;
  for (let row = 0; row < measured.length; row++) {
    if (measured.state[row] === State.present && setAside[row] !== 1 && (!onlyTrue || measured.value[row] === 1)) rows[n++] = row;
  }
  return rows.slice(0, n);
}

function rowsByClass(rows: Int32Array, split: Split): Int32Array[] {
  const counts = new Int32Array(split.classes.length);
  for (const row of rows) {
    const place = split.classOf[row] as number;
    if (place >= 0) counts[place] = (counts[place] as number) + 1;
  }
  const sorted = split.classes.map((_, place) => new Int32Array(counts[place] as number));
  counts.fill(0);
  for (const row of rows) {
    const place = split.classOf[row] as number;
    const of = sorted[place];
    const next = counts[place] as number;
    if (of === undefined) continue;
    of[next] = row;
    counts[place] = next + 1;
  }
  return sorted;
}

function classes(compiler: Compiler, tree: Tree, table: Split["table"], frame: Frame, first: Tree): string | Split {
  const made = compiler.compile(tree, frame);
  if (made.kind === "text") return made.text;
  if (made.kind === "labels") {
    if (made.over.table !== table)
      throw new CellError(
        "table-mismatch",
        `${made.name} is a column of ${made.over.table.handle}, and ${sourceOf(first, frame)} has its values in ${table.handle}.`,
        { span: tree.span },
      );
    return splitOf(made, tree);
  }
  throw new CellError("not-a-class", `Here the name of a class stands, as in mean(Mg, "CV"), or a column of text, as in mean(Mg, Group).`, { span: tree.span });
}

function splitOf(labels: CompiledLabels, tree: Tree): Split {
  const { table } = labels.over;
  const column = table.columns.find((c) => c.kind === "text" && c.name === labels.name);
  if (column?.kind !== "text") throw new CellError("not-a-class", `${labels.name} is no column of text.`, { span: tree.span });
  return splitBy(table, column, tree.span);
}

function unknownClass(name: string, given: readonly string[], handle: string, tree: Tree): CellError {
  const known = [...new Set(given)].filter((label) => label !== "").slice(0, 10);
  const hint = known.length === 0 ? `${handle} has no column of classes.` : `${handle} has ${known.join(", ")}.`;
  return new CellError("unknown-class", `There is no class "${name}". ${hint}`, { span: tree.span });
}

function meaningOf(name: AggregateName, of: CompiledValue, tree: Tree): Meaning {
  if (name === "count") return plainNumber;
  const { remark: before, ...meaning } = of.meaning;
  const kind =
    name === "mean" || name === "wmean"
      ? name === "mean"
        ? "mean"
        : "weighted mean"
      : name === "sd"
        ? "standard deviation"
        : name === "se"
          ? "standard error"
          : name;
  const ratio = isDimensionless(of.meaning.dimension) && tree.kind === "binary" && tree.operator === "/";
  const remark = [`${kind}${ratio ? " of ratios" : ""}`, before].filter((part) => part !== undefined).join(", ");
  const spread = name === "sd" || name === "se";
  return { ...meaning, onScale: meaning.onScale && !spread, remark };
}

function short(x: number): string {
  return String(Number(x.toPrecision(3)));
}
