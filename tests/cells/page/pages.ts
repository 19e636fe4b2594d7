import { createEngine, readPageDocument, type BlockResult, type Engine, type PageResults, type Problem, type TraceNode } from "@/cells";

/** Invented analyses for tests: eight samples of two classes and one of neither; S9 has no CaO, S7 one below detection. */
export const csv = `Sample,Group,MgO (wt%),2s MgO,SiO2 (wt%),2s SiO2,Al2O3 (wt%),2s Al2O3,CaO (wt%)
S1,CV,24.1,0.4,34.0,0.5,3.2,0.1,2.6
S2,CV,24.9,0.4,33.5,0.5,3.5,0.1,2.7
S3,CV,23.2,0.4,34.5,0.5,2.9,0.1,2.4
S4,CV,25.6,0.4,33.1,0.5,3.8,0.1,2.9
S5,CO,24.0,0.4,33.9,0.5,2.5,0.1,2.2
S6,CO,25.1,0.4,34.1,0.5,2.3,0.1,2.0
S7,CO,23.1,0.4,33.4,0.5,2.7,0.1,<0.1
S8,CO,24.9,0.4,33.4,0.5,2.7,0.1,2.0
S9,XX,25.9,0.4,33.7,0.5,2.1,0.1,
`;

const oxide = (name: string): object[] => [
  { header: `${name} (wt%)`, name, role: "quantity", species: name, unit: "wt%" },
  { header: `2s ${name}`, role: "uncertainty", of: name, as: "2 sigma" },
];

/** The data block over {@link csv}. CaO has no σ unless `assumed` gives one. */
export function data(more: object = {}): object {
  return {
    id: "ch",
    kind: "data",
    source: { file: "ch.csv" },
    columns: [
      { header: "Sample", role: "sample" },
      { header: "Group", role: "class" },
      ...["MgO", "SiO2", "Al2O3"].flatMap(oxide),
      { header: "CaO (wt%)", name: "CaO", role: "quantity", species: "CaO", unit: "wt%" },
    ],
    ...more,
  };
}

export const ratios = { id: "r", kind: "formula", data: "ch", text: "mg_si = Mg / Si\nal_si = Al / Si" };
export const trend = (id: string, group: string, more: object = {}): object => ({
  id,
  kind: "trend",
  data: "ch",
  x: "mg_si",
  y: "al_si",
  where: `Group == "${group}"`,
  method: "york",
  ...more,
});

export function pageOf(blocks: readonly object[], bodies: object = { CI: "CI_PLJ14", BSE: "BSE_MS95" }): ReturnType<typeof readPageDocument> {
  return readPageDocument({ format: "cotectic-page/1", title: "Invented test page", bodies, blocks });
}

export function freshEngine(text: string = csv): Engine {
  const engine = createEngine();
  engine.setSource("ch.csv", new TextEncoder().encode(text));
  return engine;
}

export function evaluate(...blocks: object[]): PageResults {
  return freshEngine().evaluate(pageOf(blocks));
}

export function resultOf<K extends BlockResult["kind"]>(results: PageResults, handle: string, kind: K): Extract<BlockResult, { kind: K }> {
  const result = results.blocks.get(handle);
  if (result?.kind !== kind) throw new Error(`${handle} has no result of a ${kind} block`);
  return result as Extract<BlockResult, { kind: K }>;
}

export function errorsOf(results: PageResults, handle: string): readonly Problem[] {
  return (results.blocks.get(handle)?.problems ?? []).filter(({ severity }) => severity === "error");
}

export function lineOf(results: PageResults, name: string, handle = "r"): { value: Float64Array; sigma: Float64Array } {
  const line = resultOf(results, handle, "formula").lines.find((each) => each.name === name);
  if (line?.ok !== true) throw new Error(`${name} was not calculated`);
  return line;
}

/** Every node of a trace, the asked one first. */
export function nodesOf(node: TraceNode): TraceNode[] {
  return [node, ...node.from.flatMap(nodesOf)];
}
