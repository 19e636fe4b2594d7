import { describe, expect, it } from "vitest";
import { CellError } from "../../../cells/errors";
import { complete, evaluateExpression, functions, helpFor, type Completion, type Scope } from "../../../cells/language";
import { listBodies } from "../../../cells/species";
import { scopeOf, tableOf } from "./scopes";

const table = tableOf({
  MgO: { value: [38], sigma: [0.4] },
  SiO2: { value: [45], sigma: [0.4] },
  La: { unit: "µg/g", value: [0.6] },
  T: { unit: "°C", value: [1200] },
  "Al2O3 (raw)": { species: "Al2O3", value: [4] },
  Group: ["CI"],
});
const scope: Scope = {
  ...scopeOf(table),
  offers: () => [
    { text: "r.mg_si", kind: "line", unit: "1", help: "mg_si of r" },
    { text: "t.slope", kind: "common", unit: "1" },
  ],
};
const offered = (text: string, over: Scope = scope): readonly Completion[] => complete(over, text, text.length).options;
const find = (text: string, label: string): Completion | undefined => offered(text).find((option) => option.label === label);

/** The code of the error that an expression ends in, "none" where it has a value. */
function codeOf(text: string): string {
  try {
    evaluateExpression(scope, text, { block: "r" });
    return "none";
  } catch (error) {
    return error instanceof CellError ? error.code : String(error);
  }
}

describe("completion", () => {
  it("offers every column with its unit, and text columns as such", () => {
    const columns = offered("").filter(({ kind }) => kind === "column");
    expect(columns.map(({ label, detail }) => [label, detail])).toEqual([
      ["MgO", "wt%"],
      ["SiO2", "wt%"],
      ["La", "µg/g"],
      ["T", "°C"],
      ["Al2O3 (raw)", "wt%"],
      ["Group", "text"],
    ]);
  });

  it("offers the elements that columns give, with their unit and conversion", () => {
    expect(find("", "Mg")).toEqual({ label: "Mg", insert: "Mg", kind: "species", detail: "wt%", help: "Mg = MgO × 0.603042" });
    expect(find("", "Al")).toMatchObject({ kind: "species", detail: "wt%" });
    expect(
      offered("")
        .filter(({ kind }) => kind === "species")
        .map(({ label }) => label),
    ).toEqual(["Mg", "Si", "Al"]);
  });

  it("offers every function with its form, and every body with what it is", () => {
    for (const { name, form } of functions) expect(find(name, name)).toMatchObject({ insert: `${name}(`, detail: form });
    for (const { id, what } of listBodies()) expect(find("norm(Mg, ", id)).toMatchObject({ kind: "body", detail: what });
    expect(offered("norm(Mg / Si, ").every(({ kind }) => kind === "body")).toBe(true);
    expect(find("at(min(Mg, Si), CI_M", "CI_MS95")?.help).toContain("from memory");
    expect(helpFor("norm")?.form).toBe("norm(expression, BODY)");
    expect(helpFor("constructor")).toBeUndefined();
  });

  it("offers lines and results of other blocks, with their unit", () => {
    expect(find("r.", "r.mg_si")).toMatchObject({ kind: "line", detail: "1", insert: "r.mg_si" });
    expect(find("t.sl", "t.slope")).toMatchObject({ kind: "result", detail: "1" });
    expect(complete(scope, "2 * r.mg", 8).from).toBe(4);
  });

  it("leaves nothing to guess: what is offered, written, means something", () => {
    for (const option of offered("").filter(({ kind }) => kind === "column" || kind === "species")) {
      if (option.label === "Group") continue;
      expect(evaluateExpression(scope, option.insert, { block: "r" }).unit.symbol).toBe(option.detail);
    }
    // Some bodies give no Mg/Si, and say so; each is known by the name offered.
    for (const { insert } of offered("at(Mg / Si, ")) expect(codeOf(`at(Mg / Si, ${insert})`)).toMatch(/^(?:none|not-in-body|not-on-body)$/u);
  });

  it("begins at what was typed, in any line, with capitals or without", () => {
    expect(complete(scope, "a = 1\nb = 2 * mg", 16)).toMatchObject({ from: 14 });
    expect(offered("mg").map(({ label }) => label)).toContain("MgO");
    expect(offered("`Al2").map(({ insert }) => insert)).toEqual(["`Al2O3 (raw)`"]);
    expect(offered("zzz")).toEqual([]);
  });

  it("offers functions and bodies where there is no table", () => {
    const none = scopeOf(null);
    expect(new Set(offered("", none).map(({ kind }) => kind))).toEqual(new Set(["function", "body"]));
  });
});
