import type { CommonVariable } from "../language";
import { lowerRoot } from "../trend/jointDraws";
import { variableCovariance } from "../trend/linearForm";
import { normalsOf } from "./streams";
import type { SimulationWish } from "./simulated";

/**
 * Draws of the errors of variables that are the same for all samples: bodies, fitted slopes, aggregates, inputs of budgets.
 * Normal, with their covariances, once a draw for all rows. A variable without a known σ stands still.
 *
 * @param variables each key once; those that come earlier do not move when later ones are left out
 * @returns the errors by key, one for each draw
 */
export function commonNoise(variables: readonly CommonVariable[], { draws, seed }: SimulationWish): ReadonlyMap<string, Float64Array> {
  const moving = variables.filter(({ sigma }) => sigma > 0);
  const covariances = moving.map((a) =>
    Float64Array.from(moving, (b) => {
      const covariance = variableCovariance(a, b);
      return covariance === covariance ? covariance : 0;
    }),
  );
  const root = lowerRoot(covariances);
  const normals = moving.map(({ key }) => normalsOf(seed, key, draws));
  const made = new Map<string, Float64Array>();
  for (const [i, { key }] of moving.entries()) {
    const own = new Float64Array(draws);
    for (let j = 0; j <= i; j++) {
      const [factor, z] = [root[i]?.[j] ?? 0, normals[j]];
      if (factor === 0 || z === undefined) continue;
      for (let k = 0; k < draws; k++) own[k] = (own[k] as number) + factor * (z[k] as number);
    }
    made.set(key, own);
  }
  return made;
}

/** Order of variables by key, so that it does not depend on where each first appears. */
export function byKey(a: CommonVariable, b: CommonVariable): number {
  return a.key === b.key ? 0 : a.key < b.key ? -1 : 1;
}
