import { describe, expect, it } from "vitest";
import { resultsTable } from "../../../cells/page/resultsTable";
import { createEngine, readPageDocument } from "@/cells";
import { wholePage, wholeSources } from "../../support/wholePage";

describe("results for people, on the command line", () => {
  const engine = createEngine();
  for (const [file, text] of Object.entries(wholeSources())) engine.setSource(file, new TextEncoder().encode(text));
  const page = readPageDocument(JSON.parse(JSON.stringify(wholePage()).replaceAll("many.csv", "few.csv")));
  const results = engine.evaluate(page);
  const shown = resultsTable(page, results);

  it("name every block, its numbers with σ and bodies, and never NaN", () => {
    for (const block of page.blocks) expect(shown).toContain(block.id);
    const core = results.blocks.get("core");
    if (core?.kind !== "budget" || core.solved === undefined) throw new Error("the budget has no answer");
    expect(shown).toContain(core.solved.value.toPrecision(2).slice(0, 3));
    expect(shown).toContain("CI_PLJ14");
    expect(shown).not.toMatch(/NaN|undefined|\[object/u);
  });

  it("say what each block has to say", () => {
    for (const { problems } of results.blocks.values())
      for (const { text, severity } of problems) if (severity !== "note") expect(shown).toContain(text.slice(0, 60));
  });
});
