import { resultOf } from "@/app/_blocks/shared/tableOf";
import { compactExpression } from "@/app/_blocks/shared/words";
import type { PageResults, PlotLayer } from "@/cells";

/** How far a budget's path ends from the value it was compared with, upwards. */
export interface Miss {
  readonly what: string;
  readonly x: number;
  readonly from: number;
  readonly to: number;
  readonly sigmas: number;
}

const isSame = (a: number, b: number): boolean => Math.abs(a - b) <= 1e-9 * Math.max(Math.abs(a), Math.abs(b));

/**
 * Misses worth drawing: where a path's end stands at a reported value that lies more than 2σ from its target. The report is
 * recognised by its number, since a plot's axis may call the same ratio by another name.
 */
export function missesOf(layers: readonly PlotLayer[], results: PageResults | null): readonly Miss[] {
  return layers.flatMap((layer): Miss[] => {
    if (layer.what !== "path" || layer.end === undefined) return [];
    const { end } = layer;
    const report = resultOf(results, layer.budget, "budget")?.report.find((r) => r.end !== null && isSame(r.end, end.y));
    if (report === undefined || report.miss === null || report.target === null || Math.abs(report.miss) <= 2) return [];
    return [{ what: compactExpression(report.expression), x: end.x, from: end.y, to: report.target, sigmas: Math.abs(report.miss) }];
  });
}
