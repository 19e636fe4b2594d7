import { expect, it } from "vitest";
import { seed } from "../../support/seed";
import { fuzz } from "./fuzz";

/** A minute in every run; longer by hand: `FUZZ_SECONDS=3600 SEED=7 npx vitest run --project unit tests/cells/fuzz`. */
const seconds = Number(process.env.FUZZ_SECONDS ?? 60);

it(
  `nothing that is typed breaks the engine, in ${seconds.toString()} seconds`,
  () => {
    const found = fuzz(seed, seconds);
    console.log(`${found.formulas} formulas, ${found.answered} of them answered; ${found.pages} pages, ${found.calculated} of them calculated`);
    // Both sorts of cases were met, or nothing was tried.
    expect(found.answered).toBeGreaterThan(found.formulas / 50);
    expect(found.answered).toBeLessThan(found.formulas);
    expect(found.calculated).toBeGreaterThan(0);
  },
  seconds * 1000 + 60_000,
);
