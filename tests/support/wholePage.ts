import type { PageDocument } from "@/cells";
import { PAGE_FORMAT } from "@/cells";
import { generator } from "./generator";

/** Enough rows that machine code is taken where it can be had. */
export const MANY_ROWS = 4200;

/** Sources of {@link wholePage} by file name. */
export function wholeSources(): Readonly<Record<string, string>> {
  return { "many.csv": wholeTable(MANY_ROWS), "few.csv": wholeTable(60), "other.csv": wholeTable(60, -1) };
}

/** A table with what tables have: gaps, values below detection, classes, a sigma here and none there, names that come twice. */
function wholeTable(rows: number, rises = 1): string {
  const next = generator(20_261_201);
  const lines = ["Sample,Group,SiO2 (wt%),2s SiO2,MgO (wt%),2s MgO,Al2O3 (wt%),1s Al2O3,FeOt (wt%),CaO (wt%),2s CaO,La (ppm),1s La,Sm (ppm),Reference"];
  for (let row = 1; row <= rows; row++) {
    const melt = next();
    const around = (value: number, part: number): string => (value * (1 + part * (next() - 0.5))).toFixed(3);
    lines.push(
      [
        `W-${row % 2000}`,
        ["harzburgite", "lherzolite", "dunite", ""][row % 4] ?? "",
        around(44 + melt, 0.02),
        "0.30",
        row % 97 === 0 ? "" : around(45 - 8 * melt, 0.02),
        row % 5 === 0 ? "" : "0.35",
        row % 61 === 0 ? "<0.05" : around(2.4 + rises * 3.6 * (melt - 0.5), 0.05),
        (0.02 + 0.02 * next()).toFixed(3),
        around(8, 0.03),
        row % 89 === 0 ? "n.d." : around(0.5 + 3 * melt, 0.06),
        "0.05",
        row % 53 === 0 ? "<0.01" : (0.02 + next()).toFixed(4),
        "0.004",
        around(0.3, 0.4),
        row % 3 === 0 ? "Orr 2025" : "",
      ].join(","),
    );
  }
  return `${lines.join("\n")}\n`;
}

/** A page with every kind of block and most of what each can do, over tables of many and of few rows. */
export function wholePage(): PageDocument {
  return {
    format: PAGE_FORMAT,
    title: "Everything at once",
    bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" },
    blocks: [
      { id: "d", kind: "data", source: { file: "many.csv" }, setAside: [{ row: 11, reason: "serpentinised" }] },
      { id: "few", kind: "data", source: { file: "few.csv" }, assumed: [{ column: "FeOt", relative: 0.02, reason: "usual repeatability" }] },
      { id: "other", kind: "data", source: { file: "other.csv" } },
      { id: "all", kind: "data", stack: ["few", "d"] },
      {
        id: "r",
        kind: "formula",
        data: "d",
        text: [
          "mg_si = Mg / Si",
          "al_si = Al / Si",
          "lg = log10(Mg / Si) + ln(Al / Si) * exp(-1.5)",
          "odd = (Mg / Si) ^ 1.37 - sqrt(Ca / Al)",
          "ci = norm(La / Sm, CI)",
          "by_atoms = atoms(Mg) / atoms(Si)",
          "mg_number = mol(MgO) / (mol(MgO) + mol(FeOt))",
          'pick = Group == "dunite" ? Mg / Si : Al / Si',
          "group_means = mean(Mg / Si, Group)",
          "of_means = mean(Mg) / mean(Si)",
          "spread = sd(Al / Si) / median(Al / Si)",
          "weighted = wmean(Mg / Si)",
          "resid = al_si - t.slope * mg_si",
          "far = max(Mg / Si, 1) - min(abs(Al / Si), 0.05)",
        ].join("\n"),
      },
      { id: "s", kind: "formula", data: "few", text: "mg = Mg / Si\nal = Al / Si\nca_al = Ca / Al" },
      { id: "o", kind: "formula", data: "other", text: "rise = Mg / Si\nrise_al = Al / Si" },
      { id: "t", kind: "trend", data: "few", x: "mg", y: "al", where: 'Group != ""', method: "york", crossWith: "u", simulate: { draws: 200, seed: 3 } },
      { id: "u", kind: "trend", data: "other", x: "rise", y: "rise_al", where: 'Group != "dunite"', method: "york", crossWith: "t" },
      { id: "ols", kind: "trend", data: "few", x: "mg", y: "al", where: 'Group == "dunite"', method: "ordinary least squares" },
      { id: "v", kind: "trend", data: "few", x: "mg", y: "ca_al", method: "reduced major axis", simulate: { draws: 200, seed: 4 } },
      { id: "w", kind: "trend", data: "few", x: "mg", y: "ca_al", method: "theil-sen" },
      {
        id: "core",
        kind: "budget",
        start: { body: "BSE" },
        steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0.01 }, amount: "solve" }],
        target: { expression: "Mg / Si", equals: { body: "CI" } },
        report: ["Mg / Si", "Al / Si"],
      },
      {
        id: "melt",
        kind: "budget",
        start: { body: "BSE" },
        steps: [{ do: "extract melt", model: "fractional", amount: { from: 0, to: 0.2 }, coefficients: { La: 0.01, Sm: 0.05 } }],
        report: ["La / Sm"],
      },
      {
        id: "p",
        kind: "plot",
        plot: "scatter",
        drawn: [
          { data: "d", x: "mg_si", y: "al_si", ellipses: "1 sigma" },
          { data: "few", x: "mg", y: "al", ellipses: "95 %" },
          { trend: "t" },
          { crossing: "t" },
          { bodies: ["CI", "BSE"] },
        ],
      },
      { id: "h", kind: "plot", plot: "distribution", drawn: [{ data: "d", x: "odd" }] },
      { id: "n", kind: "note", text: "The line has slope {{t.slope}} and silicon in the core is {{core.solved}}." },
    ],
  };
}
