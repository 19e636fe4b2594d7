import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { evaluateExpression } from "../../../cells/language";
import { seed } from "../../support/seed";
import { errorOf, scopeOf, tableOf } from "./scopes";

const scope = scopeOf(
  tableOf({
    MgO: { value: [38], sigma: [0.4] },
    SiO2: { value: [45], sigma: [0.4] },
    Chondrite_ratio: { unit: "1", value: [1] },
    T: { unit: "K", value: [1400] },
  }),
);
const refused = (text: string): ReturnType<typeof errorOf> => errorOf(() => evaluateExpression(scope, text, { block: "r" }));

describe("a limit is named with the number that exceeded it", () => {
  it("5,000 characters", () => {
    const error = refused(`Mg ${"+ Mg ".repeat(1000)}`.slice(0, 5000));
    expect([error.code, error.span]).toEqual(["too-long", [4000, 5000]]);
    expect(error.text).toBe("This expression has 5000 characters; at most 4000 are read. Split it into several lines.");
  });

  it("65 levels", () => {
    const error = refused(`${"(".repeat(65)}Mg${")".repeat(65)}`);
    expect(error.text).toContain("64");
    expect(evaluateExpression(scope, `${"(".repeat(60)}Mg${")".repeat(60)}`, { block: "r" }).rows).toBe(1);
  });
});

describe("what is unknown is refused in words, with a suggestion", () => {
  it.each<[string, string, readonly [number, number]]>([
    ["Mg + percent(20)", "Did you mean wtpct(number)?", [5, 12]],
    ["Mg + pct(20)", "Did you mean wtpct(number)?", [5, 8]],
    ["Mg + wtpc(20)", "Did you mean wtpct(number)?", [5, 9]],
    ["Mg + ppmw(20)", "Write ugg.", [5, 9]],
    ["as_percent(Mg)", "Did you mean as_wtpct(x)?", [0, 10]],
    ["as_wtpt(Mg)", "Did you mean as_wtpct(x)?", [0, 7]],
    ["T > celcius(1000) ? 1 : 0", "Did you mean celsius(number)?", [4, 11]],
    ["medain(Mg)", "Did you mean median(x)", [0, 6]],
    ["LOG10(Mg / Si)", "Did you mean log10(x)?", [0, 5]],
    ["log(Mg / Si)", "Write ln or log10.", [0, 3]],
    ["foo(Mg)", "To multiply, write *.", [0, 3]],
    ["2 * Chondrite_ratoi", "Did you mean Chondrite_ratio?", [4, 19]],
    ["sio2_x + 1", "The table ch has MgO, SiO2, Chondrite_ratio, T.", [0, 6]],
    ["CI * 2", "CI is a body", [0, 2]],
  ])("%s: %s", (text, hint, span) => {
    const error = refused(text);
    expect(error.text).toContain(hint);
    expect(error.span).toEqual(span);
  });
});

describe("places of errors", () => {
  /** A faulty piece, where in it the fault is, and its code. */
  const faults: readonly (readonly [piece: string, from: number, to: number, code: string])[] = [
    ["(Mg + T)", 4, 5, "unit-mismatch"],
    ["(Mg / Si + atoms(Mg) / atoms(Si))", 9, 10, "basis-mismatch"],
    ["Zz", 0, 2, "unknown-name"],
    ["log10(Mg)", 6, 8, "unit-mismatch"],
    ["nope(Mg)", 0, 4, "unknown-function"],
    ["norm(Mg / Si, XX)", 14, 16, "unknown-body"],
    ["(Mg $ Si)", 4, 5, "bad-character"],
    ["2Mg", 0, 3, "bad-number"],
    ["1.2.3", 0, 5, "bad-number"],
    ["`never closed", 0, 1, "unfinished-name"],
  ];
  const before = fc.array(fc.constantFrom("Mg / Si + ", "2 * ", "(Mg - Mg) / Si + ", "# note é\n", "1 + # 酸𐀀\n", "\n", "  ", "max(1, 2) - "), {
    maxLength: 8,
  });

  it("are the characters at fault, wherever the fault stands", () => {
    fc.assert(
      fc.property(before, fc.constantFrom(...faults), fc.nat({ max: 50 }), (pieces, [piece, from, to, code], offset) => {
        const prefix = pieces.join("");
        const text = prefix + piece;
        const error = errorOf(() => evaluateExpression(scope, text, { block: "r", offset }));
        expect([error.code, error.span]).toEqual([code, [offset + prefix.length + from, offset + prefix.length + to]]);
      }),
      { seed, numRuns: 500 },
    );
  });

  it("count letters outside the basic plane as the editor does", () => {
    const text = "`𐀀𐀀` * 0 + Zz";
    expect(refused(text).span).toEqual([0, 6]);
    expect(refused("1 # 𐀀\n + Zz").span).toEqual([10, 12]);
  });
});
