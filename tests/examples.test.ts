import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { createEngine, formatUncertain, hasErrors, readPageDocument, resultsJson, type Engine, type PageDocument, type PageResults } from "@/cells";

const examples = path.resolve(import.meta.dirname, "..", "examples");
const folders = readdirSync(examples, { withFileTypes: true })
  .filter((entry) => entry.isDirectory())
  .map((entry) => entry.name)
  .sort();

const read = (folder: string, file: string): string => readFileSync(path.join(examples, folder, file), "utf8");
/** Without its rules of thumb, whose figures are of other pages: tests/cells/facts.test.ts holds those. */
const readmeOf = (folder: string): string => read(folder, "README.md").split("\n## Rules of thumb")[0] ?? "";
const pageOf = (folder: string): PageDocument => readPageDocument(JSON.parse(read(folder, "page.json")));
const expectedOf = (folder: string): object => JSON.parse(read(folder, "expected.json"));
const filesOf = (page: PageDocument): string[] => [
  ...new Set(page.blocks.flatMap((block) => (block.kind === "data" && block.source !== undefined ? [block.source.file] : []))),
];

/** As scripts/evaluate.ts does it: sources under the names the page gives them. */
function engineFor(folder: string): Engine {
  const engine = createEngine();
  for (const file of filesOf(pageOf(folder))) engine.setSource(file, readFileSync(path.join(examples, folder, file)));
  return engine;
}

const asJson = (results: PageResults): unknown => JSON.parse(JSON.stringify(resultsJson(results)));

/** What stands at `line_ch.crossing.x` or `` core.report[`Al / Si`].miss `` among the expected blocks; lists are asked by name. */
function at(expected: object, where: string): unknown {
  let found: unknown = Reflect.get(expected, "blocks");
  for (const part of where.match(/\[[^\]]+\]|[^.[\]]+/gu) ?? []) {
    const key = part.replace(/^\[|\]$/gu, "");
    if (Array.isArray(found)) found = found.find((each) => [each.name, each.expression, each.body].includes(key)) ?? found[Number(key)];
    else if (typeof found === "object" && found !== null) found = Reflect.get(found, key);
    else return undefined;
  }
  return found;
}

interface Quoted {
  readonly where: string;
  readonly text: string;
}

/** The README's table of results: what, where in expected.json, value. */
function quotedIn(readme: string): Quoted[] {
  return [...readme.matchAll(/^\|[^|]+\|\s*`([^|]+)`\s*\|\s*([^|]+?)\s*\|$/gmu)].map(([, where = "", text = ""]) => ({ where, text }));
}

/** A number as a README may write it: to as many places as are quoted, or with its 1σ in concise form; of a trend, the value and the 1σ that go with its scatter. */
function asQuoted(value: unknown, text: string): string {
  const number = /^−?[\d.]+(?:\([\d.]+\))?/u.exec(text)?.[0] ?? "";
  const unit = text.slice(number.length);
  if (typeof value === "string") return value;
  if (typeof value === "number") return value.toFixed(number.split(".")[1]?.length ?? 0).replace("-", "−") + unit;
  const one = (each: unknown): unknown => (Array.isArray(each) ? each[0] : each);
  const { value: middle, sigma, valueWithScatter, sigmaWithScatter } = value as Readonly<Record<string, unknown>>;
  const pair = typeof sigmaWithScatter === "number" ? [valueWithScatter, sigmaWithScatter] : [one(middle), one(sigma)];
  return formatUncertain(Number(pair[0]), typeof pair[1] === "number" ? pair[1] : null) + unit;
}

it("has the three worked pages", () => {
  expect(folders).toEqual(["chondrites-and-mantle", "earth-three-explanations", "one-messy-table"]);
});

describe.each(folders)("the example %s", (folder) => {
  const results = engineFor(folder).evaluate(pageOf(folder));

  it("evaluates to exactly what expected.json says", () => {
    expect(asJson(results)).toEqual(expectedOf(folder));
  });

  it("gives the same to the last digit when its blocks stand in the opposite order", () => {
    const page = pageOf(folder);
    const turned = asJson(engineFor(folder).evaluate({ ...page, blocks: page.blocks.toReversed() }));
    expect(Reflect.get(turned as object, "blocks")).toEqual(Reflect.get(expectedOf(folder), "blocks"));
  });

  it("has no error on its page, so that the command exits with 0", () => {
    const errors = [...results.blocks.values()].flatMap((block) => block.problems.filter((problem) => problem.severity === "error"));
    expect(errors).toEqual([]);
    expect(hasErrors(results)).toBe(false);
  });

  it("exits with 1 once a block reads what is not there", () => {
    const page = pageOf(folder);
    const blocks = page.blocks.map((block) => (block.kind === "formula" ? { ...block, text: `${block.text}\nlost = not_there / Si` } : block));
    expect(hasErrors(engineFor(folder).evaluate({ ...page, blocks }))).toBe(true);
  });

  it("shows a value wherever a note quotes one", () => {
    const notes = [...results.blocks.values()].filter((block) => block.kind === "note");
    expect(notes.flatMap((note) => note.values).length).toBeGreaterThan(0);
    expect(notes.flatMap((note) => note.values.filter((value) => value.shown === null))).toEqual([]);
  });

  it("quotes in its README only what expected.json holds", () => {
    const expected = expectedOf(folder);
    const quoted = quotedIn(readmeOf(folder));
    expect(quoted.length).toBeGreaterThan(3);
    for (const { where, text } of quoted) expect({ where, text: asQuoted(at(expected, where), text) }).toEqual({ where, text });
  });

  it("has no number with a decimal point in its README that is neither a result nor in its files", () => {
    const page = pageOf(folder);
    const readme = readmeOf(folder);
    const known = [JSON.stringify(page), ...filesOf(page).map((file) => read(folder, file)), ...quotedIn(readme).map(({ text }) => text)].join("\n");
    const prose = readme.replace(/^\|.*\|$/gmu, "").replace(/`[^`]*`/gu, "");
    const unknown = (prose.match(/\d+\.\d+(?:\(\d+\))?/gu) ?? []).filter((number) => !known.includes(number));
    expect(unknown).toEqual([]);
  });

  it("says in README and on the page what is invented or from memory, and how it is run", () => {
    const readme = read(folder, "README.md");
    expect(readme).toContain(`npm run -s evaluate -- examples/${folder}/page.json`);
    expect(readme).toMatch(/invented|from memory/u);
    const notes = pageOf(folder).blocks.flatMap((block) => (block.kind === "note" ? [block.text] : []));
    expect(notes.join("\n")).toMatch(/invented|from memory/u);
    for (const file of filesOf(pageOf(folder))) expect(readme).toContain(`\`${file}\``);
  });
});

describe("published values among the examples", () => {
  it.each([
    ["chondrites-and-mantle", "group-means.csv", ",", /Wasson & Kallemeyn 1988/u],
    ["earth-three-explanations", "refractory-inclusions.csv", ";", /Grossman 1980/u],
  ])("%s names the source of every row of %s, and whether it was read", (folder, file, separator, source) => {
    const [header = "", ...rows] = read(folder, file).trim().split("\n");
    expect(header.split(separator).slice(-2)).toEqual([expect.stringMatching(/^(Source|Reference)$/u), "Checked"]);
    expect(rows.length).toBeGreaterThan(2);
    for (const row of rows) {
      expect(row).toMatch(source);
      expect(row).toMatch(/read in a copy of the source|from memory/u);
    }
    expect(read(folder, "README.md")).toMatch(source);
  });

  it("gives the published means exactly as the reference table has them", () => {
    const reference = readFileSync(path.resolve(examples, "..", "cells", "species", "reference", "chondrite-groups.csv"), "utf8");
    const rows = read("chondrites-and-mantle", "group-means.csv").trim().split("\n").slice(1);
    for (const row of rows) expect(reference).toContain(row.replace(/ mean,published mean,/u, ","));
  });
});
