"use client";

import type { ReactNode } from "react";
import { signedReason } from "@/app/_page/margin/signedReason";
import { usePage } from "@/app/_page/pageContext";
import type { Assumed, DataBlock, DataResult } from "@/cells";

/** "5 %" or "0.02". */
function assumedWords(assumed: Assumed): string {
  return assumed.relative === undefined ? String(assumed.absolute ?? "") : `${Number((assumed.relative * 100).toPrecision(3))} %`;
}

/** Columns whose σ one person assumed alike and for the same reason are said together. */
function assumedTogether(all: readonly Assumed[]): { readonly columns: readonly string[]; readonly first: Assumed }[] {
  const groups = new Map<string, { columns: string[]; first: Assumed }>();
  for (const assumed of all) {
    const key = JSON.stringify([assumed.relative, assumed.absolute, assumed.reason, assumed.by]);
    const group = groups.get(key);
    if (group === undefined) groups.set(key, { columns: [assumed.column], first: assumed });
    else group.columns.push(assumed.column);
  }
  return [...groups.values()];
}

const kinds = new Map([
  ["2 sigma", "source gives 2σ, halved on reading"],
  ["2 sigma relative %", "source gives 2σ in % of the value, halved on reading"],
  ["1 sigma relative %", "source gives σ in % of the value"],
  ["95 % interval", "source gives 95 % intervals, divided by 1.96 on reading"],
]);

export interface GridLegendProps {
  readonly block: DataBlock;
  readonly result: DataResult | undefined;
  /** The table is folded: signs of cells need no words. */
  readonly short: boolean;
  readonly children: ReactNode;
}

/** Under a table: only those signs that occur in it, each in words, and what can be done to the table as a whole. */
export function GridLegend({ block, result, short, children }: GridLegendProps) {
  const people = usePage((s) => s.people);
  const columns = result?.columns ?? [];
  const has = (count: (c: (typeof columns)[number]) => number) => columns.some((c) => count(c) > 0);
  const said = new Set((block.columns ?? []).flatMap((c) => (c.role === "uncertainty" && c.as !== undefined ? [kinds.get(c.as) ?? ""] : [])));
  const signs = [
    has((c) => c.missing) && "– missing",
    has((c) => c.belowDetection) && "< below detection, never 0",
    (result?.valuesSetAside ?? 0) > 0 && "[ ] value set aside",
    ...said,
    ...assumedTogether(block.assumed ?? []).map(
      ({ columns: names, first }) => `° ${names.join(", ")}: σ assumed ${assumedWords(first)}. ${signedReason(first, people)}`,
    ),
    result?.table?.renormalised !== undefined && "renormalised volatile-free; the total is as measured",
    block.substitute !== undefined && `below detection counted as ${block.substitute.fraction} of the limit: ${signedReason(block.substitute, people)}`,
    result?.proposed === true && "read as the program proposes; nobody has looked at the mapping yet",
  ].filter((sign): sign is string => typeof sign === "string" && sign !== "");
  return (
    <div className="flex flex-wrap gap-x-6 pt-2 text-margin text-second">
      {(short ? [] : signs).map((sign) => (
        <span key={sign}>{sign}</span>
      ))}
      <span className="chrome flex flex-wrap gap-x-5">{children}</span>
    </div>
  );
}
