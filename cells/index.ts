/** The one public face of the calculation engine. Code outside `cells/` imports from here and nowhere deeper. */

// Errors
export { CellError, UnreadablePageError } from "./errors";
export type { Problem, Severity, Span } from "./errors";

// States and units
export { State, countStates, stateName, stateNames } from "./quantity/state";
export type { StateCode, StateName } from "./quantity/state";
export { fromCanonical, parseUnit, sigmaFromCanonical, sigmaToCanonical, toCanonical, units } from "./quantity/unit";
export type { DimensionName, Unit, UnitSymbol } from "./quantity/unit";

// Page document
export {
  PAGE_FORMAT,
  amendmentSchema,
  assumedSchema,
  blockKinds,
  blockSchema,
  columnSchema,
  drawnSchema,
  handleSchema,
  leaveOutSchema,
  pageSchema,
  setAsideSchema,
  stepSchema,
  typedRowSchema,
} from "./page/schema";
export type {
  Amendment,
  Amount,
  Assumed,
  Axis,
  Basis,
  Block,
  BlockKind,
  BudgetBlock,
  Column,
  Correlation,
  DataBlock,
  Drawn,
  Ellipses,
  FormulaBlock,
  LeaveOut,
  NoteBlock,
  PageDocument,
  PlotBlock,
  Role,
  RowId,
  SetAside,
  Step,
  Substance,
  Target,
  TrendBlock,
  TypedRow,
  UncertaintyKind,
} from "./page/schema";

// Simulated propagation
export { Simulation, USUAL_WISH, range as rangeInWords } from "./simulate";
export type { Quantiles, SimulatedBudget, SimulatedLine, SimulatedNumber, SimulatedTrend, SimulationWish } from "./simulate";

// Tables
export { ownSigmaKinds, readOwnTable } from "./table/readOwnTable";
export type { OwnSigmaKind, OwnTable } from "./table/readOwnTable";
export { referencesOf } from "./table/references";
export type { ColumnCorrelation, QuantityColumn, RowOrigin, Table, TableColumn, TextColumn } from "./table/table";

// Results and the engine
export { ENGINE_VERSION, RESULTS_FORMAT } from "./page/results";
export type {
  AxisInfo,
  Band,
  BlockResult,
  BodyDistance,
  BudgetPart,
  BudgetPathPoint,
  BudgetReport,
  BudgetResult,
  ColumnSummary,
  Crossing,
  Curve,
  DataResult,
  FitParameter,
  FormulaResult,
  LineCorrelation,
  LineResult,
  NoteResult,
  NoteValue,
  PageResults,
  PlotLayer,
  PlotPoints,
  PlotResult,
  ScreeningFlag,
  TraceNode,
  TraceRequest,
  TrendPoint,
  TrendResult,
  Uncertain,
} from "./page/results";
export { createEngine } from "./page/engine";
export type { Nearest, NearestOne, NearestRequest } from "./data/nearest";
export type { Engine, ImportProposal, ProposedColumn } from "./page/engine";
export { hasErrors, resultsJson } from "./page/resultsJson";
export { resultsTable } from "./page/resultsTable";
export { pageJsonSchema, readPageDocument } from "./page/read";

// Notes and numbers as people read them
export { quotesIn } from "./note/quotes";
export type { Quote } from "./note/quotes";
export { formatNumber, formatUncertain } from "./quantity/format";
export type { UncertaintyStyle } from "./quantity/format";

// Species and reference bodies
export {
  atomicWeight,
  bodyLookup,
  condensationTemperature,
  elementsByCondensation,
  elementsOfBody,
  isFromMemory,
  isOwnBodyId,
  keyElement,
  listBodies,
  lookupBody,
  lookupPhase,
  massFactor,
  MOST_OWN_BODIES,
  ownBodyCodeSchema,
  ownBodyFaults,
  ownBodyId,
  ownBodyIdSchema,
  ownBodySchema,
  oxides,
  parseChemical,
  parseSpecies,
  resolveSpecies,
  saysFromMemory,
  speciesOfBody,
} from "./species";
export type { Body, BodyLookup, BodySpecies, BodyValue, Chemical, IronForm, OwnBody, OwnBodyFault, OwnValue, Resolution, Species } from "./species";

// Where numbers come from
export { dominantOf } from "./trace";
export type { Dominant } from "./trace";

// Expression language
export {
  compileOnComposition,
  complete,
  evaluateCondition,
  evaluateExpression,
  functions,
  helpFor,
  isPlainName,
  namesUsed,
  parseLines,
  renameInText,
  traceRow,
  writeName,
} from "./language";
export type {
  CommonVariable,
  Completion,
  Completions,
  CompositionValue,
  Evaluated,
  ExpressionPlace,
  FormulaLine,
  FormulaLines,
  FunctionInfo,
  NameUse,
  Named,
  OnComposition,
  RowTrace,
  Scope,
  ScopeOffer,
  TracedInput,
} from "./language";
