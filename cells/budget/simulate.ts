import { CellError, type Problem } from "../errors";
import type { CommonVariable } from "../language";
import type { BudgetResult } from "../page/results";
import {
  byKey,
  capital,
  commonNoise,
  count,
  differs,
  quantilesOf,
  Simulation,
  USUAL_WISH,
  wishWords,
  type SimulatedBudget,
  type SimulatedNumber,
  type SimulationWish,
} from "../simulate";
import { exact, type LinearForm } from "./algebra";
import type { Budget } from "./budget";
import { follow } from "./plan";
import { rootNear } from "./solve";
import { settleAt } from "./substance";

/** Warnings that say that first order cannot be trusted; `of` is the reported expression concerned, the amount where left out. */
export interface Distrust {
  readonly warning: Problem;
  readonly of?: string;
}

/** A budget that was calculated to first order. */
export interface ToSimulate {
  readonly budget: Budget;
  /** The solved amount with its dependence on the inputs: near it a draw's own is looked for. */
  readonly solved: LinearForm | undefined;
  readonly distrusted: readonly Distrust[];
}

/**
 * Simulates a budget: every input drawn with its covariances, the amount solved for anew, the reported expressions at the end
 * of it. Undefined where nobody wishes it and first order can be trusted, and where no input has a known σ.
 */
export function simulateBudget(base: BudgetResult, { budget, solved, distrusted }: ToSimulate, wish: SimulationWish | undefined): Simulation | undefined {
  if (wish === undefined && distrusted.length === 0) return undefined;
  const used = wish ?? USUAL_WISH;
  const inputs = inputsOf(budget, solved);
  if (!inputs.some(({ sigma }) => sigma > 0)) return undefined;
  return new Simulation(used.draws, run());

  function* run(): Generator<number, BudgetResult> {
    const noise = commonNoise([...inputs].sort(byKey), used);
    const amounts = new Float64Array(used.draws);
    const values = budget.report.map(() => new Float64Array(used.draws));
    const counts = budget.report.map(() => 0);
    let solutions = 0;
    for (let k = 0; k < used.draws; k++) {
      const drawn = endUnder(budget, solved, ({ key, value }) => value + (noise.get(key)?.[k] ?? 0));
      if (drawn !== undefined) {
        amounts[solutions++] = drawn.amount;
        drawn.report.forEach((value, i) => {
          const column = values[i];
          if (column === undefined || value === undefined) return;
          column[counts[i] ?? 0] = value;
          counts[i] = (counts[i] ?? 0) + 1;
        });
      }
      yield 1;
    }
    const isSolved = budget.plan.varying.how === "solve";
    const simulated: SimulatedBudget = {
      ...used,
      asked: wish !== undefined,
      withoutSolution: used.draws - solutions,
      solved: isSolved && solutions > 0 ? quantilesOf(amounts, solutions) : null,
      report: values.map((column, i): SimulatedNumber | null => {
        const n = counts[i] ?? 0;
        return n === 0 ? null : { ...quantilesOf(column, n), withoutValue: solutions - n };
      }),
    };
    return { ...base, simulated, problems: [...saidWith(base, distrusted, simulated), ...lostDraws(base, simulated)] };
  }
}

interface DrawnEnd {
  /** NaN where none is solved for. */
  readonly amount: number;
  readonly report: readonly (number | undefined)[];
}

/** Where the budget ends with its inputs at other values than their own; undefined where there is no physical end then. */
function endUnder({ plan, aim, report }: Budget, solved: LinearForm | undefined, valueOf: (variable: CommonVariable) => number): DrawnEnd | undefined {
  try {
    const settle = settleAt(valueOf);
    const drawn = plan.settled(settle);
    const { varying } = plan;
    const amount =
      varying.how !== "solve"
        ? Number.NaN
        : aim === undefined || solved === undefined
          ? undefined
          : rootNear(drawn, varying.step, aim.under(valueOf), settle(solved).value);
    if (amount === undefined) return undefined;
    const end = follow(drawn, exact(varying.how === "sweep" ? varying.to : amount));
    const values = report.map(({ measure }) => {
      const known = measure?.under(valueOf).on(end);
      return known === undefined || typeof known === "string" || !Number.isFinite(known.value) ? undefined : known.value;
    });
    return { amount, report: values };
  } catch (error) {
    if (error instanceof CellError) return undefined;
    throw error;
  }
}

/** Every input that a run through the budget asks for. */
function inputsOf(budget: Budget, solved: LinearForm | undefined): readonly CommonVariable[] {
  const asked = new Map<string, CommonVariable>();
  endUnder(budget, solved, (variable) => {
    asked.set(variable.key, variable);
    return variable.value;
  });
  return [...asked.values()];
}

function saidWith(base: BudgetResult, distrusted: readonly Distrust[], simulated: SimulatedBudget): readonly Problem[] {
  return base.problems.map((problem) => {
    const found = distrusted.find(({ warning }) => warning === problem);
    const sentence = found === undefined ? undefined : comparison(base, found, simulated);
    return sentence === undefined ? problem : { ...problem, text: `${problem.text} ${sentence}` };
  });
}

function comparison({ solved, report }: BudgetResult, { of }: Distrust, simulated: SimulatedBudget): string | undefined {
  if (of === undefined)
    return solved === undefined || simulated.solved === null
      ? undefined
      : capital(differs(solved.value, solved.sigma, simulated.solved, simulated, solved.unit));
  const place = report.findIndex(({ expression }) => expression === of);
  const [row, found] = [report[place], simulated.report[place]];
  return row?.end == null || found == null ? undefined : `For ${of.trim()} at the end ${differs(row.end, row.sigma, found, simulated, row.unit)}`;
}

function lostDraws({ solved }: BudgetResult, { withoutSolution, draws, seed }: SimulatedBudget): Problem[] {
  if (withoutSolution === 0) return [];
  const why = solved === undefined ? "the steps are not possible" : "no possible amount reaches the target";
  return [
    {
      code: "draws-without-solution",
      severity: withoutSolution * 2 > draws ? "warning" : "note",
      text: `In ${count(withoutSolution)} of the simulated draws (${wishWords({ draws, seed })}) ${why}; what is said of the others holds for them alone.`,
    },
  ];
}
