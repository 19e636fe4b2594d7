import type { Problem } from "../errors";
import type { TrendResult } from "../page/results";
import { count, quantilesOf, Simulation, wishWords, type Quantiles, type SimulatedTrend, type SimulationWish } from "../simulate";
import { onAxesOf } from "./crossTrends";
import { drawnPoints } from "./drawnPoints";
import { exact } from "./linearForm";
import type { TrendFit } from "./trendFit";

/**
 * Simulates a trend, where its block wishes it: in every draw the points are moved within their errors and the line is fitted
 * again by its own method; where it crosses another, that one's points move with them, what both share alike, and it is fitted
 * again too. Quantiles are those of the draws that have a line, or a crossing (JCGM 101:2008).
 *
 * The scatter that the line in use counts beyond the errors is drawn and weighed with as it was found; it is not estimated again.
 *
 * @param second the fit of the other line, where there is a crossing
 */
export function simulateTrend(base: TrendResult, first: TrendFit, second: TrendFit | undefined, wish: SimulationWish | undefined): Simulation | undefined {
  if (wish === undefined) return undefined;
  const fits = second === undefined ? [first] : [first, second];
  return new Simulation(wish.draws, run(wish));

  function* run(used: SimulationWish): Generator<number, TrendResult> {
    const drawn = yield* drawnPoints(fits, used);
    if (!drawn.areMoving) return { ...base, problems: [...base.problems, nothingMoves] };
    const [slope, intercept] = [new Collected(used.draws), new Collected(used.draws)];
    const [x, y] = [new Collected(used.draws), new Collected(used.draws)];
    for (let k = 0; k < used.draws; k++) {
      drawn.next();
      const lines = fits.map(({ refit }, f) => refit(drawn.x[f] ?? new Float64Array(0), drawn.y[f] ?? new Float64Array(0)));
      const [own, other] = lines;
      if (own !== undefined) {
        slope.put(own.slope);
        intercept.put(own.intercept);
      }
      const crossing = own === undefined || other === undefined || second === undefined ? undefined : crossed(first, second, own, other);
      if (crossing !== undefined) {
        x.put(crossing.x);
        y.put(crossing.y);
      }
      yield 1;
    }
    const simulated: SimulatedTrend = {
      ...used,
      withoutLine: used.draws - slope.n,
      slope: slope.quantiles,
      intercept: intercept.quantiles,
      ...(second === undefined ? {} : { crossing: { withoutCrossing: used.draws - x.n, x: x.quantiles, y: y.quantiles } }),
    };
    return { ...base, simulated, problems: [...base.problems, ...lostDraws(simulated), ...errorsOnly(fits, simulated)] };
  }
}

/** The values of the draws that have one. */
class Collected {
  n = 0;
  private readonly values: Float64Array;

  constructor(draws: number) {
    this.values = new Float64Array(draws);
  }

  put(value: number): void {
    this.values[this.n++] = value;
  }

  get quantiles(): Quantiles | null {
    return this.n === 0 ? null : quantilesOf(this.values, this.n);
  }
}

interface Line {
  readonly slope: number;
  readonly intercept: number;
}

/** Where two drawn lines meet, on the axes of the first; undefined where they do not. */
function crossed(first: TrendFit, second: TrendFit, own: Line, drawn: Line): { readonly x: number; readonly y: number } | undefined {
  const other = onAxesOf(first, { ...second, line: { slope: exact(drawn.slope), intercept: exact(drawn.intercept) } });
  if (other === undefined) return undefined;
  const x = (other.intercept.value - own.intercept) / (own.slope - other.slope.value);
  const y = own.intercept + own.slope * x;
  return Number.isFinite(x) && Number.isFinite(y) ? { x, y } : undefined;
}

const nothingMoves: Problem = {
  code: "nothing-to-simulate",
  severity: "warning",
  field: "simulate",
  text: "No error of these points is known, so there is nothing to draw and nothing is simulated. Give σ in the table, or assume them there.",
};

function lostDraws({ withoutLine, crossing, draws, seed }: SimulatedTrend): Problem[] {
  const say = (lost: number, what: string): Problem[] =>
    lost === 0
      ? []
      : [
          {
            code: "draws-without-line",
            severity: lost * 2 > draws ? "warning" : "note",
            field: "simulate",
            text: `In ${count(lost)} of the simulated draws (${wishWords({ draws, seed })}) ${what}; the quantiles are those of the others alone.`,
          },
        ];
  return [...say(withoutLine, "no line was found"), ...say(crossing?.withoutCrossing ?? 0, "the lines do not cross")];
}

/** Draws move points by what is known of their errors, which is not what the σ of the other methods come from. */
function errorsOnly(fits: readonly TrendFit[], { draws, seed }: SimulatedTrend): Problem[] {
  if (fits.every(({ source }) => source.errors.from === "errors")) return [];
  return [
    {
      code: "simulated-errors-alone",
      severity: "warning",
      field: "simulate",
      text: `The simulation (${wishWords({ draws, seed })}) moves the points by their own errors, as far as these are known; the σ given beside it come from how far the points lie from the line. The two answer different questions and need not agree.`,
    },
  ];
}
