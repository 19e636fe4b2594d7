import { CellError } from "../errors";
import type { CommonVariable, Named } from "../language";
import { parseUnit, sigmaToCanonical, toCanonical, units, type Unit } from "../quantity/unit";
import type { AxisInfo, BlockResult, BudgetResult, TrendResult } from "./results";

/** What formulas may use of a trend and of a budget. */
export const trendMembers = ["slope", "intercept", "crossing_x", "crossing_y"] as const;
export const budgetMembers = ["solved"] as const;

/**
 * A single result of a trend or budget as a quantity common to all samples; undefined for a name it does not have.
 *
 * @throws CellError where it has that result in principle and not now, with the reason
 */
export function commonOf(handle: string, result: BlockResult, member: string): Named | undefined {
  if (result.kind === "trend") return ofTrend(handle, result, member);
  if (result.kind === "budget" && member === "solved") return ofSolved(handle, result);
  return undefined;
}

function ofTrend(handle: string, result: TrendResult, member: string): Named | undefined {
  const slope = `trend:${handle}:slope`;
  const intercept = `trend:${handle}:intercept`;
  if (member === "slope" || member === "intercept") {
    if (!result.ok || result.slope === undefined || result.intercept === undefined)
      throw new CellError("no-line", `${handle} has no line, so it has no ${member}. See what ${handle} says.`);
    const scattered = result.usesScatter === true;
    const parameter = result[member];
    const sigma = (scattered ? parameter?.sigmaWithScatter : parameter?.sigma) ?? Number.NaN;
    const covariance = (scattered ? result.covarianceWithScatter : result.covariance) ?? 0;
    const [x, y] = [unitOf(result.x), unitOf(result.y)];
    if (member === "slope" && x.dimension !== y.dimension) {
      throw new CellError(
        "slope-unit",
        `${handle}.slope is in ${y.symbol} per ${x.symbol}; a formula can use a slope only where both axes have units of one kind.`,
      );
    }
    // In canonical units y/per_y = (a + b·x)/per_y: slopes scale by per_x/per_y, intercepts by 1/per_y.
    const scale = member === "slope" ? x.per / y.per : 1 / y.per;
    const otherScale = member === "slope" ? 1 / y.per : x.per / y.per;
    const sameBasis = result.x.basis === result.y.basis;
    const basis = member === "slope" && sameBasis ? null : result.y.basis;
    const variable: CommonVariable = {
      key: member === "slope" ? slope : intercept,
      label: `${member} of ${handle}`,
      value: (parameter?.value ?? Number.NaN) * scale,
      sigma: sigma * scale,
      unit: member === "slope" ? units["1"] : y,
      ...(basis === null ? {} : { basis }),
      covarianceWith: (other) => (other.key === (member === "slope" ? intercept : slope) ? covariance * scale * otherScale : 0),
      notes: [scattered ? "1σ with the scatter beyond the errors" : "1σ from the errors of the points"],
    };
    return { kind: "common", variable };
  }
  if (member === "crossing_x" || member === "crossing_y") return ofCrossing(handle, result, member);
  return undefined;
}

function ofCrossing(handle: string, result: TrendResult, member: "crossing_x" | "crossing_y"): Named {
  const { crossing } = result;
  if (crossing === undefined)
    throw new CellError("no-crossing", `${handle} has no crossing. Choose the trend it is crossed with, and see what ${handle} says.`);
  const axis = member === "crossing_x" ? "x" : "y";
  const [own, other] = axis === "x" ? [unitOf(result.x), unitOf(result.y)] : [unitOf(result.y), unitOf(result.x)];
  const { basis } = result[axis];
  const variable: CommonVariable = {
    key: `trend:${handle}:${member}`,
    label: `${axis} of the crossing of ${handle} with ${crossing.with}`,
    value: toCanonical(crossing[axis].value, own),
    sigma: sigmaToCanonical(crossing[axis].sigma ?? Number.NaN, own),
    unit: own,
    ...(basis === null ? {} : { basis }),
    covarianceWith: (variable) =>
      variable.key === `trend:${handle}:${axis === "x" ? "crossing_y" : "crossing_x"}` ? crossing.covariance / own.per / other.per : 0,
  };
  return { kind: "common", variable };
}

function ofSolved(handle: string, result: BudgetResult): Named {
  if (result.solved === undefined) throw new CellError("no-solution", `${handle} has no solved amount. See what ${handle} says.`);
  const unit = parseUnit(result.solved.unit) ?? units["1"];
  const variable: CommonVariable = {
    key: `budget:${handle}:solved`,
    label: `solved amount of ${handle}`,
    value: toCanonical(result.solved.value, unit),
    sigma: sigmaToCanonical(result.solved.sigma ?? Number.NaN, unit),
    unit,
    notes: result.solved.sigmaIs === undefined ? [] : ["Its σ is a lower bound: an input's σ is unknown."],
  };
  return { kind: "common", variable };
}

function unitOf(axis: AxisInfo): Unit {
  return parseUnit(axis.unit) ?? units["1"];
}
