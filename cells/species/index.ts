export type { Body, BodyLookup, BodySpecies, BodyValue } from "./body";
export { bodyLookup, isFromMemory, listBodies, lookupBody, lookupPhase } from "./bodies";
export { measuredColumns } from "./candidates";
export type { Measured } from "./candidates";
export { atomicWeight, elementMassFraction, isElement, keyElement, parseChemical } from "./chemical";
export type { Chemical } from "./chemical";
export { condensationTemperature, elementsByCondensation } from "./condensation";
export { massFactor, oxides, parseSpecies } from "./forms";
export type { IronForm, Species } from "./forms";
export {
  isOwnBodyId,
  MOST_OWN_BODIES,
  ownBodiesSchema,
  ownBodyCodeSchema,
  ownBodyFaults,
  ownBodyId,
  ownBodyIdSchema,
  ownBodySchema,
  saysFromMemory,
} from "./ownBody";
export type { OwnBody, OwnBodyFault, OwnValue } from "./ownBody";
export type { Candidate, Refused, Resolution, ResolutionWarning, Resolved, Term } from "./resolution";
export { resolveSpecies } from "./resolve";
export { isVolatile, underRenormalisation } from "./volatiles";
export { elementsOfBody, shortNumber, speciesOfBody } from "./speciesOfBody";
