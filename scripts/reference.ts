import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";
import Papa from "papaparse";
import prettier from "prettier";

/**
 * Turns the published reference tables (`cells/species/reference/*.csv`) into TypeScript beside them, so that the engine
 * reads no files. Every value, source and note is taken over as it stands. Run with `npm run reference` after a change.
 */
const folder = path.resolve(path.dirname(fileURLToPath(import.meta.url)), "../cells/species/reference");

type Csv = Readonly<Record<string, string>>;
type Make = (row: Csv) => Record<string, unknown>;

interface Target {
  readonly csv: string;
  readonly file: string;
  readonly name: string;
  readonly type: string;
  readonly make: Make;
}

const number = (row: Csv, key: string): number => {
  const text = row[key] ?? "";
  const value = Number(text);
  if (text.trim() === "" || !Number.isFinite(value)) throw new Error(`expected a number in column ${key}, got "${text}"`);
  return value;
};
const numberOrNull = (row: Csv, key: string): number | null => ((row[key] ?? "") === "" ? null : number(row, key));
const text = (row: Csv, key: string): string => row[key] ?? "";

const targets: readonly Target[] = [
  {
    csv: "atomic-weights.csv",
    file: "atomicWeights.ts",
    name: "atomicWeightRows",
    type: "AtomicWeightRow",
    make: (r) => ({
      element: text(r, "element"),
      atomicWeight: number(r, "atomic_weight"),
      kind: text(r, "kind"),
      source: text(r, "source"),
      checked: text(r, "checked"),
    }),
  },
  {
    csv: "bodies.csv",
    file: "bodies.ts",
    name: "bodyRows",
    type: "BodyRow",
    make: (r) => ({
      body: text(r, "body"),
      kind: text(r, "kind"),
      species: text(r, "species"),
      value: number(r, "value"),
      unit: text(r, "unit"),
      uncertainty: numberOrNull(r, "uncertainty"),
      uncertaintyKind: text(r, "uncertainty_kind"),
      source: text(r, "source"),
      checked: text(r, "checked"),
      note: text(r, "note"),
    }),
  },
  {
    csv: "solar.csv",
    file: "solar.ts",
    name: "solarRows",
    type: "SolarRow",
    make: (r) => ({
      element: text(r, "element"),
      dex: number(r, "A_El_dex"),
      uncertainty: number(r, "uncertainty_dex"),
      kind: text(r, "kind"),
      source: text(r, "source"),
      checked: text(r, "checked"),
    }),
  },
  {
    csv: "chondrite-groups.csv",
    file: "chondriteGroups.ts",
    name: "chondriteGroupRows",
    type: "ChondriteGroupRow",
    make: (r) => ({
      group: text(r, "group"),
      values: Object.fromEntries(Object.keys(r).flatMap((key) => (key.endsWith(" (wt%)") ? [[key.slice(0, -6), number(r, key)]] : []))),
      source: text(r, "source"),
      checked: text(r, "checked"),
    }),
  },
  {
    csv: "condensation-temperatures.csv",
    file: "condensationTemperatures.ts",
    name: "condensationRows",
    type: "CondensationRow",
    make: (r) => ({ element: text(r, "element"), t50: number(r, "T50 (K)"), source: text(r, "source"), checked: text(r, "checked") }),
  },
  { csv: "phases.csv", file: "phases.ts", name: "phaseRows", type: "PhaseRow", make: (r) => ({ phase: text(r, "phase"), formula: text(r, "formula") }) },
  {
    csv: "reference-materials.csv",
    file: "referenceMaterials.ts",
    name: "referenceMaterialRows",
    type: "ReferenceMaterialRow",
    make: (r) => ({
      material: text(r, "material"),
      quantity: text(r, "quantity"),
      value: number(r, "value"),
      uncertainty: numberOrNull(r, "uncertainty"),
      unit: text(r, "unit"),
      source: text(r, "source"),
      checked: text(r, "checked"),
    }),
  },
];

/** The TypeScript of every table, by file name. */
export async function referenceFiles(): Promise<ReadonlyMap<string, string>> {
  const files = new Map<string, string>();
  const options = (await prettier.resolveConfig(path.join(folder, "rows.ts"))) ?? { printWidth: 160 };
  for (const target of targets) {
    const csv = readFileSync(path.join(folder, target.csv), "utf8");
    const rows = Papa.parse<Csv>(csv, { header: true, skipEmptyLines: true }).data.map(target.make);
    // Long texts that come back row after row are written once.
    const repeated = new Map<string, string>();
    const count = new Map<string, number>();
    for (const row of rows)
      for (const value of Object.values(row)) if (typeof value === "string" && value.length > 10) count.set(value, (count.get(value) ?? 0) + 1);
    for (const [value, times] of count) if (times > 2) repeated.set(value, `t${repeated.size + 1}`);
    const constants = [...repeated].map(([value, name]) => `const ${name} = ${JSON.stringify(value)};`);
    const lines = rows.map((row) => {
      const fields = Object.entries(row).map(
        ([key, value]) => `${key}: ${(typeof value === "string" ? repeated.get(value) : undefined) ?? JSON.stringify(value)}`,
      );
      return `{ ${fields.join(", ")} },`;
    });
    const written = [
      `/** Made from ${target.csv} by \`npm run reference\`; do not edit by hand. */`,
      `import type { ${target.type} } from "./rows";`,
      "",
      ...constants,
      "",
      `export const ${target.name}: readonly ${target.type}[] = [`,
      ...lines,
      "];",
      "",
    ].join("\n");
    files.set(target.file, await prettier.format(written, { ...options, parser: "typescript" }));
  }
  return files;
}

if (process.argv[1] !== undefined && path.resolve(process.argv[1]) === fileURLToPath(import.meta.url)) {
  for (const [file, content] of await referenceFiles()) writeFileSync(path.join(folder, file), content);
}
