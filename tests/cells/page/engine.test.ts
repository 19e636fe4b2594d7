import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import fc from "fast-check";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createEngine, pageJsonSchema, resultsJson, type PageDocument, type PageResults } from "@/cells";
import { seed } from "../../support/seed";
import { csv, data, errorsOf, evaluate, freshEngine, lineOf, pageOf, ratios, resultOf, trend } from "./pages";

const root = path.resolve(import.meta.dirname, "../../..");

/** Everything in results to the bit: numbers that print alike may differ, and NaN must equal NaN. */
function bitsOf(value: unknown): unknown {
  if (typeof value === "number") return Number.isNaN(value) ? "NaN" : Object.is(value, -0) ? "-0" : value;
  if (value instanceof Float64Array) return Array.from(new BigUint64Array(value.slice().buffer), (bits) => bits.toString(16));
  if (ArrayBuffer.isView(value)) return Array.from(value as Uint8Array);
  if (value instanceof Map) return [...value].map(([key, each]) => [key, bitsOf(each)]);
  if (Array.isArray(value)) return value.map(bitsOf);
  if (typeof value === "object" && value !== null) return Object.fromEntries(Object.entries(value).map(([key, each]) => [key, bitsOf(each)]));
  return value;
}

const budget = {
  id: "b",
  kind: "budget",
  start: { body: "BSE" },
  steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount: "solve" }],
  target: { expression: "Mg / Si", equals: { body: "CI" } },
  report: ["Mg / Si", "Al / Si"],
};
const plot = {
  id: "p",
  kind: "plot",
  plot: "scatter",
  drawn: [{ data: "ch", x: "mg_si", y: "al_si" }, { trend: "t" }, { crossing: "t" }, { budget: "b" }, { bodies: ["CI", "BSE"] }],
};
const note = { id: "n", kind: "note", text: "Slope {{t.slope}}, silicon {{b}}, mean {{m}}." };
const whole = [
  data(),
  ratios,
  { id: "q", kind: "formula", data: "ch", text: "m = mean(mg_si)\nresidual = al_si - t.intercept - t.slope * mg_si" },
  trend("t", "CV", { crossWith: "t2" }),
  trend("t2", "CO"),
  budget,
  plot,
  note,
];

type Block = Record<string, unknown> & { id: string };

/** One edit of a page; those that do not fit the page as it is now leave it. */
const edit = fc.oneof(
  fc.record({
    what: fc.constant("formula" as const),
    text: fc.constantFrom(ratios.text, "mg_si = Mg / Si", "mg_si = Mg / Si\nal_si = norm(Al / Si, CI)", "mg_si = mg_si", "al_si = ("),
  }),
  fc.record({ what: fc.constant("aside" as const), row: fc.integer({ min: 1, max: 10 }) }),
  fc.record({ what: fc.constant("amend" as const), row: fc.integer({ min: 1, max: 9 }), value: fc.constantFrom("24.0", "25.5", "<0.5", "", "x") }),
  fc.record({ what: fc.constant("method" as const), method: fc.constantFrom("york", "ordinary least squares", "theil-sen") }),
  fc.record({ what: fc.constant("where" as const), where: fc.constantFrom('Group == "CV"', 'Group != "XX"', "MgO > wtpct(24)") }),
  fc.record({ what: fc.constant("alias" as const), id: fc.constantFrom("CI_PLJ14", "CI_WK88", "NOWHERE") }),
  fc.record({ what: fc.constant("remove" as const), id: fc.constantFrom("r", "q", "t", "t2", "b", "ch", "p") }),
  fc.record({ what: fc.constant("restore" as const) }),
  fc.record({ what: fc.constant("move" as const), from: fc.nat(7), to: fc.nat(7) }),
);
type Edit = typeof edit extends fc.Arbitrary<infer T> ? T : never;

interface State {
  blocks: Block[];
  bodies: Record<string, string>;
}

function applied({ blocks, bodies }: State, change: Edit): State {
  const change1 = (id: string, make: (block: Block) => Block): State => ({ bodies, blocks: blocks.map((block) => (block.id === id ? make(block) : block)) });
  const csvRows = csv
    .trim()
    .split("\n")
    .map((row) => row.split(","));
  switch (change.what) {
    case "formula":
      return change1("r", (block) => ({ ...block, text: change.text }));
    case "aside":
      return change1("ch", (block) => ({ ...block, setAside: [{ row: change.row, reason: "an edit" }] }));
    case "amend":
      return change1("ch", (block) => ({
        ...block,
        amendments: [
          {
            row: change.row,
            sample: csvRows[change.row]?.[0] ?? "",
            column: "MgO (wt%)",
            was: csvRows[change.row]?.[2] ?? "",
            value: change.value,
            reason: "an edit",
          },
        ],
      }));
    case "method":
      return change1("t", (block) => ({ ...block, method: change.method }));
    case "where":
      return change1("t2", (block) => ({ ...block, where: change.where }));
    case "alias":
      return { blocks, bodies: { ...bodies, CI: change.id } };
    case "remove":
      return { bodies, blocks: blocks.filter(({ id }) => id !== change.id) };
    case "restore":
      return { bodies, blocks: [...blocks, ...(whole as Block[]).filter(({ id }) => blocks.every((block) => block.id !== id))] };
    case "move": {
      const moved = blocks[change.from % Math.max(1, blocks.length)];
      if (moved === undefined) return { blocks, bodies };
      const others = blocks.filter((block) => block !== moved);
      return { bodies, blocks: [...others.slice(0, change.to), moved, ...others.slice(change.to)] };
    }
  }
}

describe("any editing history", () => {
  it("equals a fresh evaluation, to the bit", () => {
    fc.assert(
      fc.property(fc.array(edit, { minLength: 2, maxLength: 6 }), (edits) => {
        const engine = freshEngine();
        let state: State = { blocks: whole as Block[], bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" } };
        engine.evaluate(pageOf(state.blocks, state.bodies));
        let last: { page: PageDocument; results: PageResults } | undefined;
        for (const change of edits) {
          state = applied(state, change);
          const page = pageOf(state.blocks, state.bodies);
          last = { page, results: engine.evaluate(page) };
        }
        if (last === undefined) return;
        expect(bitsOf(last.results)).toEqual(bitsOf(freshEngine().evaluate(last.page)));
      }),
      { seed, numRuns: 15 },
    );
  });

  it("shows in no digit however the blocks are ordered", () => {
    const forwards = freshEngine().evaluate(pageOf(whole));
    const backwards = freshEngine().evaluate(pageOf([...whole].reverse()));
    for (const [handle, result] of forwards.blocks) expect(bitsOf(backwards.blocks.get(handle))).toEqual(bitsOf(result));
  });
});

describe("what did not change", () => {
  it("keeps its identical result object", () => {
    const engine = freshEngine();
    const before = engine.evaluate(pageOf(whole));
    const same = engine.evaluate(pageOf(whole));
    for (const [handle, result] of before.blocks) expect(same.blocks.get(handle)).toBe(result);
    const edited = engine.evaluate(pageOf(whole.map((block) => (block === note ? { ...note, text: "Slope {{t.slope}}." } : block))));
    for (const [handle, result] of before.blocks) {
      if (handle === "n") expect(edited.blocks.get(handle)).not.toBe(result);
      else expect(edited.blocks.get(handle)).toBe(result);
    }
  });

  it("is only what does not lean on the edit", () => {
    const engine = freshEngine();
    const before = engine.evaluate(pageOf(whole));
    const after = engine.evaluate(pageOf(whole.map((block) => (block === ratios ? { ...ratios, text: `${ratios.text}\nextra = Mg / Al` } : block))));
    for (const handle of ["ch", "t", "t2", "b"]) expect(after.blocks.get(handle)).toBe(before.blocks.get(handle));
    expect(after.blocks.get("r")).not.toBe(before.blocks.get("r"));
  });

  it("is calculated anew where its source's bytes are others", () => {
    const engine = freshEngine();
    const before = engine.evaluate(pageOf([data(), ratios, budget]));
    engine.setSource("ch.csv", new TextEncoder().encode(csv.replace("24.1", "28.1")));
    const after = engine.evaluate(pageOf([data(), ratios, budget]));
    expect(lineOf(after, "mg_si").value[0]).toBeCloseTo(((lineOf(before, "mg_si").value[0] ?? 0) * 28.1) / 24.1, 12);
    expect(after.blocks.get("b")).toBe(before.blocks.get("b"));
  });
});

describe("what is wrong with one block", () => {
  it("stays with it: dangling handles", () => {
    const results = evaluate(
      data(),
      ratios,
      { ...trend("t", "CV"), data: "gone" },
      { ...trend("t3", "CV"), crossWith: "gone" },
      { ...plot, drawn: [{ data: "ch", x: "mg_si", y: "al_si" }, { trend: "gone" }, { data: "nowhere", x: "mg_si", y: "al_si" }] },
    );
    expect(errorsOf(results, "t")).toMatchObject([{ code: "no-such-block", field: "data" }]);
    expect(errorsOf(results, "t3")).toMatchObject([{ code: "no-such-block", field: "crossWith" }]);
    expect(resultOf(results, "t3", "trend").ok).toBe(true);
    expect(errorsOf(results, "p").map(({ code, field }) => [code, field])).toEqual([
      ["no-such-block", "drawn[1].trend"],
      ["no-such-block", "drawn[2].data"],
    ]);
    expect(resultOf(results, "p", "plot").drawn).toBe(9);
    expect(errorsOf(results, "r")).toEqual([]);
  });

  it("stays with it: circles", () => {
    const results = evaluate(
      data(),
      { ...ratios, text: "a = b + 1\nb = a\nmg_si = Mg / Si" },
      { id: "s1", kind: "data", stack: ["s2"] },
      { id: "s2", kind: "data", stack: ["s1"] },
      { id: "f", kind: "formula", data: "s1", text: "x = Mg / Si" },
    );
    expect(errorsOf(results, "r").map(({ code }) => code)).toEqual(["circle", "circle"]);
    expect(errorsOf(results, "r")[0]?.text).toContain("a → b → a");
    expect(lineOf(results, "mg_si").value[0]).toBeGreaterThan(0.9);
    for (const handle of ["s1", "s2"]) expect(errorsOf(results, handle)).toMatchObject([{ code: "circle" }]);
    expect(errorsOf(results, "f").length).toBeGreaterThan(0);
  });

  it("stays with it: a trend whose line leans on its own slope", () => {
    const results = evaluate(data(), { ...ratios, text: "mg_si = Mg / Si\nal_si = Al / Si\nodd = al_si * t.slope" }, { ...trend("t", "CV"), y: "odd" });
    const codes = [...errorsOf(results, "t"), ...errorsOf(results, "r")].map(({ code }) => code);
    expect(codes).toContain("circle");
    expect(Number.isFinite(lineOf(results, "mg_si").value[0])).toBe(true);
  });

  it("stays with it: a source that is not there", () => {
    const results = createEngine().evaluate(pageOf([data(), ratios, budget]));
    expect(errorsOf(results, "ch").length).toBeGreaterThan(0);
    expect(errorsOf(results, "r").length).toBeGreaterThan(0);
    expect(resultOf(results, "b", "budget").solved?.value).toBeGreaterThan(0);
  });

  it("names a body that nobody knows", () => {
    const results = freshEngine().evaluate(
      pageOf([data(), { ...ratios, text: "n = norm(Mg / Si, CX)" }, { ...budget, start: { body: "CX" } }], { CI: "CI_PLJ14" }),
    );
    for (const handle of ["r", "b"]) {
      expect(errorsOf(results, handle)[0]?.code).toMatch(/^(?:unknown|no-such)-body$/);
      expect(errorsOf(results, handle)[0]?.text).toContain("CX");
    }
    expect(results.bodies).toEqual({ CI: "CI_PLJ14" });
  });

  it("uses an alias that leads nowhere as an unknown body", () => {
    const results = freshEngine().evaluate(pageOf([data(), { ...ratios, text: "n = norm(Mg / Si, CI)" }], { CI: "CI_NOBODY" }));
    expect(errorsOf(results, "r")).toMatchObject([{ code: "unknown-body" }]);
    expect(results.bodies).toEqual({});
  });
});

describe("results as JSON", () => {
  it("never hold NaN, and null where there is no number", () => {
    const page = pageOf([...whole, { id: "ca", kind: "formula", data: "ch", text: "c = Ca / Mg\nlog = log10(Mg / Si - 0.9 * (Si / Si))" }]);
    const json = resultsJson(freshEngine().evaluate(page));
    const walk = (value: unknown, at: string): void => {
      if (typeof value === "number") expect(Number.isFinite(value), at).toBe(true);
      else if (typeof value === "object" && value !== null) {
        expect(ArrayBuffer.isView(value), `${at} is a list`).toBe(false);
        for (const [key, each] of Object.entries(value)) walk(each, `${at}.${key}`);
      }
    };
    walk(json, "results");
    expect(JSON.parse(JSON.stringify(json))).toEqual(json);
    expect(JSON.stringify(json)).not.toContain("NaN");
    expect(json).toMatchObject({
      format: "cotectic-results/1",
      bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" },
      blocks: { ca: { lines: [{ name: "c", states: { "below detection": 1, missing: 1 } }, { name: "log" }] } },
    });
    const { ca } = (json as { blocks: Record<string, { lines: { value: unknown[]; state: string[] }[] }> }).blocks;
    expect(ca?.lines[0]?.value[6]).toBeNull();
    expect(ca?.lines[0]?.state[6]).toBe("below detection");
  });
});

describe("the command line", () => {
  let folder = "";
  beforeAll(() => {
    folder = mkdtempSync(path.join(tmpdir(), "cotectic-page-"));
    writeFileSync(path.join(folder, "ch.csv"), csv);
    const write = (name: string, page: unknown): void => writeFileSync(path.join(folder, name), typeof page === "string" ? page : JSON.stringify(page));
    write("good.json", pageOf([data(), ratios]));
    write("faulty.json", pageOf([data(), ratios, trend("t", "nobody")]));
    write("unreadable.json", { ...pageOf([data()]), blocks: [{ ...ratios, leaveout: [] }] });
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  const run = (name: string): { code: number | null; out: string; err: string } => {
    const { status, stdout, stderr } = spawnSync("npx", ["tsx", "scripts/evaluate.ts", path.join(folder, name)], { cwd: root, encoding: "utf8" });
    return { code: status, out: stdout, err: stderr };
  };

  it("exits with 0 and prints one JSON object where nothing is wrong", () => {
    const { code, out, err } = run("good.json");
    expect(err).toBe("");
    expect(code).toBe(0);
    expect(JSON.parse(out)).toEqual(resultsJson(freshEngine().evaluate(pageOf([data(), ratios]))));
  });

  it("exits with 1 and prints the results where a block has a problem", () => {
    const { code, out } = run("faulty.json");
    expect(code).toBe(1);
    expect(JSON.parse(out)).toMatchObject({ blocks: { t: { n: 0, problems: [{ severity: "error" }] } } });
  });

  it("exits with 2 and one line that names block and key where the page cannot be read", () => {
    const { code, out, err } = run("unreadable.json");
    expect(code).toBe(2);
    expect(out).toBe("");
    expect(err).toBe('block r: unknown key "leaveout".\n');
  });
});

describe("the JSON Schema of the page document", () => {
  it("is the one that npm run schema wrote", () => {
    const written: unknown = JSON.parse(readFileSync(path.join(root, "examples/page.schema.json"), "utf8"));
    expect(written).toEqual(JSON.parse(JSON.stringify(pageJsonSchema())));
  });
});
