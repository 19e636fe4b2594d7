/** Trends: lines through samples, where they cross, and how far bodies lie from them. */
export { bandOf, lineAt } from "./band";
export { crossingOf, crossingRegionOf } from "./crossTrends";
export { evaluateTrend } from "./evaluate";
export { ellipseCurve } from "./region";
export { covariance, hasUnknown, variance } from "./linearForm";
export type { LinearForm } from "./linearForm";
export { fitOf, isSampleVariable, renamed } from "./trendFit";
export type { TrendFit } from "./trendFit";
