import { CellError } from "../errors";
import type { CommonVariable } from "../language";
import type { AxisInfo, TrendResult } from "../page/results";
import type { BudgetBlock, Target } from "../page/schema";
import { parseUnit } from "../quantity/unit";
import { fitOf } from "../trend/trendFit";
import { minus, plain, plus, scaled, times, type LinearForm } from "./algebra";
import type { Measure } from "./measure";
import { inField } from "./place";
import { given } from "./plan";
import { findBody, input, readSubstance, substanceOfBody, type Access } from "./readSubstance";
import { settleAt, settled, type Known, type Settle, type Substance } from "./substance";

/** What a budget is compared with, and what its amount must reach where one is solved for. */
export interface Aim {
  /** As sentences say it: "Mg / Si to 0.8916". */
  readonly words: string;
  /** How far from the target something is, in the expression's unit; 0 at the target. */
  gap(what: Substance): Known;
  /** The same in plain numbers; NaN where there is none. */
  plainGap(what: Substance): number;
  /** Size of the numbers that the gap is the difference of. */
  readonly scale: number;
  /** What a reported expression is at the target; undefined where the target does not say. */
  of(measure: Measure): Known | undefined;
  /** Expressions that a report without any of its own shows. */
  readonly measures: readonly Measure[];
  /** The same with the inputs at other values than their own. @throws CellError where there is no such target then */
  under(valueOf: ValueOf): Aim;
}

type ValueOf = (variable: CommonVariable) => number;

export interface AimParts {
  readonly block: BudgetBlock;
  readonly access: Access;
  readonly measure: (text: string, field: string, data?: string) => Measure;
}

type ExpressionTarget = Extract<Target, { expression: string }>;

/** Reads an expression's target. @throws CellError in the field concerned */
export function expressionAim(target: ExpressionTarget, measure: Measure, { access, block }: Pick<AimParts, "access" | "block">): Aim {
  return aimAt(
    measure,
    inField("target.equals", () => comparison(target, measure, access, block)),
  );
}

/** @param valueOf values of the inputs, where they are not their own */
function aimAt(measure: Measure, compare: Compare, valueOf?: ValueOf): Aim {
  const settle: Settle = valueOf === undefined ? (form) => form : settleAt(valueOf);
  const own = (of: Measure): Measure => (valueOf === undefined ? of : of.under(valueOf));
  const [aimed, of] = [own(measure), compare(settle)];
  const goal = of(aimed);
  if (goal === undefined || typeof goal === "string")
    throw new CellError("no-target-value", `The target has no value: ${goal ?? ""}`, { field: "target.equals" });
  const exactly = goal.value;
  return {
    words: `${measure.text.trim()} to ${Number(exactly.toPrecision(5))}${measure.unit === "1" ? "" : ` ${measure.unit}`}`,
    gap: (what) => {
      const reached = aimed.on(what);
      return typeof reached === "string" ? reached : minus(reached, goal);
    },
    plainGap: (what) => {
      const reached = aimed.on(what);
      return typeof reached === "string" ? Number.NaN : reached.value - exactly;
    },
    scale: Math.abs(exactly),
    of: (asked) => of(own(asked)),
    measures: [measure],
    under: (values) => aimAt(measure, compare, values),
  };
}

/** What a measure comes to at the target, with numbers settled in some way; undefined where the target does not say. */
type Compare = (settle: Settle) => (of: Measure) => Known | undefined;

function comparison(target: ExpressionTarget, measure: Measure, access: Access, block: BudgetBlock): Compare {
  const { equals } = target;
  if ("value" in equals) {
    requireBasis(measure, equals.basis);
    const value = input(given(`${block.id}.target`, "target", equals));
    return (settle) => (of) => (of.text.replace(/\s+/gu, "") === measure.text.replace(/\s+/gu, "") ? settle(value) : undefined);
  }
  if ("body" in equals) {
    const body = findBody(equals.body, access);
    const substance = substanceOfBody(body);
    return (settle) => {
      const at = settled(substance, settle);
      return (of) => {
        if (body.kind === "dex" && !of.isRatioOn(at) && typeof of.on(at) !== "string")
          return `${body.id} gives abundances relative to hydrogen: ratios can be had of it, ${of.text.trim()} is none.`;
        return of.on(at);
      };
    };
  }
  const sample = readSubstance(equals, access);
  return (settle) => {
    const at = settled(sample, settle);
    return (of) => of.on(at);
  };
}

function requireBasis(measure: Measure, stated: "mass" | "atoms"): void {
  const { basis } = measure;
  // Normalised values and logarithms have no basis that could differ.
  if (basis === null || basis === stated) return;
  const rewrite =
    stated === "atoms"
      ? "Write the expression by atoms, as in atoms(Mg) / atoms(Si), or state the target by mass."
      : `State the target by ${basis}, or write the expression by mass, as in Mg / Si.`;
  throw new CellError(
    "basis-mismatch",
    `${measure.text.trim()} is a ratio by ${basis}, and the target is stated by ${stated}. The two differ: forsterite's Mg/Si is 2 by atoms and 1.7308 by mass. ${rewrite}`,
    { field: "target.equals" },
  );
}

/** A trend as the target: its line in its own x and y. @throws CellError in `target.trend` */
export function trendAim(handle: string, x: Measure, y: Measure, result: TrendResult): Aim {
  return inField("target.trend", () => {
    const line = lineOf(handle, result);
    const [toX, toY] = [factorTo(x, result.x), factorTo(y, result.y)];
    const at = (valueOf?: ValueOf): Aim => {
      const settle: Settle = valueOf === undefined ? (form) => form : settleAt(valueOf);
      const [onX, onY] = valueOf === undefined ? [x, y] : [x.under(valueOf), y.under(valueOf)];
      const [ownSlope, ownIntercept] = [settle(line.slope), settle(line.intercept)];
      const distance = (what: Substance, slope: LinearForm, intercept: LinearForm): Known => {
        const [atX, atY] = [onX.on(what), onY.on(what)];
        if (typeof atX === "string") return atX;
        if (typeof atY === "string") return atY;
        return minus(scaled(atY, toY), plus(intercept, times(slope, scaled(atX, toX))));
      };
      const [slope, intercept] = [plain(ownSlope), plain(ownIntercept)];
      return {
        words: `the path to the line of ${handle}`,
        gap: (what) => distance(what, ownSlope, ownIntercept),
        plainGap: (what) => {
          const gap = distance(what, slope, intercept);
          return typeof gap === "string" ? Number.NaN : gap.value;
        },
        scale: Math.abs(intercept.value),
        of: () => undefined,
        measures: [x, y],
        under: at,
      };
    };
    return at();
  });
}

function lineOf(handle: string, result: TrendResult): { readonly slope: LinearForm; readonly intercept: LinearForm } {
  const { slope, intercept } = result;
  if (!result.ok || slope === undefined || intercept === undefined)
    throw new CellError("no-line", `${handle} has no line, so nothing can reach it. See what ${handle} says.`);
  const known = fitOf(result)?.line;
  if (known !== undefined) return known;
  const scattered = result.usesScatter === true;
  const covariance = (scattered ? result.covarianceWithScatter : result.covariance) ?? 0;
  const make = (name: "slope" | "intercept", other: "slope" | "intercept"): LinearForm => {
    const parameter = name === "slope" ? slope : intercept;
    const variable: CommonVariable = {
      key: `trend:${handle}:${name}`,
      label: `${name} of ${handle}`,
      value: parameter.value,
      sigma: (scattered ? parameter.sigmaWithScatter : parameter.sigma) ?? Number.NaN,
      covarianceWith: (of) => (of.key === `trend:${handle}:${other}` ? covariance : 0),
    };
    return { value: parameter.value, terms: [{ variable, partial: 1 }] };
  };
  return { slope: make("slope", "intercept"), intercept: make("intercept", "slope") };
}

/** What a composition's value is multiplied by to be in the unit of the trend's axis. */
function factorTo(measure: Measure, axis: AxisInfo): number {
  if (measure.basis !== null && axis.basis !== null && measure.basis !== axis.basis)
    throw new CellError("basis-mismatch", `${measure.text.trim()} is by ${measure.basis} on the budget's path and by ${axis.basis} on the trend.`);
  if (measure.unit === axis.unit) return 1;
  const [from, to] = [parseUnit(measure.unit), parseUnit(axis.unit)];
  if (from === undefined || to?.dimension !== from.dimension || from.offset !== 0 || to.offset !== 0)
    throw new CellError(
      "unit-mismatch",
      `The trend's ${axis.expression} is in ${axis.unit}, and on a composition it would be in ${measure.unit}. A budget can reach trends in ratios and mass fractions.`,
    );
  return to.per / from.per;
}
