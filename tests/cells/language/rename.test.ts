import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { evaluateExpression, isPlainName, namesUsed, renameInText, writeName } from "../../../cells/language";
import { seed } from "../../support/seed";
import { scopeOf, tableOf } from "./scopes";

/** Column names of every sort: plain, with signs that need backticks, of other alphabets. */
const names = fc.uniqueArray(
  fc.oneof(
    fc.stringMatching(/^[A-Za-z_][A-Za-z0-9_]{0,8}$/u),
    fc.constantFrom("SiO2 (wt%)", "2s", "Größe", "酸化物", "a.b", "Mg#", 'says "x"', "and", "β_2", "x y", "norm", "CI", "v0", "ch"),
  ),
  { minLength: 3, maxLength: 3 },
);

/** An expression over three columns and a block, as text that is made from their names, with comments and texts that hold them too. */
function textOf([a, b, c]: readonly string[], block: string): string {
  const [x, y, z, of] = [writeName(a ?? ""), writeName(b ?? ""), writeName(c ?? ""), writeName(block)];
  return `one = ${x} / ${y} + ${x}*2 # ${a ?? ""} stays\ntwo = max(${z}, ${of}.${x}) - ${of}.total / min(${y}, 3)\nthree = Group == "${(a ?? "").replaceAll('"', "")}" ? ${z} : ${x}`;
}

describe("renaming", () => {
  it("a column rewrites every use and nothing else, whatever its name needs", () => {
    fc.assert(
      fc.property(names, fc.oneof(fc.constantFrom("new", "new name", "MgO (wt%)", "鉱物", "x.y", "not"), fc.stringMatching(/^q[a-z]{4,9}$/u)), (from, to) => {
        fc.pre(!from.includes(to));
        const [a = "", b = "", c = ""] = from;
        const renamed = renameInText(textOf(from, "blk"), (name, member) => {
          if (member === undefined) return name === a ? { name: to } : undefined;
          return name === "blk" && member === a ? { name: "blk", member: to } : undefined;
        });
        const kept = textOf([to, b, c], "blk");
        // Comments and texts in quotation marks keep what they say.
        const bare = (text: string): string => text.replace(/== "[^"\n]*"/gu, '== ""').replace(/ # .* stays$/gmu, " #");
        expect(bare(renamed)).toBe(bare(kept));
        expect(namesUsed(renamed).some(({ name, member }) => name === a || member === a)).toBe(false);
        expect(renamed).toContain(`# ${a} stays`);
      }),
      { seed, numRuns: 300 },
    );
  });

  it("a block rewrites every name before a point, and no column of the same name", () => {
    fc.assert(
      fc.property(names, (from) => {
        const text = textOf(from, "blk");
        const renamed = renameInText(`${text}\nfour = blk`, (name, member) =>
          name === "blk" && member !== undefined ? { name: "chondrites", member } : undefined,
        );
        expect(renamed).toBe(`${textOf(from, "chondrites")}\nfour = blk`);
      }),
      { seed, numRuns: 200 },
    );
  });

  it("there and back gives the text again", () => {
    fc.assert(
      fc.property(names, (from) => {
        const [a = ""] = from;
        const text = textOf(from, "blk");
        const swap = (was: string, now: string) => (name: string, member?: string) => (member === undefined && name === was ? { name: now } : undefined);
        expect(renameInText(renameInText(text, swap(a, "quite new")), swap("quite new", a))).toBe(text);
      }),
      { seed, numRuns: 200 },
    );
  });

  it("leaves every digit as it was", () => {
    fc.assert(
      fc.property(names, fc.double({ min: 1, max: 9, noNaN: true }), (from, value) => {
        const [a = "", b = "", c = ""] = from;
        const [x, y, z] = [writeName(a), writeName(b), writeName(c)];
        const text = `(${x} + ${y}) / (${z} * ${x})`;
        const column = (v: number): { unit: string; value: number[]; sigma: number[] } => ({ unit: "1", value: [v], sigma: [0.1] });
        const before = evaluateExpression(scopeOf(tableOf({ [a]: column(value), [b]: column(2), [c]: column(3) })), text, { block: "r" });
        const renamed = renameInText(text, (name) => (name === a ? { name: "quite new" } : undefined));
        const after = evaluateExpression(scopeOf(tableOf({ "quite new": column(value), [b]: column(2), [c]: column(3) })), renamed, { block: "r" });
        expect([after.value[0], after.sigma[0]]).toEqual([before.value[0], before.sigma[0]]);
      }),
      { seed, numRuns: 200 },
    );
  });

  it("writes a name so that it is read as that name", () => {
    fc.assert(
      fc.property(fc.string({ unit: "grapheme", minLength: 1, maxLength: 30 }), (name) => {
        fc.pre(!/[`\n\r]/u.test(name) && name.normalize("NFC") === name && name.trim() === name);
        const written = writeName(name);
        expect(namesUsed(`1 + ${written} * 2`)).toEqual([{ name, span: [4, 4 + written.length] }]);
        if (isPlainName(name)) expect(written).toBe(name);
      }),
      { seed, numRuns: 500 },
    );
  });

  it("reads what stands around a fault, also where cutting at it leaves another", () => {
    expect(namesUsed("Mg / d.`unclosed + Si").map(({ name }) => name)).toEqual(["Mg", "unclosed", "Si"]);
    expect(namesUsed("虼d.`J\u0007 + Al").map(({ name }) => name)).toContain("Al");
  });
});
