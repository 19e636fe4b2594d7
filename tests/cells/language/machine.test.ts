import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { Compiler } from "../../../cells/language/compiler";
import { partialsOf } from "../../../cells/language/derivatives";
import { fusedSteps, stepsOf } from "../../../cells/language/fuse";
import { Graph } from "../../../cells/language/graph";
import { CHUNK, interpret } from "../../../cells/language/interpreter";
import { parse } from "../../../cells/language/parse";
import { lower, type Program } from "../../../cells/language/program";
import { uncertaintyNodes } from "../../../cells/language/uncertainty";
import { runMachine } from "../../../cells/language/wasm/machine";
import { seed } from "../../support/seed";
import { scopeOf, tableOf, type QuantityGiven } from "./scopes";

const ROWS = 2500;
const odd = [0, -0, 1, -1, Infinity, -Infinity, 1e-310, 1e308, null, "<"] as const;

/** Columns with every kind of trouble in them: zeros of both signs, infinities, missing σ, values below detection. */
function column(multiplier: number): QuantityGiven {
  const value = Array.from({ length: ROWS }, (_, i) => (i % 13 === 0 ? (odd[(i * multiplier) % odd.length] ?? null) : ((i * multiplier) % 97) / 23 - 1));
  return {
    unit: "1",
    basis: "mass",
    value,
    sigma: value.map((_, i) => (i % 7 === multiplier % 7 ? null : 0.01 * (1 + (i % 5)))),
    assumed: value.map((_, i) => (i % 3 === 0 ? 1 : 0)),
  };
}

const table = tableOf({ a: column(3), b: column(5), c: column(11), Group: Array.from({ length: ROWS }, (_, i) => (i % 11 === 0 ? "" : `g${i % 4}`)) });

function programOf(text: string): Program {
  const compiler = new Compiler();
  const { graph } = compiler;
  const value = compiler.value(parse(text), { scope: scopeOf(table), text, on: "table" });
  graph.raiseLimit(60_000);
  const partials = partialsOf(graph, value.node, new Set(compiler.variables.keys()), compiler.links);
  const nodes = uncertaintyNodes(graph, partials, compiler.variables);
  const asked = [value.node, nodes.sigma, nodes.sigmaPerSample, ...partials.values(), graph.guard(value.state, value.node), nodes.lowerBound, nodes.assumed];
  return lower(graph, asked, (place) => graph.loads[place]?.column ?? new Float64Array(ROWS));
}

const expressions = fc.letrec<{ any: string }>((tie) => ({
  any: fc.oneof(
    { maxDepth: 5 },
    fc.constantFrom("a", "b", "c", "2", "0.5", "0"),
    fc.tuple(tie("any"), fc.constantFrom("+", "-", "*", "/"), tie("any")).map(([x, o, y]) => `(${x} ${o} ${y})`),
    fc.tuple(fc.constantFrom("ln", "log10", "exp", "sqrt", "abs", "-"), tie("any")).map(([f, x]) => `${f}(${x})`),
    fc.tuple(tie("any"), fc.constantFrom("2", "-1", "0.5", "1.3", "-2.7")).map(([x, e]) => `(${x})^(${e})`),
    fc.tuple(fc.constantFrom("min", "max"), tie("any"), tie("any")).map(([f, x, y]) => `${f}(${x}, ${y})`),
    fc
      .tuple(tie("any"), fc.constantFrom("<", "<=", "==", "!=", ">", ">="), tie("any"), tie("any"), tie("any"))
      .map(([x, o, y, p, q]) => `(${x} ${o} ${y} ? ${p} : ${q})`),
    fc
      .tuple(fc.constantFrom("is_missing", "is_below"), tie("any"), tie("any"))
      .map(([f, x, y]) => `(${f}(${x}) or Group == "g1" and not (${y} > 0) ? ${x} : ${y})`),
  ),
})).any;

describe("machine code", () => {
  it("gives the bits of the interpreter", () => {
    let ran = 0;
    fc.assert(
      fc.property(expressions, (text) => {
        const program = programOf(text);
        const bytes = program.results.length - 3;
        const columns = (): (Float64Array | Uint8Array)[] => program.results.map((_, k) => (k < bytes ? new Float64Array(ROWS) : new Uint8Array(ROWS)));
        const [expected, given] = [columns(), columns()];
        interpret(program, ROWS, expected);
        if (!runMachine(program, ROWS, given)) return;
        ran++;
        given.forEach((column, k) => {
          for (let row = 0; row < ROWS; row++) {
            if (!Object.is(column[row], expected[k]?.[row]))
              throw new Error(`${text}: result ${k} of row ${row} is ${column[row]}, expected ${expected[k]?.[row]}`);
          }
        });
      }),
      { seed, numRuns: 250 },
    );
    expect(ran).toBeGreaterThan(200);
  });

  it("writes the rows asked for and no others", () => {
    const program = programOf("a / b");
    const short = program.results.map((_, k) => (k < program.results.length - 3 ? new Float64Array(ROWS).fill(7) : new Uint8Array(ROWS).fill(7)));
    expect(runMachine(program, 1027, short)).toBe(true);
    expect(short.every((column) => column[1027] === 7 && column[ROWS - 1] === 7)).toBe(true);
    expect(short[0]?.[1026]).not.toBe(7);
  });

  it("refuses a program too large for it, which is then interpreted", () => {
    const program = programOf("a / b");
    expect(runMachine(program, ROWS, new Array<Float64Array>(2000).fill(new Float64Array(ROWS)))).toBe(false);
  });
});

describe("the interpreter", () => {
  it("gives the same bits one operation a step, for few rows, as with operations fused, for many", () => {
    const few = CHUNK - 1;
    fc.assert(
      fc.property(expressions, (text) => {
        const program = programOf(text);
        const columns = (): Float64Array[] => program.results.map(() => new Float64Array(ROWS));
        const [expected, given] = [columns(), columns()];
        interpret(program, few, expected);
        interpret(program, ROWS, given);
        given.forEach((column, k) => {
          for (let row = 0; row < few; row++) {
            if (!Object.is(column[row], expected[k]?.[row]))
              throw new Error(`${text}: result ${k} of row ${row} is ${column[row]}, expected ${expected[k]?.[row]}`);
          }
        });
      }),
      { seed, numRuns: 250 },
    );
  });

  it("does two or three operations in one step where it can", () => {
    const program = programOf("a / b");
    expect(fusedSteps(program).length).toBeLessThan(program.instructions.length);
    expect(stepsOf(program)).toHaveLength(program.instructions.length);
  });

  it("may write a result over a column that it reads", () => {
    const graph = new Graph(100);
    const column = Float64Array.from({ length: ROWS }, (_, i) => i / 7);
    const before = column.slice();
    const x = graph.load(column, "x");
    const [double, square] = [graph.add(x, x), graph.mul(x, x)];
    const program = lower(graph, [double, square], () => column);
    const squares = new Float64Array(ROWS);
    interpret(program, ROWS, [column, squares]);
    before.forEach((value, row) => {
      expect(column[row]).toBe(value + value);
      expect(squares[row]).toBe(value * value);
    });
  });
});
