/** Where numbers come from, down to the cells of sources, with each input's share of the variance. */
export { budgetNode } from "./budget";
export { cellNodes } from "./cells";
export type { Tracing } from "./commons";
export { dominantOf } from "./dominant";
export type { Dominant } from "./dominant";
export { expressionNode } from "./expression";
export { inUnit } from "./node";
export { plotNode } from "./plot";
export { trendNode } from "./trend";
