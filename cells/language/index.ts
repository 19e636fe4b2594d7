/** The expression language: reading, checking, calculating with units, bases and correlated 1σ. */
export type { ClassVariable, ColumnVariable, OneVariable, Variable } from "./compiled";
export { compileOnComposition } from "./composition";
export type { CompositionValue, OnComposition } from "./composition";
export { evaluateCondition, evaluateExpression } from "./evaluate";
export { Evaluated } from "./evaluated";
export type { EvaluatedMeaning } from "./evaluated";
export { functions } from "./functions";
export type { FunctionInfo } from "./functions";
export { parseLines } from "./lines";
export type { FormulaLine, FormulaLines } from "./lines";
export { namesUsed, renameInText } from "./nameUses";
export type { NameUse } from "./nameUses";
export { parse } from "./parse";
export type { CommonVariable, ExpressionPlace, Named, NamedLine, Scope, ScopeOffer } from "./scope";
export { isPlainName, writeName } from "./tokens";
export { traceRow } from "./trace";
export type { RowTrace, TracedColumn, TracedCommon, TracedInput } from "./trace";
export type { Tree } from "./tree";
