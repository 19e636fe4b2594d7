import type { BlockKind } from "@/cells";

/** Id of the fill of a kind; notes are blank. */
export function patternOf(kind: BlockKind): string | undefined {
  return kind === "note" ? undefined : `url(#rail-${kind})`;
}

/** Fills of the section's layers: dots data, oblique hatch formula, open circles plot, long dashes trend, bricks budget. */
export function RailPatterns() {
  const line = { stroke: "var(--pattern)", fill: "none" } as const;
  return (
    <defs>
      <pattern id="rail-data" width={8} height={8} patternUnits="userSpaceOnUse">
        <circle cx={2} cy={2} r={0.9} fill="var(--pattern)" />
        <circle cx={6} cy={6} r={0.9} fill="var(--pattern)" />
      </pattern>
      <pattern id="rail-formula" width={6} height={6} patternUnits="userSpaceOnUse">
        <path d="M-1.5 1.5l3-3M0 6L6 0M4.5 7.5l3-3" strokeWidth={0.8} {...line} />
      </pattern>
      <pattern id="rail-plot" width={12} height={12} patternUnits="userSpaceOnUse">
        <circle cx={3.5} cy={3.5} r={2.1} strokeWidth={0.8} {...line} />
        <circle cx={9.5} cy={9.5} r={2.1} strokeWidth={0.8} {...line} />
      </pattern>
      <pattern id="rail-trend" width={14} height={8} patternUnits="userSpaceOnUse">
        <path d="M1 2h8M8 6h6M0 6h2" strokeWidth={0.9} {...line} />
      </pattern>
      <pattern id="rail-budget" width={12} height={12} patternUnits="userSpaceOnUse">
        <path d="M0 .5h12M0 6.5h12M3 .5v6M9 6.5v6" strokeWidth={0.8} {...line} />
      </pattern>
    </defs>
  );
}
