import { generator } from "../../support/generator";
import { formulaText } from "./formulaText";
import { tryFormula } from "./tryFormula";
import { spoiltPage, tryPage } from "./tryPage";

export interface Fuzzed {
  readonly formulas: number;
  readonly answered: number;
  readonly pages: number;
  readonly calculated: number;
}

/** Tries formulas and pages for so many seconds. @throws Error with the case that broke */
export function fuzz(seed: number, seconds: number): Fuzzed {
  const next = generator(seed);
  const until = performance.now() + 1000 * seconds;
  let [formulas, answered, pages, calculated] = [0, 0, 0, 0];
  while (performance.now() < until) {
    for (let n = 0; n < 60; n++) {
      formulas++;
      if (tryFormula(formulaText(next)) === "answered") answered++;
    }
    pages++;
    if (tryPage(spoiltPage(next)) === "calculated") calculated++;
  }
  return { formulas, answered, pages, calculated };
}
