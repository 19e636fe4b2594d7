import { describe, expect, it } from "vitest";
import type { LineResult } from "@/cells";
import { lineOf, nodesOf, pageOf, resultOf } from "../cells/page/pages";
import { engineOver, evaluateTable, Nearness, numberColumns, recorded } from "./recorded";

type Summary = Readonly<Record<"mean" | "median" | "sd" | "se" | "sigma median" | "sigma sd", number>>;
type Weighted = Readonly<Record<"value" | "internal" | "external" | "mswd", number>>;

interface Table {
  readonly id: string;
  readonly given: {
    readonly class: readonly string[];
    readonly a: readonly number[];
    readonly "sigma a": readonly number[];
    readonly b: readonly number[];
    readonly "sigma b": readonly number[];
  };
  readonly a: Summary;
  readonly "weighted a": Weighted;
  readonly "ratio of means": { readonly value: number; readonly sigma: number };
  readonly "by class": Readonly<Record<string, Summary & { readonly weighted: Weighted }>>;
}

interface Certified {
  readonly id: string;
  readonly given: readonly number[];
  readonly certified: { readonly mean: number; readonly sd: number };
}

const all = recorded<Table | Certified>("means");
const tables = all.filter((each): each is Table => !("certified" in each));
const nist = all.filter((each): each is Certified => "certified" in each);

describe("means and deviations", () => {
  it("are NIST's certified ones: NumAcc1 exactly, NumAcc2 to 1e-13, NumAcc3 to what doubles of a million ± 0.1 hold", () => {
    // A decimal like 1000000.1 is off by up to 6e-11 as a double, which is 6e-10 of a deviation of 0.1.
    const allowed: Readonly<Record<string, readonly [mean: number, sd: number]>> = {
      "NIST NumAcc1": [0, 0],
      "NIST NumAcc2": [1e-13, 1e-13],
      "NIST NumAcc3": [1e-14, 1e-9],
    };
    expect(nist).toHaveLength(3);
    for (const { id, given, certified } of nist) {
      const columns = numberColumns({ x: null });
      const results = evaluateTable({ x: given }, [
        { id: "d", kind: "data", source: { file: "given.csv" }, columns },
        { id: "r", kind: "formula", data: "d", text: "m = mean(x)\ns = sd(x)" },
      ]);
      const [mean = 0, sd = 0] = allowed[id] ?? [];
      const apart = (name: string, value: number): number => Math.abs((lineOf(results, name).value[0] ?? Number.NaN) / value - 1);
      expect(apart("m", certified.mean), id).toBeLessThanOrEqual(mean);
      expect(apart("s", certified.sd), id).toBeLessThanOrEqual(sd);
    }
  });

  const text = [
    "mean(a)",
    "median(a)",
    "sd(a)",
    "se(a)",
    "wmean(a)",
    "mean(a) / mean(b)",
    "mean(a, Group)",
    "median(a, Group)",
    "sd(a, Group)",
    "wmean(a, Group)",
  ]
    .map((expression, i) => `l${i} = ${expression}`)
    .join("\n");
  const evaluated = tables.map(({ given }) => {
    const columns = [{ header: "class", name: "Group", role: "class" }, ...numberColumns({ a: "sigma a", b: "sigma b" })];
    const engine = engineOver(given);
    const results = engine.evaluate(
      pageOf(
        [
          { id: "d", kind: "data", source: { file: "given.csv" }, columns },
          { id: "r", kind: "formula", data: "d", text },
        ],
        {},
      ),
    );
    return { engine, results };
  });
  const line = (table: number, place: number): LineResult => {
    const known = evaluated[table];
    const found = known === undefined ? undefined : resultOf(known.results, "r", "formula").lines[place];
    if (found?.ok !== true) throw new Error(`line ${place} of table ${table + 1} was not calculated`);
    return found;
  };

  it("and their σ are numpy's to 1e-12, over all samples (scripts/reference/means.py)", () => {
    const near = new Nearness();
    tables.forEach(({ id, a }, i) => {
      const pairs: [number, number, number][] = [
        [0, a.mean, a.se],
        [1, a.median, a["sigma median"]],
        [2, a.sd, a["sigma sd"]],
        [3, a.se, (a["sigma sd"] * a.se) / a.sd],
      ];
      for (const [place, value, sigma] of pairs) {
        near.relative("value", `${id}, line ${place}`, line(i, place).value[0], value, 1e-12);
        near.relative("σ", `${id}, line ${place}`, line(i, place).sigma[0], sigma, 1e-12);
      }
    });
    near.hold();
  });

  it("class by class too", () => {
    const near = new Nearness();
    tables.forEach((table, i) => {
      expect(line(i, 6).byClass).toEqual(Object.keys(table["by class"]));
      Object.entries(table["by class"]).forEach(([name, known], place) => {
        const at = `${table.id}, ${name}`;
        near.relative("mean", at, line(i, 6).value[place], known.mean, 1e-12);
        near.relative("σ of mean", at, line(i, 6).sigma[place], known.se, 1e-12);
        near.relative("median", at, line(i, 7).value[place], known.median, 1e-12);
        near.relative("sd", at, line(i, 8).value[place], known.sd, 1e-12);
        near.relative("wmean", at, line(i, 9).value[place], known.weighted.value, 1e-12);
        near.relative("σ of wmean", at, line(i, 9).sigma[place], known.weighted.internal, 1e-12);
      });
    });
    near.hold();
  });

  it("know what they share: the ratio of two means has numpy's σ with covariance, to 1e-11", () => {
    const near = new Nearness();
    tables.forEach(({ id, "ratio of means": known }, i) => {
      near.relative("value", id, line(i, 5).value[0], known.value, 1e-12);
      near.relative("σ", id, line(i, 5).sigma[0], known.sigma, 1e-11);
    });
    near.hold();
  });

  it("weighted by 1/σ² have numpy's internal σ, and say the external one and the MSWD beside it", () => {
    const near = new Nearness();
    tables.forEach(({ id, "weighted a": known }, i) => {
      near.relative("value", id, line(i, 4).value[0], known.value, 1e-12);
      near.relative("internal σ", id, line(i, 4).sigma[0], known.internal, 1e-12);
      // Beside it, in words of three digits: "… with the scatter it is 1.23 times that, MSWD 1.51".
      const said = evaluated[i]?.engine.trace({ block: "r", name: "l4" });
      const notes = (said === null || said === undefined ? [] : nodesOf(said)).flatMap(({ notes: each }) => each).join(" ");
      const [, times, mswd] = /with the scatter it is ([\d.]+) times that, MSWD ([\d.]+)/u.exec(notes) ?? [];
      near.relative("external over internal σ", id, Number(times), known.external / known.internal, 0.005);
      near.relative("MSWD", id, Number(mswd), known.mswd, 0.005);
    });
    near.hold();
  });
});
