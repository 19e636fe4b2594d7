"use client";

import { useMemo, useState, type KeyboardEvent, type MouseEvent } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { classFill, classLine, classStyle, markerPath } from "@/app/_ui/classStyle";
import { Popover } from "@/app/_ui/Popover";
import { useSize } from "@/app/_ui/useSize";
import { Value } from "@/app/_ui/Value";
import { originsOf } from "@/app/_blocks/shared/picks";
import type { Table, TrendPoint, TrendResult } from "@/cells";
import { LeaveOut } from "./LeaveOut";
import { residualLayout, type ResidualMark } from "./residualLayout";
import { axisName } from "./trendWords";

export interface ResidualStripProps {
  readonly result: TrendResult;
  readonly table: Table | undefined;
  readonly picked: readonly number[];
  readonly view: PageView;
  /** Left out where nothing may be edited. */
  readonly onLeaveOut?: ((point: TrendPoint, reason: string) => void) | undefined;
}

const signedSigma = (r: number): string => `${r < 0 ? "−" : "+"}${Math.abs(r).toFixed(1)}σ`;
const nameOf = (point: TrendPoint): string => (point.sample === "" ? `row ${point.row}` : point.sample);

/** Each sample's residual against ±2σ, along x. One stop of the Tab key: arrows walk, Enter opens what can be done with a sample. */
export function ResidualStrip({ result, table, picked, view, onLeaveOut }: ResidualStripProps) {
  const [box, size] = useSize<HTMLDivElement>();
  const [cursor, setCursor] = useState<number | null>(null);
  const [open, setOpen] = useState(false);
  const width = Math.max(160, Math.floor(size.width));
  const layout = useMemo(() => residualLayout(result.points, width), [result.points, width]);
  const pickedRows = useMemo(() => new Set(picked), [picked]);
  if (layout.marks.length === 0) return null;
  const current: ResidualMark | undefined = cursor === null ? undefined : layout.marks[cursor];
  const last = layout.marks.length - 1;

  const onKeyDown = (event: KeyboardEvent): void => {
    const next = {
      ArrowRight: cursor === null ? 0 : cursor + 1,
      ArrowUp: cursor === null ? 0 : cursor + 1,
      ArrowLeft: cursor === null ? last : cursor - 1,
      ArrowDown: cursor === null ? last : cursor - 1,
      Home: 0,
      End: last,
    }[event.key];
    if (next !== undefined) {
      event.preventDefault();
      setCursor(Math.min(last, Math.max(0, next)));
    } else if (event.key === "Enter" && current !== undefined) {
      event.preventDefault();
      setOpen(true);
    }
  };
  const nearest = (event: MouseEvent<Element>): number => {
    const rect = event.currentTarget.getBoundingClientRect();
    const x = ((event.clientX - rect.left) / rect.width) * width;
    let best = 0;
    layout.marks.forEach((mark, i) => {
      if (Math.abs(mark.x - x) < Math.abs((layout.marks[best]?.x ?? 0) - x)) best = i;
    });
    return best;
  };

  const isDense = layout.marks.length > 400;
  const spoken = current ?? layout.marks[0];
  return (
    <div ref={box} className="relative mt-2">
      <div
        role="slider"
        tabIndex={0}
        aria-label={`Residuals of ${layout.marks.length} samples, along ${axisName(result.x)}`}
        aria-valuemin={1}
        aria-valuemax={layout.marks.length}
        aria-valuenow={(cursor ?? 0) + 1}
        aria-valuetext={spoken === undefined ? "" : `${nameOf(spoken.point)}, ${signedSigma(spoken.point.residual)}${spoken.point.outlier ? ", outlier" : ""}`}
        className="cursor-pointer"
        onKeyDown={onKeyDown}
        onBlur={() => (open ? undefined : setCursor(null))}
        onMouseMove={(event) => (open ? undefined : setCursor(nearest(event)))}
        onMouseLeave={() => (open ? undefined : setCursor(null))}
        onClick={(event) => {
          setCursor(nearest(event));
          setOpen(true);
        }}
      >
        <svg viewBox={`0 0 ${width} ${layout.height}`} width="100%" height={layout.height} aria-hidden="true" className="block overflow-visible font-sans">
          <rect x={layout.left} y={layout.middle - layout.two} width={width - layout.left} height={2 * layout.two} fill="var(--ink)" opacity={0.05} />
          <path d={`M${layout.left} ${layout.middle}H${width}`} stroke="var(--ink)" />
          <path
            d={`M${layout.left} ${layout.middle - layout.two}H${width}M${layout.left} ${layout.middle + layout.two}H${width}`}
            stroke="var(--axis)"
            strokeDasharray="2 3"
          />
          {[
            [layout.middle - layout.two, "+2σ"],
            [layout.middle, "0"],
            [layout.middle + layout.two, "−2σ"],
          ].map(([y, text]) => (
            <text key={text} x={layout.left - 6} y={Number(y) + 4} textAnchor="end" fontSize={11} fill="var(--second)">
              {text}
            </text>
          ))}
          {layout.marks.map(({ point, x, y, name }) => {
            const index = point.class === "" ? -1 : view.classIndex(point.class);
            return (
              <g key={point.index}>
                {!isDense && <path d={`M${x} ${layout.middle}V${y}`} stroke={classLine(index)} strokeWidth={1.2} />}
                <path
                  d={markerPath(index < 0 ? "circle" : classStyle(index).shape, x, y, isDense ? 2 : 3.3)}
                  fill={classFill(index)}
                  stroke={classLine(index)}
                  strokeWidth={isDense ? 0 : 1}
                />
                {pickedRows.has(point.index) && <circle cx={x} cy={y} r={8} fill="none" stroke="var(--indigo)" strokeWidth={1.4} />}
                {name !== null && (
                  <text x={name.x} y={name.y} textAnchor={name.anchor} fontSize={11} fill="var(--second)">
                    {nameOf(point)}
                  </text>
                )}
              </g>
            );
          })}
          {current !== undefined && <circle cx={current.x} cy={current.y} r={7} fill="none" stroke="var(--ink)" />}
        </svg>
      </div>
      {current !== undefined && !open && (
        <span
          aria-hidden="true"
          className="pointer-events-none absolute -top-3 border border-hairline bg-surface px-1 text-[11px] leading-4 whitespace-nowrap"
          style={{ left: current.x, transform: `translateX(${current.x > width / 2 ? "-100%" : "0"})` }}
        >
          {nameOf(current.point)} <span className="font-mono">{signedSigma(current.point.residual)}</span>
        </span>
      )}
      {current !== undefined && (
        <Popover
          label={nameOf(current.point)}
          open={open}
          onOpenChange={(next) => {
            setOpen(next);
            if (!next) setCursor(null);
          }}
          anchor={<span className="pointer-events-none absolute h-0 w-0" style={{ left: current.x, top: current.y + 8 }} />}
        >
          <div className="grid gap-3">
            <p>
              <b className="font-semibold">{nameOf(current.point)}</b>{" "}
              {current.point.class !== "" && <span className="text-second">{current.point.class}</span>}
              <span className="block text-margin text-second">
                {signedSigma(current.point.residual)} from the line{current.point.outlier ? ", flagged as an outlier" : ""}
              </span>
              <span className="block text-margin">
                {axisName(result.x)} <Value value={current.point.x} sigma={current.point.sigmaX} form={view.settings.uncertainty} />, {axisName(result.y)}{" "}
                <Value value={current.point.y} sigma={current.point.sigmaY} form={view.settings.uncertainty} />
              </span>
            </p>
            {view.mode !== "frozen" && table !== undefined && (
              <Button
                className="justify-self-start"
                onClick={() => {
                  view.pick(originsOf(table, [current.point.index]));
                  setOpen(false);
                  setCursor(null);
                }}
              >
                Pick it on the page
              </Button>
            )}
            {onLeaveOut !== undefined && (
              <LeaveOut
                what={nameOf(current.point)}
                onLeaveOut={(reason) => {
                  onLeaveOut(current.point, reason);
                  setOpen(false);
                  setCursor(null);
                }}
              />
            )}
          </div>
        </Popover>
      )}
      {layout.clipped > 0 && (
        <p className="text-[11px] leading-4 text-second">
          {layout.clipped === 1 ? "One sample lies" : `${layout.clipped} samples lie`} beyond 8σ and stand at the edge.
        </p>
      )}
    </div>
  );
}
