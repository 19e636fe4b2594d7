import { CellError } from "../errors";
import { State } from "../quantity/state";
import { parseUnit, units } from "../quantity/unit";
import type { Body } from "../species";
import { aggregate } from "./aggregate";
import type { Compiler } from "./compiler";
import { NEAR_DOMAIN_EDGE } from "./edges";
import { sourceOf, type Frame } from "./frame";
import type { Compiled, CompiledValue } from "./compiled";
import { dimensionOf, dimensionless, isDimensionless, sameDimension, type Counting } from "./dimension";
import { aggregateNames, functionNamed, functionNames, otherSpellings, unitSuffixes, type AggregateName } from "./functions";
import { inWords, plainNumber, powerMeaning, quantityIn, requireAlike, type Meaning } from "./meaning";
import { joinOver } from "./split";
import { countSpecies } from "./amounts";
import { run } from "./execute";
import { nearestName } from "./nearest";
import { lower } from "./program";
import type { CallTree, Tree } from "./tree";

/** A call of a function. Throws `unknown-function`, `wrong-arguments`, or what the function itself refuses. */
export function callFunction(compiler: Compiler, tree: CallTree, frame: Frame): Compiled {
  const info = functionNamed(tree.name);
  if (info === undefined) throw unknownFunction(tree);
  const n = tree.args.length;
  if (n < info.least || n > info.most)
    throw new CellError("wrong-arguments", `${info.form} takes ${counted(info.least, info.most)}, and ${n === 1 ? "1 is" : `${n} are`} here.`, {
      span: tree.span,
    });
  if (isAggregate(tree.name)) return aggregate(compiler, tree, tree.name, frame);
  const suffix = unitSuffixes.get(tree.name);
  if (suffix !== undefined) return makeQuantity(compiler, tree, frame);
  if (tree.name.startsWith("as_")) return showIn(compiler, tree, frame);
  const first = argument(tree, 0);
  switch (tree.name) {
    case "log10":
    case "ln":
    case "exp":
      return transcendental(compiler, tree, tree.name, frame);
    case "sqrt":
      return squareRoot(compiler, compiler.value(first, frame), sourceOf(first, frame));
    case "abs": {
      const of = compiler.value(first, frame);
      return { kind: "value", node: compiler.graph.apply("abs", of.node), state: of.state, meaning: of.meaning, over: of.over };
    }
    case "min":
    case "max":
      return extreme(compiler, tree, tree.name, frame);
    case "atoms":
    case "mol":
    case "oxide":
      return countSpecies(compiler, tree, tree.name, frame);
    case "at":
      return onBody(compiler, first, bodyOf(compiler, argument(tree, 1), frame), tree, frame);
    case "norm":
      return normalised(compiler, tree, frame);
    case "from_dex":
      return fromDex(compiler, first, frame);
    case "to_dex":
      return toDex(compiler, first, frame);
    case "is_missing":
    case "is_below": {
      const of = compiler.value(first, frame);
      const state = tree.name === "is_missing" ? State.missing : State.belowDetection;
      const { graph } = compiler;
      return { kind: "condition", node: graph.compare("eq", of.state, graph.constant(state)), state: graph.constant(State.present), over: of.over };
    }
    default:
      throw unknownFunction(tree);
  }
}

export function argument(tree: CallTree, place: number): Tree {
  const found = tree.args[place];
  if (found === undefined) throw new CellError("wrong-arguments", `${tree.name} lacks an argument.`, { span: tree.span });
  return found;
}

function isAggregate(name: string): name is AggregateName {
  return (aggregateNames as readonly string[]).includes(name);
}

function counted(least: number, most: number): string {
  if (least === most) return least === 1 ? "1 argument" : `${least} arguments`;
  return `${least} to ${most} arguments`;
}

function unknownFunction(tree: CallTree): CellError {
  const instead = otherSpellings.get(tree.name.toLowerCase());
  const near = functionNamed(tree.name.toLowerCase()) ?? functionNamed(unitFunction(tree.name) ?? nearestName(tree.name, functionNames) ?? "");
  const hint = instead !== undefined ? ` Write ${instead}.` : near !== undefined ? ` Did you mean ${near.form}?` : ` To multiply, write *.`;
  return new CellError("unknown-function", `There is no function ${tree.name}.${hint}`, { span: tree.at });
}

/** The function that a unit's other spellings mean: `percent(20)` is wtpct(20), `as_pct(x)` as_wtpct(x). */
function unitFunction(name: string): string | undefined {
  const shown = name.startsWith("as_");
  const unit = parseUnit(shown ? name.slice(3) : name);
  const suffix = [...unitSuffixes].find(([, of]) => of === unit)?.[0];
  return suffix === undefined ? undefined : `${shown ? "as_" : ""}${suffix}`;
}

/** `wtpct(20)`: a plain number becomes 20 wt%. */
function makeQuantity(compiler: Compiler, tree: CallTree, frame: Frame): CompiledValue {
  const unit = unitSuffixes.get(tree.name) ?? units["1"];
  const of = compiler.value(argument(tree, 0), frame);
  const source = sourceOf(argument(tree, 0), frame);
  if (!isDimensionless(of.meaning.dimension))
    throw new CellError("unit-mismatch", `${source} is ${inWords(of.meaning)} already. To show it in ${unit.symbol}, write as_${tree.name}(${source}).`, {
      span: argument(tree, 0).span,
    });
  if (of.meaning.counting !== "number")
    throw new CellError("unit-mismatch", `${tree.name}( ) takes a plain number, and ${source} is ${inWords(of.meaning)}.`, { span: argument(tree, 0).span });
  const { graph } = compiler;
  const node = graph.add(graph.div(of.node, graph.constant(unit.per)), graph.constant(unit.offset));
  return { kind: "value", node, state: of.state, meaning: quantityIn(unit, countingOfUnit(unit.symbol), dimensionOf(unit)), over: of.over };
}

function countingOfUnit(symbol: string): Counting {
  const unit = [...unitSuffixes.values()].find((u) => u.symbol === symbol);
  return unit?.dimension === "mass fraction" ? "mass" : symbol === "at%" ? "atoms" : "number";
}

/** `as_ugg(x)`: the same quantity, shown in another unit. */
function showIn(compiler: Compiler, tree: CallTree, frame: Frame): CompiledValue {
  const unit = unitSuffixes.get(tree.name.slice(3)) ?? units["1"];
  const of = compiler.value(argument(tree, 0), frame);
  if (!sameDimension(of.meaning.dimension, dimensionOf(unit))) {
    throw new CellError("unit-mismatch", `${sourceOf(argument(tree, 0), frame)} is ${inWords(of.meaning)} and cannot be shown in ${unit.symbol}.`, {
      span: argument(tree, 0).span,
    });
  }
  return { ...of, meaning: { ...of.meaning, shown: unit } };
}

function requireNumber(of: CompiledValue, tree: CallTree, frame: Frame): void {
  if (isDimensionless(of.meaning.dimension)) return;
  const source = sourceOf(argument(tree, 0), frame);
  throw new CellError(
    "unit-mismatch",
    `${tree.name}( ) takes a number without unit, and ${source} is ${inWords(of.meaning)}. Divide it by something of its kind first, as in ${tree.name}(Mg / Si).`,
    { span: argument(tree, 0).span },
  );
}

function transcendental(compiler: Compiler, tree: CallTree, name: "log10" | "ln" | "exp", frame: Frame): CompiledValue {
  const of = compiler.value(argument(tree, 0), frame);
  requireNumber(of, tree, frame);
  const node = compiler.graph.apply(name === "ln" ? "log" : name, of.node);
  if (name !== "exp") compiler.edges.set(of.node, { source: sourceOf(argument(tree, 0), frame), tolerated: NEAR_DOMAIN_EDGE });
  const remark = name === "exp" ? undefined : `logarithm${of.meaning.remark === undefined ? "" : `, ${of.meaning.remark}`}`;
  const meaning: Meaning = { dimension: dimensionless, counting: of.meaning.counting, onScale: false, ...(remark === undefined ? {} : { remark }) };
  return { kind: "value", node, state: compiler.graph.guard(of.state, node), meaning, over: of.over };
}

function squareRoot(compiler: Compiler, of: CompiledValue, source: string): CompiledValue {
  compiler.edges.set(of.node, { source, tolerated: NEAR_DOMAIN_EDGE });
  const node = compiler.graph.apply("sqrt", of.node);
  return {
    kind: "value",
    node,
    state: compiler.graph.guard(of.state, node),
    meaning: powerMeaning(of.meaning, 0.5),
    over: of.over,
  };
}

function extreme(compiler: Compiler, tree: CallTree, name: "min" | "max", frame: Frame): CompiledValue {
  const { graph } = compiler;
  let best = compiler.value(argument(tree, 0), frame);
  for (const arg of tree.args.slice(1)) {
    const next = compiler.value(arg, frame);
    const before = best;
    requireAlike(before.meaning, next.meaning, () => compiler.sides(name, tree.at, argument(tree, 0), arg, frame));
    const first = name === "min" ? graph.compare("le", before.node, next.node) : graph.compare("le", next.node, before.node);
    const meaning = before.meaning.counting === "number" ? next.meaning : before.meaning;
    best = {
      kind: "value",
      node: graph.select(first, before.node, next.node),
      state: graph.max(before.state, next.state),
      meaning,
      over: joinOver(before.over, next.over, tree.at),
    };
  }
  return best;
}

/** The body that the last argument of `norm` and `at` names: an alias of the page, or an id. */
function bodyOf(compiler: Compiler, tree: Tree, frame: Frame): { readonly body: Body; readonly written: string } {
  const written = tree.kind === "name" && tree.member === undefined ? tree.name : tree.kind === "text" ? tree.text : undefined;
  if (written === undefined)
    throw new CellError("not-a-body", `Here the name of a body stands, as in norm(Mg / Si, CI), and ${sourceOf(tree, frame)} is none.`, { span: tree.span });
  const body = frame.scope.bodies(written);
  if (body === undefined)
    throw new CellError(
      "unknown-body",
      `There is no body ${written}. Give the page an alias of this name, or write the id of a compilation, such as CI_PLJ14.`,
      { span: tree.span },
    );
  compiler.uses.bodies.set(written, body.id);
  return { body, written };
}

function onBody(compiler: Compiler, tree: Tree, { body }: { readonly body: Body }, call: CallTree, frame: Frame): CompiledValue {
  const made = compiler.value(tree, { ...frame, on: { body } });
  if (made.over !== null)
    throw new CellError("not-on-body", `${sourceOf(tree, frame)} has a value for each sample, so it has none on a body.`, { span: tree.span });
  if (body.kind === "dex" && !isDimensionless(made.meaning.dimension)) {
    throw new CellError("dex-absolute", `${body.id} gives abundances relative to hydrogen, so only ratios of elements can be had of it, such as Mg / Si.`, {
      span: call.span,
    });
  }
  requireFinite(compiler, made, body, tree, frame);
  return made;
}

function requireFinite(compiler: Compiler, made: CompiledValue, body: Body, tree: Tree, frame: Frame): void {
  const state = new Uint8Array(1);
  run(
    lower(compiler.graph, [compiler.graph.guard(made.state, made.node)], () => state),
    1,
    [state],
  );
  if (state[0] !== State.present)
    throw new CellError("not-on-body", `${sourceOf(tree, frame)} has no value on ${body.id}: it divides by 0 or leaves the domain of a function there.`, {
      span: tree.span,
    });
}

function normalised(compiler: Compiler, tree: CallTree, frame: Frame): CompiledValue {
  const first = argument(tree, 0);
  const named = bodyOf(compiler, argument(tree, 1), frame);
  const above = compiler.value(first, frame);
  const below = onBody(compiler, first, named, tree, frame);
  if (!sameDimension(above.meaning.dimension, below.meaning.dimension)) {
    throw new CellError(
      "unit-mismatch",
      `${sourceOf(first, frame)} is ${inWords(above.meaning)} here and ${inWords(below.meaning)} on ${named.body.id}; a normalised ratio needs one kind of quantity.`,
      { span: first.span },
    );
  }
  if (isZero(compiler, below))
    throw new CellError("not-on-body", `${sourceOf(first, frame)} is 0 on ${named.body.id}, so nothing can be divided by it.`, { span: first.span });
  const node = compiler.graph.div(above.node, below.node);
  const by = named.written === named.body.id ? named.body.id : `${named.written} (${named.body.id})`;
  const meaning: Meaning = { dimension: dimensionless, counting: "none", onScale: false, remark: `normalised to ${by}` };
  return { kind: "value", node, state: compiler.graph.guard(above.state, node), meaning, over: above.over };
}

function isZero(compiler: Compiler, value: CompiledValue): boolean {
  const number = new Float64Array(1);
  run(
    lower(compiler.graph, [value.node], () => number),
    1,
    [number],
  );
  return number[0] === 0;
}

function fromDex(compiler: Compiler, tree: Tree, frame: Frame): CompiledValue {
  const { graph } = compiler;
  const of = compiler.value(tree, frame);
  const isDex = sameDimension(of.meaning.dimension, dimensionOf(units.dex));
  if (!isDex && !(isDimensionless(of.meaning.dimension) && of.meaning.counting === "number")) {
    throw new CellError("unit-mismatch", `from_dex( ) takes a logarithm in dex, and ${sourceOf(tree, frame)} is ${inWords(of.meaning)}.`, { span: tree.span });
  }
  const node = graph.pow(graph.constant(10), of.node);
  return { kind: "value", node, state: graph.guard(of.state, node), meaning: { ...plainNumber, counting: of.meaning.counting }, over: of.over };
}

function toDex(compiler: Compiler, tree: Tree, frame: Frame): CompiledValue {
  const { graph } = compiler;
  const of = compiler.value(tree, frame);
  if (!isDimensionless(of.meaning.dimension))
    throw new CellError("unit-mismatch", `to_dex( ) takes a ratio, and ${sourceOf(tree, frame)} is ${inWords(of.meaning)}.`, { span: tree.span });
  const node = graph.apply("log10", of.node);
  return {
    kind: "value",
    node,
    state: graph.guard(of.state, node),
    meaning: quantityIn(units.dex, of.meaning.counting, dimensionOf(units.dex)),
    over: of.over,
  };
}
