import { createEngine, type Engine, type PageResults, type TraceNode, type TraceRequest } from "@/cells";
import { pageOf } from "../page/pages";

/** Numbers from 0 to 1 by a fixed rule (Park & Miller 1988), so that every run has the same page. */
export function numbers(seed: number): () => number {
  let state = seed;
  return () => (state = (state * 48271) % 2147483647) / 2147483647;
}

/** Invented analyses round two lines, with σ of their own. `n` of the class "a", and as many of "b". */
export function table(n: number, seed = 7): string {
  const next = numbers(seed);
  const lines = ["Sample,Group,SiO2 (wt%),1s SiO2,MgO (wt%),1s MgO,Al2O3 (wt%),1s Al2O3"];
  for (let i = 0; i < 2 * n; i++) {
    const isA = i < n;
    const t = (i % n) / n;
    const si = 40 + 4 * next();
    const mg = si * (0.6 + 0.4 * t + 0.01 * next());
    const al = si * (isA ? 0.03 + 0.09 * t + 0.003 * next() : 0.13 - 0.07 * t + 0.003 * next());
    const row = [si, 0.1 + 0.2 * next(), mg, 0.1 + 0.3 * next(), al, 0.02 + 0.06 * next()].map((x) => x.toFixed(4));
    lines.push([`${isA ? "A" : "B"}-${(i % n) + 1}`, isA ? "a" : "b", ...row].join(","));
  }
  return lines.join("\n");
}

const columns = [
  { header: "Sample", role: "sample" },
  { header: "Group", role: "class" },
  ...["SiO2", "MgO", "Al2O3"].flatMap((name) => [
    { header: `${name} (wt%)`, name, role: "quantity", species: name, unit: "wt%" },
    { header: `1s ${name}`, role: "uncertainty", of: name, as: "1 sigma" },
  ]),
];

export const data = { id: "d", kind: "data", source: { file: "t.csv" }, columns };
export const ratios = { id: "r", kind: "formula", data: "d", text: "mg_si = Mg / Si\nal_si = Al / Si" };

export function trendOver(id: string, group: string, more: object = {}): object {
  return { id, kind: "trend", data: "d", where: `Group == "${group}"`, x: "mg_si", y: "al_si", method: "york", ...more };
}

export interface Opened {
  readonly engine: Engine;
  readonly results: PageResults;
  ask(request: TraceRequest): TraceNode;
}

export function opened(blocks: readonly object[], n = 30, bodies: object = { CI: "CI_PLJ14", BSE: "BSE_MS95" }, text = table(n)): Opened {
  const engine = createEngine();
  engine.setSource("t.csv", new TextEncoder().encode(text));
  const results = engine.evaluate(pageOf(blocks, bodies));
  return {
    engine,
    results,
    ask(request) {
      const node = engine.trace(request);
      if (node === null) throw new Error(`${request.block}.${request.name} has no trace: ${JSON.stringify(results.blocks.get(request.block)?.problems)}`);
      return node;
    },
  };
}

/** Whether, at every node whose branches have shares, these sum to its own; the worst miss. */
export function worstMiss(node: TraceNode): number {
  const shares = node.from.flatMap(({ share }) => (share === null ? [] : [share]));
  const own = node.share === null || shares.length === 0 ? 0 : Math.abs(shares.reduce((sum, share) => sum + share, 0) - node.share);
  return node.from.reduce((worst, child) => Math.max(worst, worstMiss(child)), own);
}
