import type { Problem } from "../errors";
import type { Evaluated } from "../language";
import type { FormulaResult, LineResult } from "../page/results";
import { State } from "../quantity/state";
import { DrawnExpression } from "./drawnExpression";
import { quantilesOf } from "./quantiles";
import { comparison } from "./sentences";
import { Simulation } from "./simulation";
import { MOST_UNASKED, USUAL_WISH, type SimulatedLine, type SimulationWish } from "./simulated";

/** A line that was calculated, and its place among the result's lines. */
export interface CalculatedLine {
  readonly place: number;
  readonly evaluated: Evaluated;
}

/**
 * Simulates the lines of a formula block: every value where the block wishes it, else those for which first order cannot be
 * trusted, up to {@link MOST_UNASKED} a line.
 */
export function simulateLines(base: FormulaResult, calculated: readonly CalculatedLine[], wish: SimulationWish | undefined): Simulation | undefined {
  const used = wish ?? USUAL_WISH;
  const isAsked = wish !== undefined;
  const tasks = calculated.flatMap(({ place, evaluated }) => {
    const entries = entriesOf(evaluated, isAsked);
    return entries.length === 0 ? [] : [{ place, evaluated, entries }];
  });
  if (tasks.length === 0) return undefined;
  const total = used.draws * tasks.reduce((sum, { entries }) => sum + entries.length, 0);
  return new Simulation(total, run());

  function* run(): Generator<number, FormulaResult> {
    const lines: LineResult[] = [...base.lines];
    const said = new Map<Problem, Problem>();
    for (const { place, evaluated, entries } of tasks) {
      const line = base.lines[place];
      if (line === undefined) continue;
      const simulated = empty(evaluated.rows, used, isAsked);
      const drawn = new DrawnExpression(evaluated, used);
      for (const entry of entries) {
        put(simulated, entry, drawn.entry(entry));
        yield used.draws;
      }
      lines[place] = { ...line, simulated };
      const warning = evaluated.problems.find(({ code }) => code === "first-order");
      if (warning !== undefined) said.set(warning, { ...warning, text: `${warning.text} ${comparison(lines[place], evaluated, simulated)}` });
    }
    return { ...base, lines, problems: base.problems.map((problem) => said.get(problem) ?? problem) };
  }
}

/** Entries to simulate: those that have a value with a σ, and, where nobody asked, the first that lie too near an edge. */
function entriesOf({ state, sigma, nearEdge }: Evaluated, isAsked: boolean): readonly number[] {
  const found: number[] = [];
  for (let i = 0; i < state.length; i++) {
    // Without any σ nothing moves: the spread of the draws would be 0, and it is unknown.
    if (state[i] !== State.present || !((sigma[i] as number) >= 0)) continue;
    if (!isAsked && nearEdge[i] !== 1) continue;
    found.push(i);
    if (!isAsked && found.length === MOST_UNASKED) break;
  }
  return found;
}

function empty(rows: number, wish: SimulationWish, asked: boolean): SimulatedLine {
  const none = (): Float64Array => new Float64Array(rows).fill(Number.NaN);
  return { ...wish, asked, median: none(), from68: none(), to68: none(), from95: none(), to95: none(), withoutValue: new Uint32Array(rows) };
}

function put(simulated: SimulatedLine, entry: number, draws: Float64Array): void {
  simulated.withoutValue[entry] = simulated.draws - draws.length;
  const { median, from68, to68, from95, to95 } = quantilesOf(draws);
  simulated.median[entry] = median;
  simulated.from68[entry] = from68;
  simulated.to68[entry] = to68;
  simulated.from95[entry] = from95;
  simulated.to95[entry] = to95;
}
