import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { namesUsed, parse, parseLines, renameInText, type Renamed, type Tree } from "../../../cells/language";
import { seed } from "../../support/seed";
import { errorOf } from "./scopes";

/** A tree written out with all its brackets. */
function written(tree: Tree): string {
  switch (tree.kind) {
    case "number":
      return String(tree.value);
    case "text":
      return `"${tree.text}"`;
    case "name":
      return tree.member === undefined ? tree.name : `${tree.name}.${tree.member}`;
    case "unary":
      return `(${tree.operator} ${written(tree.of)})`;
    case "binary":
      return `(${written(tree.left)} ${tree.operator} ${written(tree.right)})`;
    case "choice":
      return `(${written(tree.condition)} ? ${written(tree.yes)} : ${written(tree.no)})`;
    case "call":
      return `${tree.name}(${tree.args.map(written).join(", ")})`;
  }
}

describe("reading expressions", () => {
  it.each([
    ["-x^2", "(- (x ^ 2))"],
    ["2^-1", "(2 ^ (- 1))"],
    ["a^b^c", "(a ^ (b ^ c))"],
    ["a - b - c", "((a - b) - c)"],
    ["a+b*c-d/e", "((a + (b * c)) - (d / e))"],
    ["((a+b))*(-c)", "((a + b) * (- c))"],
    ["a ? b : c ? d : e", "(a ? b : (c ? d : e))"],
    ["a ? b ? c : d : e", "(a ? (b ? c : d) : e)"],
    ["not (a<b) and c > 1 or d", "(((not (a < b)) and (c > 1)) or d)"],
    ["f(a, min(b,c)) # comment", "f(a, min(b, c))"],
    ["ch.mg_si / `SiO2 (wt%)`", "(ch.mg_si / SiO2 (wt%))"],
    ["`a b`.`c d`", "a b.c d"],
    ["Group == 'CI' ", '(Group == "CI")'],
    [".5 + 1e-3 + 2.E2", "((0.5 + 0.001) + 200)"],
    ["Ñandú / β_2", "(Ñandú / β_2)"],
    ["(a<b) == c", "((a < b) == c)"],
    ["酸化物 + \u05d0", "(酸化物 + \u05d0)"],
  ])("reads %s", (text, tree) => {
    expect(written(parse(text))).toBe(tree);
  });

  it("brings names to one form of their letters", () => {
    expect(written(parse("e\u0301 + \u00e9"))).toBe("(\u00e9 + \u00e9)");
  });

  it("places operators in the gap between their operands", () => {
    const text = "(aa + (bb)) / ((c) * dd)";
    const tree = parse(text);
    expect(tree.kind === "binary" && text.slice(...tree.at)).toBe("/");
    expect(tree.kind === "binary" && tree.left.at).toEqual([4, 5]);
    expect(tree.kind === "binary" && tree.right.at).toEqual([19, 20]);
    expect(parse("1 + -(-(x))").at).toEqual([2, 3]);
  });

  it("reads a long sum, which is not a deep one", () => {
    const text = new Array<string>(1500).fill("a").join("+");
    expect(parse(text).kind).toBe("binary");
  });

  it("zips every operand onto its own place", () => {
    const leaf = fc.constantFrom("Mg", "Si", "1.5", "ch.al", "`x y`", "min(a, b)", "42");
    const expression = fc.letrec<{ any: string }>((tie) => ({
      any: fc.oneof(
        { maxDepth: 5 },
        leaf,
        fc.tuple(tie("any"), fc.constantFrom("+", " * ", "/", " ^"), tie("any")).map(([a, o, b]) => `(${a}${o}${b})`),
        tie("any").map((a) => `-${a}`),
      ),
    })).any;
    fc.assert(
      fc.property(expression, (text) => {
        const walk = (tree: Tree): void => {
          const source = text.slice(...tree.span);
          if (tree.kind === "number") expect(Number(source)).toBe(tree.value);
          if (tree.kind === "name") expect(source.replaceAll("`", "")).toBe(tree.member === undefined ? tree.name : `${tree.name}.${tree.member}`);
          if (tree.kind === "binary") {
            expect(text.slice(...tree.at)).toBe(tree.operator);
            walk(tree.left);
            walk(tree.right);
          }
          if (tree.kind === "unary") walk(tree.of);
          if (tree.kind === "call") tree.args.forEach(walk);
        };
        walk(parse(text));
      }),
      { seed, numRuns: 300 },
    );
  });
});

describe("refusals name the character", () => {
  it.each<[string, string, readonly [number, number]]>([
    ["", "empty", [0, 0]],
    ["# nothing", "empty", [0, 9]],
    ["a < b < c", "chained-comparison", [6, 7]],
    ["f(a b)", "missing-operator", [3, 5]],
    ["2 Mg", "missing-operator", [1, 4]],
    ["2Mg", "bad-number", [0, 3]],
    ["f(a,)", "missing-operand", [4, 5]],
    ["f(,a)", "missing-operand", [2, 3]],
    ["f()", "missing-operand", [1, 3]],
    ["()", "missing-operand", [0, 2]],
    ["f(x)(y)", "missing-operator", [4, 5]],
    ["(f)(y)", "missing-operator", [3, 4]],
    ["2 (x)", "missing-operator", [2, 3]],
    ["a +", "missing-operand", [2, 3]],
    ["* a", "missing-operand", [0, 1]],
    ["a ** b", "bad-character", [2, 4]],
    ["1e999", "bad-number", [0, 5]],
    ["0x1F", "bad-number", [0, 4]],
    ["0b11", "bad-number", [0, 4]],
    ["1.2.3", "bad-number", [0, 5]],
    ["a;b", "bad-character", [1, 2]],
    ["a /* b */", "bad-character", [2, 4]],
    ["a // b", "bad-character", [2, 4]],
    ["1,5", "bad-comma", [1, 2]],
    ["(a, b)", "bad-comma", [2, 3]],
    ["a = b", "bad-character", [2, 3]],
    ["!a", "bad-character", [0, 1]],
    ["a!", "bad-character", [1, 2]],
    ["a % b", "bad-character", [2, 3]],
    ["a || b", "bad-character", [2, 4]],
    ["a && b", "bad-character", [2, 4]],
    ["a − b", "bad-character", [2, 3]],
    ["a • b", "bad-character", [2, 3]],
    ["[a]", "bad-character", [0, 1]],
    ["a[0]", "bad-character", [1, 2]],
    ["a ? b", "bad-choice", [2, 3]],
    ["a : b", "bad-choice", [2, 3]],
    ["(a ? b) : c", "bad-choice", [3, 4]],
    ["((a)", "unbalanced", [0, 1]],
    ["a)", "unbalanced", [1, 2]],
    ["a.b.c", "bad-name", [0, 4]],
    ["a..b", "bad-name", [0, 2]],
    ["a .b", "bad-character", [2, 3]],
    ["a.1", "bad-name", [0, 2]],
    ["'abc", "unfinished-text", [0, 4]],
    ["`abc", "unfinished-name", [0, 1]],
    ["``", "bad-name", [0, 2]],
    ["'a\\n'", "bad-character", [0, 5]],
    ["a $ b", "bad-character", [2, 3]],
    ["a.f(x)", "unknown-function", [0, 3]],
    ["x not y", "missing-operator", [1, 5]],
  ])("refuses %s", (text, code, span) => {
    const error = errorOf(() => parse(text));
    expect([error.code, error.span]).toEqual([code, span]);
    expect(error.text).toMatch(/[.:]$|[a-z)]\.$/u);
  });
});

describe("lines of a formula block", () => {
  it("finds names, expressions and their places", () => {
    const text = '# head\nmg_si = Mg / Si # note\n\n  al = `Al#2` / Si\r\nci = Group == "a # b" ? 1 : 0\n';
    const { lines, errors } = parseLines(text);
    expect(errors).toEqual([]);
    expect(lines.map((line) => [line.name, line.text])).toEqual([
      ["mg_si", "Mg / Si"],
      ["al", "`Al#2` / Si"],
      ["ci", 'Group == "a # b" ? 1 : 0'],
    ]);
    for (const line of lines) {
      expect(text.slice(...line.expressionSpan)).toBe(line.text);
      expect(text.slice(...line.nameSpan)).toBe(line.name);
    }
  });

  it("reports faulty lines and keeps the others", () => {
    const { lines, errors } = parseLines("a = 1\na = 2\n= 3\nfoo\nmin = 2\nx == 3\n2b = 1\nand = 1\ny = a >= 3\nz =");
    expect(lines.map((line) => line.name)).toEqual(["a", "y"]);
    expect(errors.map((error) => error.code)).toEqual(["duplicate-name", "no-name", "no-name", "bad-name", "no-name", "bad-name", "bad-name", "empty"]);
    expect(errors[0]?.place.span).toEqual([6, 7]);
  });
});

describe("names in use", () => {
  it("finds them in faulty text too, and not functions or definitions", () => {
    expect(namesUsed("x = min(Mg, ch.al) / % `a b` + $ y # z\nq = x == 2").map((use) => [use.name, use.member])).toEqual([
      ["Mg", undefined],
      ["ch", "al"],
      ["a b", undefined],
      ["y", undefined],
      ["x", undefined],
    ]);
  });

  it("renames with backticks where they are needed and leaves everything else", () => {
    const rename = (name: string, member?: string): Renamed | undefined =>
      name === "ch" && member !== undefined ? { name: "cz", member } : name === "Mg" ? { name: "Mg total" } : undefined;
    expect(renameInText("a = Mg/ch.al  # Mg\nMg = mean( Mg )", rename)).toBe("a = `Mg total`/cz.al  # Mg\nMg = mean( `Mg total` )");
  });

  it("changes nothing when nothing is renamed", () => {
    fc.assert(
      fc.property(fc.string({ unit: "grapheme", maxLength: 200 }), (text) => renameInText(text, () => undefined) === text),
      { seed },
    );
  });
});
