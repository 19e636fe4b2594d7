import { describe, expect, it } from "vitest";
import { createEngine, readPageDocument, type Block, type Engine, type PageDocument } from "@/cells";
import { generator } from "../../support/generator";
import { resultsText } from "../../support/resultsText";
import { seed } from "../../support/seed";
import { wholePage, wholeSources } from "../../support/wholePage";

const EDITS = 1000;

function engineWith(files: readonly string[]): Engine {
  const engine = createEngine();
  for (const [file, text] of Object.entries(wholeSources())) if (files.includes(file)) engine.setSource(file, new TextEncoder().encode(text));
  return engine;
}

/** The whole page over its small tables only, so that a thousand evaluations are soon done. */
function smallPage(): PageDocument {
  return readPageDocument(JSON.parse(JSON.stringify(wholePage()).replaceAll("many.csv", "few.csv")));
}

type Change = (blocks: Block[], next: () => number) => void;
const pick = (blocks: readonly Block[], next: () => number): number => Math.floor(next() * blocks.length);

/** What people do to a page: to and fro, in any order, sense or nonsense. */
const changes: readonly Change[] = [
  (blocks, next) => void blocks.splice(pick(blocks, next), 1),
  (blocks, next) => {
    const [moved] = blocks.splice(pick(blocks, next), 1);
    if (moved !== undefined) blocks.splice(pick(blocks, next), 0, moved);
  },
  (blocks, next) => {
    const i = pick(blocks, next);
    const block = blocks[i];
    if (block?.kind !== "formula") return;
    const words = ["Mg / Si", "Al / Si", "2 *", "norm(La / Sm, CI)", ")", "mean(Mg, Group)", "# half a", "log10(Ca)", "t.slope"];
    blocks[i] = { ...block, text: `${block.text}\nnew_${String(Math.floor(next() * 5))} = ${words[Math.floor(next() * words.length)] ?? ""}` };
  },
  (blocks, next) => {
    const i = pick(blocks, next);
    const block = blocks[i];
    if (block?.kind === "trend") blocks[i] = { ...block, where: next() < 0.5 ? 'Group == "dunite"' : 'Group != "dunite"' };
    if (block?.kind === "data" && block.stack === undefined)
      blocks[i] = { ...block, setAside: [{ row: 1 + Math.floor(next() * 50), reason: "tried without it" }] };
    if (block?.kind === "budget") blocks[i] = { ...block, report: ["Mg / Si", "Ca / Al", "Fe / Mg"].slice(0, 1 + Math.floor(next() * 3)) };
  },
  (blocks, next) => {
    const i = pick(blocks, next);
    const block = blocks[i];
    if (block !== undefined) blocks[i] = { ...block, id: next() < 0.5 ? `${block.id}x` : block.id.replace(/x$/u, "") } as Block;
  },
];

describe("results depend on the page alone", () => {
  it(`after ${String(EDITS)} random edits that lead back to the same page, to the bit`, () => {
    const next = generator(seed);
    const page = smallPage();
    const fresh = resultsText(engineWith(["few.csv", "other.csv"]).evaluate(page));
    const engine = engineWith(["few.csv", "other.csv"]);
    let blocks = [...page.blocks];
    let evaluated = 0;
    for (let n = 0; n < EDITS; n++) {
      // Now and then all is taken back, so that edits do not end in an empty page.
      if (blocks.length < 6 || next() < 0.05) blocks = [...page.blocks];
      else changes[Math.floor(next() * changes.length)]?.(blocks, next);
      const handles = new Set(blocks.map((block) => block.id));
      if (handles.size !== blocks.length) blocks = [...page.blocks];
      engine.evaluate({ ...page, blocks });
      evaluated++;
    }
    expect(evaluated).toBe(EDITS);
    // The blocks are new objects, as a live page makes them: nothing may hang on the identity of what came before.
    expect(resultsText(engine.evaluate(smallPage()))).toBe(fresh);
  }, 180_000);
});
