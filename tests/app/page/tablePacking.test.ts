import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { packTable, packTexts, unpackTable, unpackTexts } from "@/app/_page/tablePacking";
import { copyForTransfer } from "@/app/_page/transfer";
import { seed } from "@/tests/support/seed";
import { exampleTable } from "./table";

describe("tables on their way to the page", () => {
  it("give back every text, whatever is in it", () => {
    fc.assert(
      fc.property(fc.array(fc.string({ unit: "grapheme" })), (texts) => {
        expect(unpackTexts(packTexts(texts))).toEqual(texts);
      }),
      { seed },
    );
  });

  it("arrive as they were sent", () => {
    const table = exampleTable();
    const arrived = unpackTable(structuredClone(packTable(table)));
    expect(arrived.samples).toEqual(table.samples);
    expect(arrived.classes).toEqual(table.classes);
    expect(arrived.origins).toEqual(table.origins);
    expect(JSON.parse(JSON.stringify(arrived))).toEqual(JSON.parse(JSON.stringify(table)));
    expect(arrived.samples).toBe(arrived.samples);
  });

  it("leave the engine's own arrays alone", () => {
    const sent = { value: Float64Array.of(1, 2), inside: [{ state: Uint8Array.of(3) }], words: ["a"], nothing: null };
    const { copy, transfer } = copyForTransfer(sent);
    expect(copy).toEqual(sent);
    expect(copy.value).not.toBe(sent.value);
    expect(transfer).toHaveLength(2);
    structuredClone(copy, { transfer });
    expect(sent.value[1]).toBe(2);
  });
});
