import { State } from "../../../cells/quantity/state";
import { complete, evaluateExpression, namesUsed, parseLines, renameInText, type Evaluated } from "../../../cells/language";
import { scopeOf, tableOf } from "../language/scopes";

const scope = scopeOf(
  tableOf({
    MgO: { value: [38, 40, null, 41, "<", 0], sigma: [0.4, 0.4, 0.4, null, 0.4, 0] },
    SiO2: { value: [45, 44, 43, 46, 0, 45], sigma: [0.4, 0.3, null, 0.2, 0.1, 0.2] },
    Al2O3: { value: [1, 2, 3, "<", 5, 1e-300] },
    FeOt: { value: [8, 8, 8, 8, 8, 8], sigma: [0.1, 0.1, 0.1, 0.1, 0.1, 0.1], assumed: [1, 0, 1, 0, 1, 0] },
    "La (ppm)": { unit: "µg/g", species: "La", value: [0.2, 0.3, 1e9, 0.1, 0.2, 0.2], sigma: [0.1, 0.1, 0.1, 0.1, 0.1, 0.1] },
    la: { unit: "1", species: null, value: [1, 2, 3, 4, 5, 6] },
    Group: ["A", "B", "", "A", "B", "é"],
  }),
  { x1: "MgO / SiO2" },
);

/** Longest that one text may take, ms of the processor: what else the machine does must not count. */
const patience = 2000;

/**
 * What must hold whatever is typed: an answer or a refusal of ours with a place in the text, in time, twice the same, and nothing
 * left behind.
 *
 * @throws Error with the text and what went wrong
 */
export function tryFormula(text: string): "answered" | "refused" {
  const wrong = (what: string): Error => new Error(`${what}: ${JSON.stringify(text)}`);
  const began = process.cpuUsage();
  const first = outcome(text, wrong);
  const again = outcome(text, wrong);
  if (first.shown !== again.shown) throw wrong("another answer the second time");
  for (const [name, work] of Object.entries({
    lines: () => parseLines(text),
    names: () => namesUsed(text),
    completion: () => complete(scope, text, text.length),
  })) {
    try {
      work();
    } catch (error) {
      throw wrong(`${name} broke (${String(error)})`);
    }
  }
  if (renameInText(text, () => undefined) !== text) throw wrong("renaming nothing changed the text");
  const { user, system } = process.cpuUsage(began);
  const took = (user + system) / 1000;
  if (took > patience) throw wrong(`took ${took.toFixed(0)} ms`);
  if (Object.keys(Object.prototype).length > 0 || Object.hasOwn(Object.prototype, "polluted")) throw wrong("a prototype was changed");
  return first.answered ? "answered" : "refused";
}

function outcome(text: string, wrong: (what: string) => Error): { readonly answered: boolean; readonly shown: string } {
  let evaluated: Evaluated;
  try {
    evaluated = evaluateExpression(scope, text, { block: "r" });
  } catch (error) {
    if (!(error instanceof Error) || error.name !== "CellError" || !("toProblem" in error)) throw wrong(`broke (${String(error)})`);
    const {
      code,
      span,
      text: sentence,
    } = (error as unknown as { toProblem(block: string): { code: string; span?: readonly [number, number]; text: string } }).toProblem("r");
    if (span === undefined) throw wrong(`${code} has no place`);
    if (!(span[0] >= 0 && span[0] <= span[1] && span[1] <= text.length)) throw wrong(`${code} lies at ${span.join("–")} of ${text.length.toString()}`);
    if (sentence.length < 12 || !/[.?!”)]$/u.test(sentence)) throw wrong(`${code} says only “${sentence}”`);
    return { answered: false, shown: `${code} ${span.join("–")} ${sentence}` };
  }
  const { value, sigma, state } = evaluated;
  for (let row = 0; row < value.length; row++) {
    if ((state[row] === State.present) !== Number.isFinite(value[row]))
      throw wrong(`row ${row.toString()} has state ${String(state[row])} and value ${String(value[row])}`);
    if ((sigma[row] as number) < 0) throw wrong(`row ${row.toString()} has a negative σ`);
  }
  return { answered: true, shown: [value, sigma, state].map((array) => Array.from(array, (n) => (Object.is(n, -0) ? "-0" : String(n))).join(" ")).join("; ") };
}
