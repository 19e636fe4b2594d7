import { CellError, type Span } from "../errors";
import type { Basis } from "../page/schema";
import { State } from "../quantity/state";
import { units, type Unit } from "../quantity/unit";
import { massFactor, parseSpecies, resolveSpecies, speciesOfBody, underRenormalisation, type Body, type Resolved } from "../species";
import type { Table, TextColumn } from "../table/table";
import type { Compiled, CompiledValue } from "./compiled";
import type { Compiler } from "./compiler";
import type { Frame } from "./frame";
import { dimensionOf, type Counting } from "./dimension";
import { plainNumber, quantityIn, type Meaning } from "./meaning";
import type { CommonVariable, Named } from "./scope";
import { functionNames, otherSpellings } from "./functions";
import { nearestName } from "./nearest";
import type { NameTree } from "./tree";
import { writeName } from "./tokens";

/** What a name comes to where it stands. Throws `unknown-name`, `ambiguous-name`, or what the table refuses. */
export function resolveName(compiler: Compiler, tree: NameTree, frame: Frame): Compiled {
  const named = lookup(tree, frame);
  if (named === "ambiguous") throw ambiguous(tree, "It means two things on this page. Rename one of them.");
  if (tree.member === undefined && named !== undefined && frame.on === "table") refuseSecondMeaning(tree, named, frame);
  if (named !== undefined) return fromNamed(compiler, named, tree, frame);
  const own = frame.scope.table;
  if (tree.member !== undefined) {
    if (own === null || own.handle !== tree.name) throw unknownMember(tree);
    return onFrame(compiler, own, tree.member, tree.span, frame) ?? unknown(tree, tree.member, frame);
  }
  return onFrame(compiler, own, tree.name, tree.span, frame) ?? unknown(tree, tree.name, frame);
}

/** Errors of the page's look-up have no place yet: it is the name. */
function lookup(tree: NameTree, frame: Frame): Named | undefined {
  try {
    return frame.scope.lookup(tree.name, tree.member);
  } catch (error) {
    throw error instanceof CellError ? new CellError(error.code, error.message, { ...error.place, span: tree.span }) : error;
  }
}

function fromNamed(compiler: Compiler, named: Exclude<Named, "ambiguous">, tree: NameTree, frame: Frame): Compiled {
  switch (named.kind) {
    case "line":
      return compiler.line(named, frame, tree.span);
    case "common":
      return common(compiler, named.variable);
    case "column":
      return onFrame(compiler, named.table, named.name, tree.span, frame) ?? unknown(tree, named.name, frame);
  }
}

/** A line that has the name of a column, or of a species the table gives, is not taken for either. */
function refuseSecondMeaning(tree: NameTree, named: Exclude<Named, "ambiguous">, frame: Frame): void {
  const { table } = frame.scope;
  if (table === null || (named.kind === "column" && named.table === table)) return;
  const column = table.columns.find((c) => c.name === tree.name);
  const resolution = column === undefined ? resolveSpecies(table, tree.name) : undefined;
  if (column === undefined && resolution === undefined) return;
  const what = column === undefined ? `what the table ${table.handle} gives for ${tree.name}` : `a column of ${table.handle}`;
  throw ambiguous(
    tree,
    `It is ${what}, and also a ${named.kind === "line" ? `line of ${named.block}` : "result of another block"}. Rename one of them, or write ${table.handle}.${writeName(tree.name)} for the column.`,
  );
}

/** A column or species, taken from what the frame stands on. Undefined where there is none of the name. */
function onFrame(compiler: Compiler, table: Table | null, name: string, at: Span, frame: Frame): Compiled | undefined {
  if (frame.on === "table") return table === null ? undefined : fromTable(compiler, table, name, at);
  const column = table?.columns.find((c) => c.name === name);
  const species = column === undefined ? name : column.kind === "quantity" ? column.species : undefined;
  if (species === undefined) {
    throw new CellError(
      "not-a-species",
      `${name} is a column of the table and no species, so it has no value on ${"body" in frame.on ? frame.on.body.id : "a composition"}.`,
      { span: at },
    );
  }
  if ("body" in frame.on) return parseSpecies(species) === undefined ? undefined : fromBody(compiler, frame.on.body, species, at);
  const parsed = parseSpecies(species);
  if (parsed === undefined) return undefined;
  const element = frame.on.composition(parsed.element);
  const factor = massFactor(parsed.element, parsed.chemical.formula);
  return massFraction(compiler, compiler.graph.mul(compiler.graph.constant(factor ?? 1), element));
}

function massFraction(compiler: Compiler, node: number): CompiledValue {
  return {
    kind: "value",
    node,
    state: compiler.graph.constant(State.present),
    meaning: quantityIn(units["wt%"], "mass", dimensionOf(units["wt%"])),
    over: null,
  };
}

/** A column of numbers or of text, or a species by conversion. */
export function fromTable(compiler: Compiler, table: Table, name: string, at: Span): Compiled | undefined {
  const text = table.columns.find((column): column is TextColumn => column.kind === "text" && column.name === name);
  if (text !== undefined) return { kind: "labels", name, text: text.text, over: { table, split: null } };
  const resolution = resolveSpecies(table, name);
  if (resolution === undefined) return undefined;
  if (!resolution.ok)
    throw new CellError(resolution.code, resolution.text, { span: at, ...(resolution.column === undefined ? {} : { column: resolution.column }) });
  return fromResolution(compiler, table, resolution);
}

function fromResolution(compiler: Compiler, table: Table, resolution: Resolved): CompiledValue {
  const { graph, uses } = compiler;
  const used = usedCandidates(resolution);
  let node: number | undefined;
  // From the last to the first, so that the first candidate is asked first.
  for (const place of [...used].reverse()) {
    const candidate = resolution.candidates[place];
    if (candidate === undefined) continue;
    let sum: number | undefined;
    for (const term of candidate.terms) {
      const column = graph.load(term.column.value, `${table.handle}.${term.column.name}`);
      compiler.variables.set(column, { sort: "column", node: column, table, column: term.column });
      const part = graph.mul(graph.constant(term.factor), column);
      sum = sum === undefined ? part : graph.add(sum, part);
    }
    const value = sum ?? graph.constant(Number.NaN);
    node =
      node === undefined
        ? value
        : graph.select(graph.compare("eq", graph.load(resolution.choice, `${table.handle}.${resolution.name}:choice`), graph.constant(place)), value, node);
  }
  const sentences = used.flatMap((place) => resolution.candidates[place] ?? []).filter((c) => !c.asItStands || c.sentence !== resolution.name);
  if (sentences.length > 0)
    uses.conversions.set(
      resolution.name,
      sentences.map((c) => c.sentence),
    );
  for (const warning of resolution.warnings) uses.warnings.set(`${warning.code}|${warning.text}`, warning.text);
  if (table.substitution !== undefined) {
    const text = `Values below detection in ${table.handle} count as ${table.substitution.fraction} of their limit: ${table.substitution.reason}`;
    uses.warnings.set(`substitution|${table.handle}`, text);
  }
  if (table.renormalised !== undefined) {
    uses.warnings.set(`renormalised|${table.handle}`, table.renormalised);
    for (const { column } of used.flatMap((place) => resolution.candidates[place]?.terms ?? []))
      if (underRenormalisation(column) === "as measured")
        uses.warnings.set(
          `as-measured|${table.handle}.${column.name}`,
          `${column.name} of ${table.handle} stays as measured, per mass of the rock with its volatiles: a ratio of it to a renormalised value mixes the two. Take both from a table that is not renormalised.`,
        );
  }
  const meaning = columnMeaning(resolution.unit, resolution.species, resolution.basis);
  return {
    kind: "value",
    node: node ?? graph.constant(Number.NaN),
    state: graph.load(resolution.state, `${table.handle}.${resolution.name}:state`),
    meaning,
    over: { table, split: null },
  };
}

const candidatesUsed = new WeakMap<Resolved, readonly number[]>();

/** The candidates that some row chooses, in order. */
function usedCandidates(resolution: Resolved): readonly number[] {
  const known = candidatesUsed.get(resolution);
  if (known !== undefined) return known;
  const seen = new Uint8Array(resolution.candidates.length);
  for (let row = 0; row < resolution.choice.length; row++) seen[resolution.choice[row] ?? 0] = 1;
  const used = [...seen.keys()].filter((place) => seen[place] === 1);
  const chosen = used.length === 0 ? [0] : used;
  candidatesUsed.set(resolution, chosen);
  return chosen;
}

/** What a column's numbers are, by its unit, its species and its stated basis. */
export function columnMeaning(unit: Unit, species: string | undefined, basis: Basis | undefined): Meaning {
  return quantityIn(unit, columnCounting(unit, species, basis), dimensionOf(unit));
}

function columnCounting(unit: Unit, species: string | undefined, basis: Basis | undefined): Counting {
  switch (unit.dimension) {
    case "mass fraction":
      return "mass";
    case "amount fraction":
    case "amount per mass": {
      const element = species === undefined ? undefined : parseSpecies(species);
      return unit.symbol === "at%" || element?.chemical.atoms.size === 1 ? "atoms" : "formula units";
    }
    case "atoms per million Si":
      return "atoms";
    case "dimensionless":
      return basis ?? "none";
    case "dex":
      return basis ?? (species === undefined ? "none" : "atoms");
    default:
      return "number";
  }
}

/** A species of a body, as a common variable: the listed value it is made from, so that MgO and Mg of one body are one error. */
export function fromBody(compiler: Compiler, body: Body, name: string, at: Span): CompiledValue {
  const found = speciesOfBody(body, name);
  if (found === undefined) {
    throw new CellError(
      "not-in-body",
      `${body.id} (${body.what}) gives no ${name}, so this has no value on it. Use another compilation, or leave ${name} out.`,
      { span: at },
    );
  }
  const listed = body.kind === "dex" ? (speciesOfBody(body, found.of.species)?.value ?? found.value) : found.of.canonical;
  const sigma = body.kind === "dex" ? (speciesOfBody(body, found.of.species)?.sigma ?? null) : found.of.canonicalSigma;
  const exact = found.value === 0 || body.kind === "phase";
  if (exact) return massFraction(compiler, compiler.graph.constant(found.value));
  const variable = common(compiler, {
    key: `body:${body.id}:${found.of.species}`,
    label: `${found.of.species} of ${body.id}`,
    value: listed,
    sigma: sigma ?? Number.NaN,
    unit: units["wt%"],
    basis: "mass",
    notes: [found.of.source, found.of.checked, found.of.note].filter((note) => note !== ""),
  });
  if (found.sentence !== "") compiler.uses.conversions.set(`${name} of ${body.id}`, [found.sentence]);
  return massFraction(compiler, compiler.graph.mul(compiler.graph.constant(found.value / listed), variable.node));
}

/** A number that is the same for every sample. */
export function common(compiler: Compiler, variable: CommonVariable): CompiledValue {
  const node = commonLeaf(compiler, variable);
  const unit = variable.unit ?? units["1"];
  const counting = variable.basis ?? (unit.dimension === "dimensionless" ? "none" : columnCounting(unit, undefined, undefined));
  const meaning = variable.unit === undefined && variable.basis === undefined ? plainNumber : quantityIn(unit, counting, dimensionOf(unit));
  const state = compiler.graph.constant(Number.isFinite(variable.value) ? State.present : State.missing);
  return { kind: "value", node, state, meaning, over: null };
}

/** The leaf of a common variable. What it leans on comes first: derivatives are followed from later nodes to earlier ones. */
function commonLeaf(compiler: Compiler, variable: CommonVariable): number {
  const { graph, links, variables } = compiler;
  const leans = (variable.leansOn ?? []).map(({ variable: on, partial }) => ({ to: commonLeaf(compiler, on), key: on.key, partial }));
  const node = graph.param(variable.key, variable.value);
  variables.set(node, { sort: "common", node, variable });
  if (leans.length > 0)
    links.set(
      node,
      leans.map(({ to, key, partial }) => ({ to, partial: graph.param(`${variable.key}>${key}`, partial) })),
    );
  return node;
}

function ambiguous(tree: NameTree, why: string): CellError {
  return new CellError("ambiguous-name", `${tree.member === undefined ? tree.name : `${tree.name}.${tree.member}`} is not clear. ${why}`, { span: tree.span });
}

function unknownMember(tree: NameTree): CellError {
  return new CellError(
    "unknown-name",
    `There is no ${tree.name}.${tree.member ?? ""} on this page. Before the point stands the handle of a block, after it the name of a line, column or result of the block.`,
    { span: tree.span },
  );
}

function unknown(tree: NameTree, name: string, frame: Frame): never {
  const { table } = frame.scope;
  const body = frame.scope.bodies(name);
  let hint: string;
  if (functionNames.has(name)) hint = `${name} is a function: write ${name}( ).`;
  else if (otherSpellings.has(name)) hint = `Write ${otherSpellings.get(name) ?? ""}.`;
  else if (body !== undefined) hint = `${name} is a body: write at(expression, ${name}) or norm(expression, ${name}).`;
  else if (table === null) hint = "There is no table here: name a body with at( ), or set the data block.";
  else {
    const names = table.columns.map((column) => column.name);
    const near = names.find((other) => other.toLowerCase() === name.toLowerCase()) ?? nearestName(name, names);
    hint = near === undefined ? `The table ${table.handle} has ${listed(names)}.` : `Did you mean ${writeName(near)}?`;
  }
  throw new CellError("unknown-name", `There is no column, species or line ${name} here. ${hint}`, { span: tree.span });
}

function listed(names: readonly string[]): string {
  const shown = names.slice(0, 8).join(", ");
  return names.length === 0 ? "no columns" : names.length > 8 ? `${shown} and ${names.length - 8} more` : shown;
}
