import { describe, expect, it } from "vitest";
import { compileOnComposition, complete, evaluateCondition, evaluateExpression, namesUsed, parseLines, renameInText, type Scope } from "../../cells/language";
import { bodyLookup } from "../../cells/species";
import { errorOf, scopeOf, tableOf } from "./language/scopes";

/**
 * Known escapes of expression languages, and known ways of using one up. Each must end in an error of ours with a place, and
 * none may reach a prototype, a global or the parser package's own calculating (CVE-2025-12735, CVE-2025-13204).
 */
const scope = scopeOf(tableOf({ MgO: { value: [38, 40], sigma: [0.4, 0.4] }, SiO2: { value: [45, 44], sigma: [0.4, 0.4] }, Group: ["A", "B"] }));
const evaluate = (text: string, over: Scope = scope): unknown => evaluateExpression(over, text, { block: "r" });

const inherited = [
  "__proto__",
  "constructor",
  "prototype",
  "toString",
  "valueOf",
  "hasOwnProperty",
  "isPrototypeOf",
  "__defineGetter__",
  "__lookupGetter__",
  "propertyIsEnumerable",
  "toLocaleString",
];
const globals = [
  "globalThis",
  "window",
  "self",
  "process",
  "require",
  "module",
  "Function",
  "eval",
  "Math",
  "Object",
  "Array",
  "Reflect",
  "Proxy",
  "Symbol",
  "WebAssembly",
  "document",
  "fetch",
  "import",
  "this",
  "arguments",
  "undefined",
  "null",
  "NaN",
  "Infinity",
  "true",
  "false",
  "PI",
  "E",
];
const packageFunctions = [
  "random",
  "fac",
  "hypot",
  "pyt",
  "pow",
  "atan2",
  "if",
  "gamma",
  "roundTo",
  "map",
  "fold",
  "filter",
  "indexOf",
  "join",
  "sum",
  "sin",
  "cos",
  "length",
  "cbrt",
  "sign",
  "round",
  "floor",
  "trunc",
  "expm1",
  "log2",
  "__proto__",
  "constructor",
  "toString",
  "valueOf",
  "hasOwnProperty",
];

describe("names of objects mean nothing", () => {
  it.each([...inherited, ...globals])("%s is an unknown name", (name) => {
    expect(errorOf(() => evaluate(name)).code).toBe("unknown-name");
    expect(errorOf(() => evaluate(`1 + \`${name}\``)).code).toBe("unknown-name");
    expect(errorOf(() => evaluate(`Mg / ${name}`)).span).toEqual([5, 5 + name.length]);
  });

  it.each([...inherited, ...globals])("%s is no member, block or body", (name) => {
    expect(errorOf(() => evaluate(`ch.${name}`)).code).toBe("unknown-name");
    expect(errorOf(() => evaluate(`${name}.${name}`)).code).toBe("unknown-name");
    expect(errorOf(() => evaluate(`at(Mg, ${name})`)).code).toBe("unknown-body");
    expect(errorOf(() => evaluate(`mean(Mg, "${name}")`)).code).toBe("unknown-class");
  });

  it.each(packageFunctions)("%s( ) is an unknown function", (name) => {
    expect(errorOf(() => evaluate(`${name}(1)`)).code).toBe("unknown-function");
    expect(errorOf(() => evaluate(`${name}(Mg, 1)`)).code).toBe("unknown-function");
  });

  it("also where a line or composition has them", () => {
    const lines = parseLines(inherited.map((name) => `${name} = 1`).join("\n"));
    expect(lines.errors).toEqual([]);
    expect(lines.lines.map((line) => line.name)).toEqual(inherited);
    const text = inherited.join(" + ");
    expect(renameInText(text, (name) => (name === "__proto__" ? { name: "constructor" } : undefined))).toContain("constructor + constructor");
    expect(namesUsed(text).length).toBe(inherited.length);
    for (const name of inherited) {
      expect(errorOf(() => compileOnComposition(name, { block: "b" }, bodyLookup({}))).code).toBe("unknown-name");
      const one = scopeOf(tableOf({ [name]: { unit: "1", value: [2] } }));
      expect(evaluateExpression(one, `\`${name}\` * 2`, { block: "r" }).value[0]).toBe(4);
      expect(complete(one, name, name.length).options.some((option) => option.label === name)).toBe(true);
    }
  });
});

describe("syntax that could escape is refused", () => {
  it.each([
    "x = 1",
    "f(x) = x",
    "(f(x) = x)(1)",
    "toString = 1",
    "__proto__.polluted = 1",
    "a.constructor.constructor('return process')()",
    'constructor.constructor("return 1")()',
    "''.constructor",
    "'a'['b']",
    "(1).constructor",
    "1..constructor",
    "[].map",
    "[1,2,3]",
    "{}",
    "x => x",
    "function(){}",
    "new Date",
    "`${1}`",
    "a;b",
    "a; __proto__",
    "a /* b */ + 1",
    "a // b",
    "'a' || 'b'",
    "a ?? b",
    "a?.b",
    "a in b",
    "typeof a",
    "void 0",
    "1, 2",
    "x!",
    "5!",
    "\u0000",
    "a\u2028b",
    "\u202ea",
    "#",
    "0x7fffffff",
    "0b1",
    "1_000",
    "1n",
    "'\\u0041'",
    "'unfinished",
    "\\u0041",
    "@import",
    "<script>alert(1)</script>",
    "{{constructor}}",
    "(a)(b)",
    "a(b)(c)",
    "min(a b)",
    "min(,)",
    "not",
    "and",
    "or",
    "-",
    "a -",
    "v0",
    "v1 + v2",
  ])("%s", (text) => {
    const error = errorOf(() => evaluate(text));
    expect(error.span).toBeDefined();
    expect(error.text.length).toBeGreaterThan(10);
    expect(Object.hasOwn(Object.prototype, "polluted")).toBe(false);
  });

  it("takes texts letter by letter and compares them alone", () => {
    expect([...evaluateCondition(scope, "Group == 'A'", { block: "r" })]).toEqual([1, 0]);
    for (const text of ["'A'", "'A' + 'B'", "'A' * 2", "-'A'", "exp('A')", "Mg ? 'A' : 'B'", "Mg == 'A'"])
      expect(errorOf(() => evaluate(text)).span).toBeDefined();
  });
});

describe("attacks on time and memory end quickly", () => {
  const attacks: readonly (readonly [string, string])[] = [
    ["a long text", "a".repeat(5000)],
    ["a huge text", "1+".repeat(500_000) + "1"],
    ["deep brackets", `${"(".repeat(1900)}1${")".repeat(1900)}`],
    ["deep calls", `${"abs(".repeat(900)}1${")".repeat(900)}`],
    ["unclosed brackets", "(".repeat(3999)],
    ["closing brackets", ")".repeat(3999)],
    ["a long run of signs", `${"-".repeat(3990)}1`],
    ["a long run of not", `${"not ".repeat(900)}1`],
    ["a tower of powers", new Array(900).fill("9").join("^")],
    ["nested choices", `${"1>0?".repeat(700)}1${":1".repeat(700)}`],
    ["mixed nesting", `${"-(".repeat(1300)}1${")".repeat(1300)}`],
    ["signs between brackets", `${"----------(".repeat(300)}1${")".repeat(300)}`],
    ["a long number", "9".repeat(3999)],
    ["a huge exponent", "1e99999999999"],
    ["many quotation marks", "'".repeat(3999)],
    ["many backticks", "`".repeat(3999)],
    ["many points", "a.".repeat(1999)],
    ["many commas", `min(${",".repeat(3900)})`],
    ["many arguments", `min(${new Array(1500).fill("1").join(",")})`],
    ["a chain of comparisons", new Array(900).fill("1").join("<")],
  ];

  it.each(attacks)("%s is refused", (_, text) => {
    const start = performance.now();
    const error = errorOf(() => evaluate(text));
    expect(error.span).toBeDefined();
    expect(performance.now() - start).toBeLessThan(500);
  });

  it.each<readonly [string, string]>([
    ["huge powers", "9^9^9^9"],
    ["a huge number", "1e308 * 10"],
    ["overflow", "exp(exp(exp(10)))"],
    ["huge exponents", "(1 + 1e-9)^1e300"],
    ["negative powers of nothing", "0^(-1)"],
  ])("%s come to no number, and quickly", (_, text) => {
    const result = evaluateExpression(scope, text, { block: "r" });
    expect(result.state[0]).not.toBe(0);
    expect(result.value[0]).toBeNaN();
  });

  it.each<readonly [string, string]>([
    ["a sum of two thousand terms", new Array(1990).fill("1").join("+")],
    ["a product of many columns", new Array(900).fill("Mg").join("*")],
    ["a long alternation", new Array(700).fill("Mg").join("/Si*")],
  ])("%s is calculated, or refused, in time", (_, text) => {
    const start = performance.now();
    try {
      evaluate(text.slice(0, 4000).replace(/[*/+]?[A-Za-z]?$/u, "") + (text.length > 4000 ? "1" : ""));
    } catch (error) {
      expect((error as Error).name).toBe("CellError");
    }
    expect(performance.now() - start).toBeLessThan(3000);
  });

  it("lines that double each other stay small", () => {
    const lines: Record<string, string> = { l0: "Mg / Si" };
    for (let i = 1; i < 60; i++) lines[`l${i}`] = `l${i - 1} + l${i - 1} * l${i - 1}`;
    const start = performance.now();
    evaluate("l59", scopeOf(scope.table, lines));
    expect(performance.now() - start).toBeLessThan(3000);
  });

  it("lines that use lines without end are refused", () => {
    const lines: Record<string, string> = { l0: "Mg / Si" };
    for (let i = 1; i < 2000; i++) lines[`l${i}`] = `l${i - 1} * 1.1`;
    expect(errorOf(() => evaluate("l1999", scopeOf(scope.table, lines))).code).toBe("lines-too-deep");
  });

  it("reading faulty text for its names takes time in proportion to its length", () => {
    const start = performance.now();
    expect(namesUsed(`${"$ ".repeat(25_000)}a`)).toHaveLength(1);
    expect(parseLines(`${"`".repeat(50_000)}\n${"a = ".repeat(10_000)}`).errors.length).toBeGreaterThan(0);
    complete(scope, `${"norm(".repeat(5000)}a, `, 25_003);
    // One line as long as a whole block may be, without the sign that would end the search.
    for (const one of ["a", "1+", "a.", "` ", " "]) expect(parseLines(one.repeat(100_000 / one.length)).lines.length).toBeLessThanOrEqual(1);
    expect(performance.now() - start).toBeLessThan(3000);
  });
});
