import type { BlockKind } from "@/cells";

const dots = [
  [4, 4],
  [8, 8],
  [12, 4],
  [16, 8],
] as const;

function Filling({ kind }: { readonly kind: BlockKind }) {
  const line = { fill: "none", stroke: "currentColor", strokeWidth: 0.9 } as const;
  switch (kind) {
    case "data":
      return dots.map(([x, y]) => <circle key={x} cx={x} cy={y} r={0.9} fill="currentColor" />);
    case "formula":
      return <path d="M1 7L7 1M1 11L11 1M5 11L15 1M9 11L19 1M13 11L19 5" {...line} />;
    case "plot":
      return [5, 10, 15].map((x) => <circle key={x} cx={x} cy={6} r={2.1} {...line} />);
    case "trend":
      return <path d="M3 4h6M12 4h6M1 8h4M8 8h7" {...line} />;
    case "budget":
      return <path d="M1 6h18M7 1v5M14 1v5M4 6v5M11 6v5M17 6v5" {...line} />;
    case "note":
      return null;
  }
}

/** The pattern of a kind of block, 20 × 12, as it fills a layer of the rail. */
export function KindSwatch({ kind, className }: { readonly kind: BlockKind; readonly className?: string }) {
  return (
    <svg width={20} height={12} viewBox="0 0 20 12" aria-hidden="true" className={`shrink-0 ${className ?? ""}`}>
      <Filling kind={kind} />
      <rect x={0.5} y={0.5} width={19} height={11} fill="none" stroke="currentColor" />
    </svg>
  );
}
