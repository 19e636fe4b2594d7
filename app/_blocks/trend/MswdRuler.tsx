import { ticks } from "@/app/_blocks/shared/scale";
import { mswdPlace, rulerEnd } from "./trendWords";

/** The MSWD on the range in which it is expected; decoration, the same stands in words above it. */
export function MswdRuler({ mswd, expected }: { readonly mswd: number; readonly expected: readonly [number, number] }) {
  const end = rulerEnd(mswd, expected);
  const at = (v: number): number => (v / end) * 100;
  const marks = ticks(0, end, 4);
  const color = mswdPlace(mswd, expected) === "inside" ? "var(--indigo)" : "var(--vermilion)";
  return (
    <div aria-hidden="true" className="relative mt-1 mb-1 ml-[88px] h-9 max-[719px]:ml-[72px]">
      <svg viewBox="0 0 100 24" preserveAspectRatio="none" width="100%" height="24" className="block overflow-visible">
        <path d="M0 12.5H100" stroke="var(--axis)" vectorEffect="non-scaling-stroke" />
        <path d={`M${at(expected[0])} 12.5H${at(expected[1])}`} stroke="var(--ink)" strokeWidth={3} vectorEffect="non-scaling-stroke" />
        <path d={marks.map((m) => `M${at(m)} 12V17`).join("")} stroke="var(--second)" vectorEffect="non-scaling-stroke" />
        <path d={`M${at(Math.min(mswd, end))} 2V20`} stroke={color} strokeWidth={3} vectorEffect="non-scaling-stroke" />
      </svg>
      {marks.map((m) => (
        <span
          key={m}
          className="absolute top-5 text-[11px] leading-4 text-second"
          style={{ left: `${at(m)}%`, transform: m === 0 ? "none" : m >= end ? "translateX(-100%)" : "translateX(-50%)" }}
        >
          {m}
        </span>
      ))}
    </div>
  );
}
