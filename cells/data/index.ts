export { evaluateData } from "./evaluate";
