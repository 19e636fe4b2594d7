import { patternOf } from "@/app/_page/rail/RailPatterns";
import { jagged } from "@/app/_page/rail/railLayout";
import type { Band, Column, Layer } from "./layOut";

/** One page as a measured section. */
export function SectionColumn({ column }: { readonly column: Column }) {
  return (
    <g>
      {column.layers.map((layer) => (
        <LayerShape key={layer.key} layer={layer} />
      ))}
    </g>
  );
}

function LayerShape({ layer }: { readonly layer: Layer }) {
  const { x, y, w, h, last, kind } = layer;
  const right = x + w;
  // Blocks side by side are parted by a jagged boundary, as a lateral change is drawn in the field.
  const edge = last ? `L${right} ${y + h}` : jagged(right, y, h, 3, false);
  const outline = `M${x} ${y}L${right} ${y}${edge}L${x} ${y + h}Z`;
  const fill = patternOf(kind);
  return (
    <>
      <path d={outline} fill="var(--paper)" />
      {fill ? <path d={outline} fill={fill} /> : null}
      <path d={outline} fill="none" stroke="var(--ink)" />
    </>
  );
}

/** A band between two pages that use one source, with its name along it. */
export function SourceBand({ band }: { readonly band: Band }) {
  const { left, right, older, label } = band;
  const middle = { x: (left.x + right.x) / 2, y: (left.top + left.bottom + right.top + right.bottom) / 4 };
  const slope = (right.top + right.bottom - left.top - left.bottom) / 2 / (right.x - left.x);
  const angle = (Math.atan(slope) * 180) / Math.PI;
  const shown = label.length > 22 ? `${label.slice(0, 21)}…` : label;
  return (
    <g>
      <path d={`M${left.x} ${left.top}L${right.x} ${right.top}V${right.bottom}L${left.x} ${left.bottom}Z`} fill="var(--ink)" opacity={0.045} />
      <path
        d={`M${left.x} ${left.top}L${right.x} ${right.top}M${left.x} ${left.bottom}L${right.x} ${right.bottom}`}
        stroke="var(--second)"
        strokeWidth={0.9}
        fill="none"
        {...(older ? { strokeDasharray: "5 4" } : {})}
      />
      <text
        transform={`translate(${middle.x} ${middle.y}) rotate(${angle.toFixed(1)})`}
        y={4}
        textAnchor="middle"
        fontSize={11}
        fill="var(--second)"
        stroke="var(--paper)"
        strokeWidth={4}
        strokeLinejoin="round"
        paintOrder="stroke"
      >
        {shown}
      </text>
    </g>
  );
}
