/** Plots: what a plot block draws, as numbers ready to be put on paper. */
export { evaluatePlot } from "./evaluatePlot";
