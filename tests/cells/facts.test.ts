import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { createEngine, formatUncertain, listBodies, lookupBody, readPageDocument, type BudgetResult, type PageResults, type TrendResult } from "@/cells";
import { lineOf, resultOf } from "./page/pages";

/**
 * What everybody in the trade knows, asked of the built-in group means and bodies. Each is common practice, no source: a rule
 * of thumb to see whether the numbers make sense, never a reference. Where the data disagree with it, the test holds the figure
 * that they give and its name says so; the worked example that leans on it says so too.
 */
const example = (file: string): string => readFileSync(`examples/${file}`, "utf8");
const readme = {
  meeting: example("chondrites-and-mantle/README.md"),
  explanations: example("earth-three-explanations/README.md"),
};
const blockOf = (page: string, id: string): object => {
  const found = (JSON.parse(example(`${page}/page.json`)) as { blocks: { id: string }[] }).blocks.find((block) => block.id === id);
  if (found === undefined) throw new Error(`${page} has no block ${id}`);
  return found;
};

const bodies = { CI: "CI_PLJ14", BSE: "BSE_MS95", BSE_other: "BSE_PO14" };

function evaluate(blocks: readonly object[], aliases: Readonly<Record<string, string>> = bodies): PageResults {
  const engine = createEngine();
  for (const file of ["chondrites-and-mantle/mantle-rocks.csv", "earth-three-explanations/refractory-inclusions.csv"])
    engine.setSource(file.split("/")[1] ?? "", readFileSync(`examples/${file}`));
  return engine.evaluate(readPageDocument({ format: "cotectic-page/1", title: "Facts of the trade", bodies: aliases, blocks }));
}

const say = (text: string): void => console.log(`common practice, no source · ${text}`);

/** A table of the built-in group means, typed in from the bodies themselves. Their sources give no errors: 3 % is assumed. */
const groups = listBodies().filter(({ what }) => what.endsWith(", group mean"));
const means = {
  id: "means",
  kind: "data",
  typed: groups.map(({ id, values }) => ({ id, cells: { Group: id, ...Object.fromEntries(values.map(({ species, value }) => [species, String(value)])) } })),
  columns: [{ name: "Group", role: "class" }, ...["Mg", "Si", "Al"].map((name) => ({ name, role: "quantity", species: name, unit: "wt%" }))],
  assumed: ["Mg", "Si", "Al"].map((column) => ({ column, relative: 0.03, reason: "The source gives no error; 3 % is usual for a group mean." })),
};
const ratios = { id: "ratios", kind: "formula", data: "means", text: "mg_si = Mg / Si\nal_si = Al / Si" };

const enstatite = ["EH_WK88", "EL_WK88"];
const ordinary = ["H_WK88", "L_WK88", "LL_WK88"];
const carbonaceous = ["CI_WK88", "CM_WK88", "CO_WK88", "CV_WK88"];
const lineThrough = (id: string, chosen: readonly string[]): object => ({
  id,
  kind: "trend",
  data: "means",
  x: "mg_si",
  y: "al_si",
  where: chosen.map((group) => `Group == "${group}"`).join(" or "),
  method: "york",
});

const ofGroups = evaluate([means, ratios]);
const ratio = (name: "mg_si" | "al_si", group: string): number => {
  const value = lineOf(ofGroups, name, "ratios").value[groups.findIndex(({ id }) => id === group)];
  if (value === undefined) throw new Error(`${group} is no built-in group mean`);
  return value;
};
/** By hand, from the printed percentages of the table of group means. */
const byHand = (element: string, group: string): number => {
  const of = (species: string): number => lookupBody(group)?.values.find((value) => value.species === species)?.value ?? Number.NaN;
  return of(element) / of("Si");
};
/** Relative standard deviation, %. */
const spread = (values: readonly number[]): number => {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return (100 * Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1))) / mean;
};

describe("forsterite (common practice, no source)", () => {
  it("has Mg/Si 2 by atoms", () => {
    const results = evaluate([{ id: "r", kind: "formula", text: "fo = at(atoms(Mg) / atoms(Si), forsterite)" }]);
    const [value = Number.NaN] = lineOf(results, "fo").value;
    say(`Mg/Si of forsterite by atoms: ${value}`);
    expect(value).toBeCloseTo(2, 12);
  });
});

describe("enstatite, ordinary and carbonaceous chondrites (common practice, no source)", () => {
  it("follow each other, in this order, to higher Mg/Si and higher Al/Si", () => {
    for (const [name, element] of [
      ["mg_si", "Mg"],
      ["al_si", "Al"],
    ] as const) {
      const [e, o, c] = [enstatite, ordinary, carbonaceous].map((each) => each.map((group) => ratio(name, group)));
      say(`${element}/Si by mass: enstatite ${shown(e)}, ordinary ${shown(o)}, carbonaceous ${shown(c)}`);
      expect(Math.max(...(e ?? []))).toBeLessThan(Math.min(...(o ?? [])));
      expect(Math.max(...(o ?? []))).toBeLessThan(Math.min(...(c ?? [])));
      for (const group of [...enstatite, ...ordinary, ...carbonaceous]) expect(ratio(name, group)).toBeCloseTo(byHand(element, group), 12);
    }
  });

  it("lie on one trend, if CV is left out", () => {
    const [all, without] = [
      [...enstatite, ...ordinary, ...carbonaceous],
      [...enstatite, ...ordinary, ...carbonaceous.slice(0, 3)],
    ];
    const results = evaluate([means, ratios, lineThrough("all", all), lineThrough("without", without)]);
    const [withCv, withoutCv] = ["all", "without"].map((id) => resultOf(results, id, "trend"));
    say(
      `one line through eight group means: slope ${value(withoutCv?.slope)}, r ${r(withoutCv).toFixed(2)}, MSWD ${withoutCv?.mswd?.toFixed(2)} (p ${withoutCv?.p?.toFixed(3)}) for errors of 3 %`,
    );
    say(`with CV: r ${r(withCv).toFixed(2)}, MSWD ${withCv?.mswd?.toFixed(2)} (p ${withCv?.p?.toFixed(3)})`);
    expect(value(withoutCv?.slope)).toBe("0.160(18)");
    expect(r(withoutCv)).toBeCloseTo(0.93, 2);
    expect(withoutCv?.mswd).toBeCloseTo(1.87, 2);
    expect(withoutCv?.p?.toFixed(2)).toBe("0.08");
    expect(withCv?.mswd).toBeCloseTo(2.95, 2);
    expect(withCv?.p?.toFixed(3)).toBe("0.004");
    expect(readme.meeting).toContain("r 0.93, MSWD 1.9, p 0.08");
    expect(readme.meeting).toContain("MSWD 2.95, p 0.004");
  });

  it("is not what R chondrites do: they have less Mg/Si than EL and more Al/Si (the data disagree)", () => {
    const [mg, al] = [ratio("mg_si", "R_LF98"), ratio("al_si", "R_LF98")];
    say(`R chondrites: Mg/Si ${mg.toFixed(3)}, Al/Si ${al.toFixed(4)}; EL: ${ratio("mg_si", "EL_WK88").toFixed(3)}, ${ratio("al_si", "EL_WK88").toFixed(4)}`);
    expect(mg).toBeCloseTo(12.9 / 18, 12);
    expect(mg).toBeLessThan(ratio("mg_si", "EL_WK88"));
    expect(al).toBeGreaterThan(ratio("al_si", "EL_WK88"));
    expect(readme.meeting).toContain("**R chondrites** are out of the order: less Mg/Si than EL, more Al/Si");
  });
});

describe("carbonaceous groups (common practice, no source)", () => {
  it("share nearly one Mg/Si by mass, while Al/Si varies, CV highest", () => {
    const wide = [...carbonaceous, "CK_LF98", "CR_LF98"];
    for (const [chosen, mgSpread, alSpread] of [
      [carbonaceous, 1.1, 13.7],
      [wide, 1.1, 13.4],
    ] as const) {
      const [mg, al] = (["mg_si", "al_si"] as const).map((name) => spread(chosen.map((group) => ratio(name, group))));
      say(`${chosen.join(", ")}: Mg/Si spreads by ${mg?.toFixed(1)} %, Al/Si by ${al?.toFixed(1)} %`);
      expect(mg).toBeCloseTo(mgSpread, 1);
      expect(al).toBeCloseTo(alSpread, 1);
    }
    const highest = [...wide, "CH_LF98"].sort((a, b) => ratio("al_si", b) - ratio("al_si", a))[0];
    say(`highest Al/Si among the carbonaceous groups: ${highest}, ${ratio("al_si", highest ?? "").toFixed(4)}`);
    expect(highest).toBe("CV_WK88");
    expect(readme.meeting).toContain("Mg/Si spreads by 1.1 %, Al/Si by 13.7 %");
  });

  it("except CH, which has a tenth less Mg/Si (the data disagree)", () => {
    const away = ratio("mg_si", "CH_LF98") / ratio("mg_si", "CI_WK88") - 1;
    say(`CH: Mg/Si ${ratio("mg_si", "CH_LF98").toFixed(3)}, ${(100 * away).toFixed(1)} % from CI's`);
    expect(100 * away).toBeCloseTo(-9.4, 1);
    expect(readme.meeting).toContain("**CH** has 9 % less Mg/Si than CI");
  });
});

describe("the mantle array and the chondrite trend (common practice, no source)", () => {
  // No mantle rocks are built in: the array is that of the worked example, whose rocks are invented.
  const rocks = blockOf("chondrites-and-mantle", "rocks");
  const array = (crossWith: string): object => ({
    id: `array_${crossWith}`,
    kind: "trend",
    data: "rocks",
    x: "Mg / Si",
    y: "Al / Si",
    where: 'Class == "spinel lherzolite" or Class == "harzburgite"',
    method: "york",
    leaveOut: [{ row: 28, sample: "VR-28", reason: "As in the example." }],
    crossWith,
  });
  const line = (id: string, chosen: readonly string[]): object => ({ ...lineThrough(id, chosen), x: "Mg / Si", y: "Al / Si" });
  const results = evaluate([
    means,
    rocks,
    line("eight", [...enstatite, ...ordinary, ...carbonaceous.slice(0, 3)]),
    line("six", [...enstatite, ...ordinary, "CI_WK88"]),
    array("eight"),
    array("six"),
  ]);
  const crossingOf = (id: string): NonNullable<TrendResult["crossing"]> => {
    const { crossing } = resultOf(results, id, "trend");
    if (crossing === undefined) throw new Error(`${id} crosses nothing`);
    return crossing;
  };
  const distance = (id: string, body: string): { distance: number; p: number } =>
    crossingOf(id).fromBodies.find((each) => each.body === body) ?? { distance: Number.NaN, p: Number.NaN };

  it("meet at bulk silicate Earth within their errors, CM and CO among the chondrites", () => {
    const { x, y } = crossingOf("array_eight");
    const [ms, po] = [distance("array_eight", "BSE"), distance("array_eight", "BSE_other")];
    say(
      `crossing at Mg/Si ${value(x)}, Al/Si ${value(y)}: BSE_MS95 is ${ms.distance.toFixed(1)}σ away (p ${ms.p.toFixed(2)}), BSE_PO14 ${po.distance.toFixed(1)}σ (p ${po.p.toFixed(2)})`,
    );
    expect([value(x), value(y)]).toEqual(["1.087(11)", "0.113(4)"]);
    expect(ms.distance.toFixed(1)).toBe("0.8");
    expect(po.distance.toFixed(1)).toBe("2.4");
    expect(Math.min(ms.p, po.p)).toBeGreaterThan(0.05);
    expect(readme.meeting).toContain(
      `lies ${ms.distance.toFixed(1)} σ from \`BSE_MS95\` and ${po.distance.toFixed(1)} σ from \`BSE_PO14\` (p ${ms.p.toFixed(2)} and ${po.p.toFixed(2)})`,
    );
  });

  it("but not if enstatite, ordinary and CI chondrites alone are asked (the data disagree)", () => {
    const { x, y } = crossingOf("array_six");
    const [ms, po] = [distance("array_six", "BSE"), distance("array_six", "BSE_other")];
    say(
      `crossing without CM and CO at Mg/Si ${value(x)}, Al/Si ${value(y)}: BSE_MS95 is ${ms.distance.toFixed(1)}σ away (p ${ms.p.toFixed(3)}), BSE_PO14 ${po.distance.toFixed(1)}σ (p ${po.p.toFixed(3)})`,
    );
    expect(ms.distance.toFixed(1)).toBe("2.9");
    expect(po.distance.toFixed(1)).toBe("4.0");
    expect(Math.max(ms.p, po.p)).toBeLessThan(0.05);
    expect(readme.meeting).toContain(`lies ${ms.distance.toFixed(1)} and ${po.distance.toFixed(1)} σ away (p ${ms.p.toFixed(2)} and below 0.001)`);
    expect(po.p).toBeLessThan(0.001);
  });
});

describe("silicon that the core must hold to bring Earth to chondritic Mg/Si (common practice, no source: 7–8 wt%)", () => {
  const compilations = {
    CI: ["CI_MS95", "CI_PLJ14", "CI_LPG09", "CI_WK88", "CI_A09", "CI_A21", "SUN_A09", "SUN_A21"],
    BSE: ["BSE_MS95", "BSE_PO14"],
  };
  const f = 0.323;
  const core = (CI: string, BSE: string): BudgetResult =>
    resultOf(
      evaluate(
        [
          {
            id: "core",
            kind: "budget",
            start: { body: "BSE" },
            steps: [{ do: "share with metal", species: "Si", metalFraction: { value: f, sigma: 0.001 }, amount: "solve" }],
            target: { expression: "Mg / Si", equals: { body: "CI" } },
          },
        ],
        { CI, BSE },
      ),
      "core",
      "budget",
    );
  const table = compilations.CI.map((ci) => ({ ci, cells: compilations.BSE.map((bse) => core(ci, bse).solved) }));
  const cell = (solved: BudgetResult["solved"]): string => {
    if (solved === undefined) return "none";
    if (solved.sigma === null) return solved.value.toFixed(1);
    return `${formatUncertain(solved.value, solved.sigma)}${solved.sigmaIs === undefined ? "" : " at least"}`;
  };
  const row = ({ ci, cells }: (typeof table)[number]): string => `| \`${ci}\` | ${cells.map(cell).join(" | ")} |`;

  it("comes to several wt%, by the pair of compilations", () => {
    const lines = ["| Mg/Si of | BSE_MS95 | BSE_PO14 |", ...table.map(row)];
    say(`silicon in the core, wt%, 1σ in brackets\n${lines.join("\n")}`);
    expect(table.map(({ ci, cells }) => [ci, ...cells.map((solved) => solved?.value.toFixed(2) ?? null)])).toEqual([
      ["CI_MS95", "8.72", "6.81"],
      ["CI_PLJ14", "9.58", "7.65"],
      ["CI_LPG09", "9.36", "7.43"],
      ["CI_WK88", "7.71", "5.83"],
      ["CI_A09", "8.72", "6.81"],
      ["CI_A21", "8.72", "6.81"],
      ["SUN_A09", "0.87", null],
      ["SUN_A21", "6.35", "4.50"],
    ]);
    // The example shows the same table.
    for (const each of table) expect(readme.explanations).toContain(row(each));
  });

  it("is what the budget itself lists by compilation, for those in mass", () => {
    const listed = core("CI_PLJ14", "BSE_MS95").byCompilation;
    expect(listed).toHaveLength(8);
    for (const { ci, cells } of table.slice(0, 4))
      compilations.BSE.forEach((bse, i) => expect(listed.find((each) => each.bodies.CI === ci && each.bodies.BSE === bse)?.solved).toBe(cells[i]?.value));
  });

  it("agrees with (1 − f)(Mg/T − Si)/f by hand, for the meteorites' compilations in mass", () => {
    // Mg and Si of BSE_MS95 as elements, of BSE_PO14 from its oxides (40.304, 24.305; 60.083, 28.085).
    const earth = [
      [22.8, 21.0],
      [(36.77 * 24.305) / 40.304, (45.4 * 28.085) / 60.083],
    ] as const;
    for (const { ci, cells } of table.slice(0, 4))
      earth.forEach(([mg, si], i) => expect(cells[i]?.value).toBeCloseTo(((1 - f) * (mg / byHand("Mg", ci) - si)) / f, 2));
  });

  it("is between 7 and 8 wt% for three of these sixteen pairs only (the data disagree)", () => {
    const inside = table.flatMap(({ ci, cells }) =>
      cells.flatMap((solved, i) => (solved !== undefined && solved.value >= 7 && solved.value <= 8 ? [`${ci} and ${compilations.BSE[i]}`] : [])),
    );
    say(`7–8 wt% with ${inside.join("; ")}`);
    expect(inside).toEqual(["CI_PLJ14 and BSE_PO14", "CI_LPG09 and BSE_PO14", "CI_WK88 and BSE_MS95"]);
  });
});

describe("refractory inclusions between CI and CV (common practice, no source: 3–4 %)", () => {
  // Inclusions are not built in: those of the worked example, from memory and rounded.
  const inclusions = blockOf("earth-three-explanations", "inclusions");
  const kinds = ["Type B", "Compact type A", "Fine-grained"];
  const budget = (id: string, start: string, step: "add" | "remove", sample: string, target: string): object => ({
    id,
    kind: "budget",
    start: { body: start },
    steps: [{ do: step, what: { data: "inclusions", sample }, amount: "solve" }],
    target: { expression: "Al / Si", equals: { body: target } },
  });
  const results = evaluate([
    inclusions,
    ...kinds.flatMap((kind, i) => [budget(`out_${i}`, "CV_WK88", "remove", kind, "CI_WK88"), budget(`in_${i}`, "CI_WK88", "add", kind, "CV_WK88")]),
  ]);
  const percent = (id: string): number => 100 * (resultOf(results, id, "budget").solved?.value ?? Number.NaN);

  it("taking 3–4 % out of CV brings its Al/Si to CI's; compact type A takes 2.6 %", () => {
    const taken = kinds.map((_, i) => percent(`out_${i}`));
    say(`to be taken from CV, % of its mass: ${kinds.map((kind, i) => `${kind} ${taken[i]?.toFixed(1)}`).join(", ")}`);
    expect(taken.map((each) => each.toFixed(1))).toEqual(["3.2", "2.6", "3.6"]);
    // Type B by hand: Al 30 × 0.52925, Si 29 × 0.46744 wt%; (1.75 − 15.6 T)/(15.877 − 13.556 T), T = 0.86/10.5.
    const T = 0.86 / 10.5;
    expect(taken[0]).toBeCloseTo((100 * (1.75 - 15.6 * T)) / (15.8775 - 13.5558 * T), 2);
    expect(readme.explanations).toContain("3.2 % of type B, 3.6 % of fine-grained and 2.6 % of compact type A");
  });

  it("put into CI it is 1.8–2.5 % only, since a kilogram of CI holds a third less rock (the data disagree)", () => {
    const put = kinds.map((_, i) => percent(`in_${i}`));
    say(`to be put into CI, % of its mass: ${kinds.map((kind, i) => `${kind} ${put[i]?.toFixed(1)}`).join(", ")}`);
    expect(put.map((each) => each.toFixed(1))).toEqual(["2.2", "1.8", "2.5"]);
    expect(readme.explanations).toContain("2.2, 2.5 and 1.8 %");
  });
});

function shown(values: readonly number[] | undefined): string {
  return (values ?? []).map((each) => each.toFixed(3)).join(" ");
}

function value(of: { readonly value: number; readonly sigma: number | null } | undefined): string {
  return of === undefined ? "none" : formatUncertain(of.value, of.sigma);
}

/** Pearson's correlation of the points of a trend. */
function r(trend: TrendResult | undefined): number {
  const points = trend?.points ?? [];
  const mean = (axis: "x" | "y"): number => points.reduce((sum, point) => sum + point[axis], 0) / points.length;
  const [mx, my] = [mean("x"), mean("y")];
  const sum = (work: (dx: number, dy: number) => number): number => points.reduce((total, { x, y }) => total + work(x - mx, y - my), 0);
  return sum((dx, dy) => dx * dy) / Math.sqrt(sum((dx) => dx * dx) * sum((_, dy) => dy * dy));
}
