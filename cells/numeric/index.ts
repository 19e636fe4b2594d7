/** Elementary functions, distributions, chance and small linear algebra, the same to the bit on every machine. */
export { CHI2_95_TWO, EPSILON, PI, Z_95 } from "./constants";
export { erf, erfc } from "./erf";
export { exp } from "./exp";
export { chiSquareQuantile, chiSquareSurvival, incompleteGamma, logGamma } from "./gamma";
export { bilinear, determinant2, inverseForm2, solveLinear } from "./linear";
export type { Symmetric2 } from "./linear";
export { log, log10, logConstants } from "./log";
export { normalCdf, normalQuantile, normalTwoSided } from "./normal";
export { pow } from "./pow";
export { createRandom } from "./random";
export type { Random } from "./random";
export { incompleteBeta, studentTwoSided, studentTwoSidedQuantile } from "./student";
