/** Simulated propagation: inputs drawn by chance, seeded, beside propagation to first order (JCGM 101:2008). */
export { commonNoise, byKey } from "./commonNoise";
export { simulateLines } from "./lines";
export type { CalculatedLine } from "./lines";
export { simulatedNumber } from "./ofNumber";
export { quantilesOf } from "./quantiles";
export { capital, count, differs, range, wishWords } from "./sentences";
export { MOST_UNASKED, USUAL_WISH } from "./simulated";
export type { Quantiles, SimulatedBudget, SimulatedLine, SimulatedNumber, SimulatedTrend, SimulationWish } from "./simulated";
export { Simulation, simulationOf, withSimulation } from "./simulation";
export type { StartSimulation } from "./simulation";
