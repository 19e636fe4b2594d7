import type { BlockResult } from "@/cells";
import { formatP } from "@/app/_ui/concise";

/** What the program says beside a result. */
export interface Remark {
  readonly title: string;
  readonly text: string;
}

const share = (part: number): string => (part < 0.01 ? "under 1 %" : `${Math.round(part * 100)} %`);

/** Remarks that belong beside a result rather than in it. */
export function remarksOn(result: BlockResult | undefined): Remark[] {
  if (result === undefined) return [];
  if (result.kind === "trend" && result.usesScatter === true && result.p !== undefined)
    return [
      {
        title: "Why two σ",
        text: `With p ${formatP(result.p)}, under 0.05, the points scatter more than their errors allow. Band, crossing and distances use the σ with scatter; the σ from errors alone is given beside it.`,
      },
    ];
  if (result.kind === "budget" && result.ok && result.shares.length > 0) {
    const parts = result.shares.slice(0, 4).map((s) => `${s.input} ${share(s.share)}`);
    return [{ title: "What moves the answer", text: `Of the variance of the solved amount: ${parts.join(", ")}.` }];
  }
  if (result.kind === "data" || result.kind === "note") return [];
  const warnings = result.problems.filter((p) => p.severity === "note");
  return warnings.map((w) => ({ title: "Note", text: w.text }));
}
