export { EPSILON, PI, Z_95, CHI2_95_TWO } from "./constants";
export { exp } from "./exp";
export { log, log10 } from "./log";
export { pow } from "./pow";
