import { evaluateExpression, type Scope } from "@/cells/language";
import { Compiler } from "@/cells/language/compiler";
import { partialsOf } from "@/cells/language/derivatives";
import { interpret } from "@/cells/language/interpreter";
import { parse } from "@/cells/language/parse";
import { lower, type Program } from "@/cells/language/program";
import { uncertaintyNodes } from "@/cells/language/uncertainty";
import { runMachine } from "@/cells/language/wasm/machine";
import { createRandom } from "@/cells/numeric";
import { units } from "@/cells/quantity/unit";
import { bodyLookup } from "@/cells/species";
import type { QuantityColumn, Table } from "@/cells/table";

const elements = ["Mg", "Al", "Si"] as const;
/** Typical mass fractions of a chondrite, so that the numbers are of a usual size; invented, not measured. */
const typical = { Mg: 0.1, Al: 0.01, Si: 0.11 } as const;

/** A table of random compositions: values spread by 10 %, σ of 1 to 3 %. */
export function compositions(rows: number): Table {
  const random = createRandom(20_261_201);
  const numbers = (make: () => number): Float64Array => Float64Array.from({ length: rows }, make);
  const columns = elements.map((name): QuantityColumn => {
    const value = numbers(() => typical[name] * (1 + 0.1 * (random.uniform() - 0.5)));
    return {
      kind: "quantity",
      name,
      species: name,
      unit: units["wt%"],
      value,
      sigma: value.map((v) => v * (0.01 + 0.02 * random.uniform())),
      state: new Uint8Array(rows),
      limit: new Float64Array(rows).fill(Number.NaN),
      assumed: new Uint8Array(rows),
      raw: [],
      rawSigma: [],
      amended: new Uint8Array(rows),
    };
  });
  return {
    handle: "bench",
    rows,
    rowIds: Array.from({ length: rows }, (_, i) => i + 1),
    samples: new Array<string>(rows).fill(""),
    classes: new Array<string>(rows).fill(""),
    origins: [],
    setAside: new Uint8Array(rows),
    columns,
    correlations: [],
  };
}

/** The bytes numpy reads: values, then σ, column after column. */
export function bytesOf(table: Table): Uint8Array {
  const columns = table.columns.filter((column) => column.kind === "quantity");
  const all = new Float64Array(6 * table.rows);
  columns.forEach((column, i) => {
    all.set(column.value, i * table.rows);
    all.set(column.sigma, (3 + i) * table.rows);
  });
  return new Uint8Array(all.buffer);
}

/** The same numbers in the same memory, as columns of another table. */
function unseen(table: Table): Table {
  const columns = table.columns.map((column) =>
    column.kind === "quantity" ? { ...column, value: new Float64Array(column.value.buffer), sigma: new Float64Array(column.sigma.buffer) } : column,
  );
  return { ...table, columns };
}

function scopeOf(table: Table): Scope {
  return { table, bodies: bodyLookup({}), lookup: () => undefined };
}

/** Value and σ of two expressions and their covariance as one program, for either back end. */
function programOf(table: Table, texts: readonly [string, string]): Program {
  const compiler = new Compiler();
  const { graph, variables } = compiler;
  const made = texts.map((text) => {
    const { node } = compiler.value(parse(text), { scope: scopeOf(table), text, on: "table" });
    const partials = partialsOf(graph, node, new Set(variables.keys()), compiler.links);
    return { node, partials, sigma: uncertaintyNodes(graph, partials, variables).sigma };
  });
  const [first, second] = made;
  if (first === undefined || second === undefined) throw new Error("expected two expressions");
  let covariance = graph.constant(0);
  for (const [leaf, partial] of first.partials) {
    const other = second.partials.get(leaf);
    const variable = variables.get(leaf);
    if (other === undefined || variable?.sort !== "column") continue;
    const sigma = graph.load(variable.column.sigma, "σ");
    covariance = graph.add(covariance, graph.mul(graph.mul(partial, sigma), graph.mul(other, sigma)));
  }
  const asked = [first.node, first.sigma, second.node, second.sigma, covariance];
  return lower(graph, asked, (place) => graph.loads[place]?.column ?? new Float64Array(table.rows));
}

/**
 * How the engine calculates two ratios: by either back end, into memory that is kept between calls, as its contract has it, or into
 * results made anew by each call, as numpy does; and from the text of both formulas to results of their own, as a page asks for them.
 */
export const ways = ["machine", "machine, new results", "interpreter", "interpreter, new results", "whole page"] as const;
export type Way = (typeof ways)[number];

/** Value and σ of the one ratio, value and σ of the other, covariance, each way. */
export type Ways = Readonly<Record<Way, () => readonly Float64Array[]>>;

export function waysOf(table: Table, texts: readonly [string, string]): Ways {
  const program = programOf(table, texts);
  const make = (): Float64Array[] => program.results.map(() => new Float64Array(table.rows));
  const kept = make();
  const interpreted = (to: Float64Array[]): Float64Array[] => {
    interpret(program, table.rows, to);
    return to;
  };
  const run = (to: Float64Array[]): Float64Array[] => {
    if (!runMachine(program, table.rows, to)) throw new Error("WebAssembly with vectors is not to be had here");
    return to;
  };
  return {
    machine: () => run(kept),
    "machine, new results": () => run(make()),
    interpreter: () => interpreted(kept),
    "interpreter, new results": () => interpreted(make()),
    "whole page": () => {
      // Columns that the engine has not seen: what it remembers of a calculation done before is not to be measured.
      const scope = scopeOf(unseen(table));
      const [x, y] = texts.map((text) => evaluateExpression(scope, text, { block: "r" }));
      if (x === undefined || y === undefined) throw new Error("expected two expressions");
      return [x.value, x.sigma, y.value, y.sigma, x.covariance(y)];
    },
  };
}

/** One number of what a way gives, to end in the sink. */
export function lastOf(results: readonly Float64Array[]): number {
  return results.reduce((sum, column) => sum + (column[column.length - 1] ?? Number.NaN), 0);
}
