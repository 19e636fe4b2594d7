import type { RailLayer } from "./railLayout";

export interface RailTiesProps {
  readonly layers: readonly RailLayer[];
  /** Handle of the hovered or focused layer. */
  readonly handle: string;
  readonly readsFrom: ReadonlyMap<string, readonly string[]>;
  /** Right side of the section. */
  readonly right: number;
}

/** Hairlines along the rail: a hollow circle at what the layer reads from, an arrowhead at what it feeds. */
export function RailTies({ layers, handle, readsFrom, right }: RailTiesProps) {
  const own = layers.find((l) => l.handle === handle);
  if (own === undefined) return null;
  const from = new Set(readsFrom.get(handle) ?? []);
  const ties = layers.flatMap((layer) => {
    if (layer.handle === handle) return [];
    if (from.has(layer.handle)) return [{ layer, into: true }];
    return readsFrom.get(layer.handle)?.includes(handle) ? [{ layer, into: false }] : [];
  });
  let out = 0;
  return (
    <g fill="none" stroke="var(--indigo)" pointerEvents="none">
      <path d={`M${own.x + 5} ${own.y}H${own.x}V${own.y + own.h}h5`} strokeWidth={3} />
      {ties.map(({ layer, into }, i) => {
        const across = right + 8 + Math.min(i + 1, 10) * 6;
        const middle = own.y + own.h / 2;
        const start = Math.min(own.y + own.h - 2, Math.max(own.y + 2, into ? middle - 8 : middle + out++ * 6));
        const end = layer.y + Math.min(layer.h / 2, 18);
        const reach = (layer.x + layer.w < right - 2 ? layer.x + layer.w - 4 : right + 1) + 3;
        const way = `M${right + 5} ${start}H${across}V${end}H${reach}`;
        return (
          <g key={layer.key}>
            <path d={way} stroke="var(--paper)" strokeWidth={3} />
            <path d={way} />
            {into ? <circle cx={reach} cy={end} r={3} fill="var(--paper)" /> : <path d={`M${reach - 2} ${end}l6 -3.5v7z`} fill="var(--indigo)" stroke="none" />}
          </g>
        );
      })}
    </g>
  );
}
