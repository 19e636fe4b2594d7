import { CellError } from "../errors";
import type { CommonVariable, Named } from "../language";
import { crossingOf, fitOf, isSampleVariable, renamed, type LinearForm } from "../trend";
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
    const named = {
      key: member === "slope" ? slope : intercept,
      label: `${member} of ${handle}`,
      value: (parameter?.value ?? Number.NaN) * scale,
      unit: member === "slope" ? units["1"] : y,
      ...(basis === null ? {} : { basis }),
      notes: [scattered ? "1σ with the scatter beyond the errors" : "1σ from the errors of the points"],
    };
    const known = fromSamples(fitOf(result)?.line[member], named, scale);
    if (known !== undefined) return { kind: "common", variable: known };
    const variable: CommonVariable = {
      ...named,
      sigma: sigma * scale,
      covarianceWith: (other) => (other.key === (member === "slope" ? intercept : slope) ? covariance * scale * otherScale : 0),
    };
    return { kind: "common", variable };
  }
  if (member === "crossing_x" || member === "crossing_y") return ofCrossing(handle, result, member);
  return undefined;
}

/**
 * A fit's parameter as formulas use it: its own σ is what its samples bring, shared with these samples' own values and with
 * other fits; what is common to the samples, as a body that they are normalised to, it leans on.
 */
function fromSamples(form: LinearForm | undefined, named: Pick<CommonVariable, "key" | "label" | "value">, scale: number): CommonVariable | undefined {
  const own = form?.terms.find(({ variable }) => isSampleVariable(variable));
  if (form === undefined || own === undefined || !isSampleVariable(own.variable)) return undefined;
  const rest = form.terms.filter((term) => term !== own);
  const made = renamed(own.variable, { ...named, sigma: own.variable.sigma * Math.abs(scale) }, scale);
  return rest.length === 0 ? made : { ...made, leansOn: directly(rest, scale) };
}

/**
 * Derivatives of a form without what its variables lean on themselves: a second fit leans on a first one's slope, and on a body
 * both by way of that slope and beside it. Whoever uses both follows each once.
 */
function directly(terms: LinearForm["terms"], scale: number): NonNullable<CommonVariable["leansOn"]> {
  const direct = new Map(terms.map(({ variable, partial }) => [variable.key, partial]));
  for (const { variable } of [...terms].sort((a, b) => depth(b.variable) - depth(a.variable))) {
    const own = direct.get(variable.key) ?? 0;
    for (const { variable: on, partial } of variable.leansOn ?? []) direct.set(on.key, (direct.get(on.key) ?? 0) - own * partial);
  }
  return terms.map(({ variable }) => ({ variable, partial: (direct.get(variable.key) ?? 0) * scale }));
}

function depth({ leansOn }: CommonVariable): number {
  return leansOn === undefined ? 0 : 1 + Math.max(0, ...leansOn.map(({ variable }) => depth(variable)));
}

function ofCrossing(handle: string, result: TrendResult, member: "crossing_x" | "crossing_y"): Named {
  const { crossing } = result;
  if (crossing === undefined)
    throw new CellError("no-crossing", `${handle} has no crossing. Choose the trend it is crossed with, and see what ${handle} says.`);
  const axis = member === "crossing_x" ? "x" : "y";
  const [own, other] = axis === "x" ? [unitOf(result.x), unitOf(result.y)] : [unitOf(result.y), unitOf(result.x)];
  const { basis } = result[axis];
  const named = {
    key: `trend:${handle}:${member}`,
    label: `${axis} of the crossing of ${handle} with ${crossing.with}`,
    value: toCanonical(crossing[axis].value, own),
    unit: own,
    ...(basis === null ? {} : { basis }),
  };
  const point = crossingOf(result)?.[axis];
  if (crossing.region === "ellipse" && point !== undefined) {
    const notes = ["Its errors are those of the two lines, and of what is common to their samples, listed beside it."];
    return { kind: "common", variable: { ...named, sigma: 0, leansOn: directly(point.terms, 1 / own.per), notes } };
  }
  const variable: CommonVariable = {
    ...named,
    sigma: sigmaToCanonical(crossing[axis].sigma ?? Number.NaN, own),
    ...(crossing.region === "simulated" ? { notes: ["Its σ is simulated; what it shares with samples and bodies used beside it is not carried."] } : {}),
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
