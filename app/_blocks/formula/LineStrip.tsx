"use client";

import { useMemo, useRef, useState, type KeyboardEvent, type MouseEvent } from "react";
import type { PageView } from "@/app/_page/contract";
import { classLine } from "@/app/_ui/classStyle";
import { classNames } from "@/app/_ui/classNames";
import { formatValue, speakValue, withUnit } from "@/app/_ui/concise";
import { absent, stateSymbols } from "@/app/_blocks/shared/words";
import { rowLabel } from "@/app/_blocks/shared/picks";
import type { LineResult, Table } from "@/cells";
import { buildStrip, countFinite, leastRow, nearestRow, placeInWalk, rowsByValue, stripSlot, tickPath } from "./strip";

export interface LineStripProps {
  readonly block: string;
  readonly line: LineResult;
  readonly table: Table | undefined;
  readonly picked: readonly number[];
  readonly view: PageView;
  /** Whether the hairline of an open trace may run to the margin from here. */
  readonly reachesMargin: boolean;
}

const percentOf = (slot: number): string => `${slot / 10}%`;

/**
 * The distribution of a line: one tick a sample at its value in its class's colour, the picked samples taller, what cannot be
 * drawn counted past the break. The strip is one stop of the Tab key; the arrow keys walk from value to value, Enter asks
 * where the number comes from.
 */
export function LineStrip({ block, line, table, picked, view, reachesMargin }: LineStripProps) {
  const classesOf = line.byClass ?? table?.classes ?? noClasses;
  const strip = useMemo(() => buildStrip(line.value, classesOf), [line.value, classesOf]);
  const many = useMemo(() => countFinite(line.value), [line.value]);
  const least = useMemo(() => leastRow(line.value), [line.value]);
  // Ordering a hundred thousand rows takes its time: only who walks along the strip waits for it.
  const walk = useRef<{ readonly values: Float64Array; readonly rows: readonly number[] } | null>(null);
  const walked = (): readonly number[] => {
    if (walk.current?.values !== line.value) walk.current = { values: line.value, rows: rowsByValue(line.value) };
    return walk.current.rows;
  };
  const [cursor, setCursor] = useState<number | null>(null);
  if (strip === null) return null;

  const label = (index: number): string => (line.byClass === undefined ? rowLabel(table, index) : (line.byClass[index] ?? ""));
  const shown = (index: number): string => formatValue(line.value[index] ?? NaN, line.sigma[index] ?? NaN, { form: view.settings.uncertainty });
  const slot = (index: number): number => stripSlot(line.value[index] ?? NaN, strip.from, strip.to);
  const drawnPicks = line.byClass === undefined ? picked.filter((index) => Number.isFinite(line.value[index] ?? NaN)) : [];
  const named = cursor ?? (drawnPicks.length === 1 ? (drawnPicks[0] ?? null) : null);
  const request = view.traced?.request;
  const isTraced = named !== null && request?.block === block && request.name === line.name && request.index === named;
  const traceRow = (index: number): void => view.trace({ block, name: line.name, index });

  const nearest = (event: MouseEvent<HTMLElement>): number => {
    const box = event.currentTarget.getBoundingClientRect();
    return nearestRow(line.value, strip.from + ((event.clientX - box.left) / box.width) * (strip.to - strip.from));
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    const place = cursor === null ? -1 : placeInWalk(line.value, cursor);
    const last = many - 1;
    const next = {
      ArrowRight: place + 1,
      ArrowUp: place + 1,
      ArrowLeft: place < 0 ? last : place - 1,
      ArrowDown: place < 0 ? last : place - 1,
      Home: 0,
      End: last,
    }[event.key];
    if (next !== undefined) {
      event.preventDefault();
      setCursor(walked()[Math.min(Math.max(next, 0), last)] ?? null);
    } else if (event.key === "Enter" && cursor !== null) {
      event.preventDefault();
      traceRow(cursor);
    } else if (event.key === "Escape" && cursor !== null) {
      event.stopPropagation();
      setCursor(null);
    }
  };

  const current = cursor ?? named ?? Math.max(0, least);
  const gaps = line.byClass === undefined ? absent(line.states) : [];
  return (
    <div className="relative mt-2 mr-[88px] h-12">
      <div
        role="slider"
        tabIndex={0}
        aria-label={`Values of ${line.name}, from the least to the greatest`}
        aria-valuemin={1}
        aria-valuemax={many}
        aria-valuenow={current === least ? 1 : placeInWalk(line.value, current) + 1}
        aria-valuetext={`${label(current)}, ${speakValue(line.value[current] ?? NaN, line.sigma[current] ?? NaN)}`}
        aria-orientation="horizontal"
        className="absolute inset-x-0 top-3 h-5 cursor-crosshair"
        onKeyDown={onKeyDown}
        onBlur={() => setCursor(null)}
        onMouseMove={(event) => setCursor(nearest(event))}
        onMouseLeave={() => setCursor(null)}
        onClick={(event) => {
          const index = nearest(event);
          if (index >= 0) traceRow(index);
        }}
      >
        <svg viewBox="0 0 1000 20" preserveAspectRatio="none" width="100%" height="20" aria-hidden="true" className="block overflow-visible">
          <path d="M0 19.5H1000" stroke="var(--axis)" vectorEffect="non-scaling-stroke" />
          {strip.classes.map((one) => (
            <path
              key={one.class}
              d={tickPath(one.slots, 5)}
              fill="none"
              stroke={classLine(one.class === "" ? -1 : view.classIndex(one.class))}
              strokeWidth={1.4}
              vectorEffect="non-scaling-stroke"
            />
          ))}
          {drawnPicks.length > 0 && (
            <path d={tickPath(drawnPicks.map(slot), 0)} fill="none" stroke="var(--indigo)" strokeWidth={2} vectorEffect="non-scaling-stroke" />
          )}
          {cursor !== null && <path d={tickPath([slot(cursor)], 0)} fill="none" stroke="var(--indigo)" strokeWidth={2} vectorEffect="non-scaling-stroke" />}
        </svg>
      </div>
      {gaps.length > 0 && (
        <span className="absolute top-3 left-full flex h-5 w-[88px] items-end gap-2 pl-4 font-mono text-[11px] leading-4 whitespace-nowrap text-second">
          <span aria-hidden="true" className="absolute right-0 bottom-0 left-3 border-t border-dotted border-axis" />
          {gaps.map(({ state, count }) => (
            <span key={state} title={`${count} ${state}`}>
              {stateSymbols[state]}
              {count}
            </span>
          ))}
        </span>
      )}
      {named !== null && (
        <Pick
          at={slot(named)}
          name={label(named)}
          value={withUnit(shown(named), line.unit)}
          asks={cursor === null}
          onTrace={() => traceRow(named)}
          leads={isTraced && reachesMargin}
        />
      )}
    </div>
  );
}

const noClasses: readonly string[] = [];

interface PickProps {
  readonly at: number;
  readonly name: string;
  readonly value: string;
  readonly asks: boolean;
  readonly leads: boolean;
  onTrace(): void;
}

/** The name and value of one sample over its tick; a trace's hairline starts at it. */
function Pick({ at, name, value, asks, leads, onTrace }: PickProps) {
  const turns = at > 700;
  return (
    <>
      <span
        className={classNames(
          "pointer-events-none absolute -top-2 h-7 border-indigo text-margin whitespace-nowrap",
          turns ? "-translate-x-full border-r pr-1.5" : "-translate-x-px border-l pl-1.5",
        )}
        style={{ left: percentOf(at) }}
      >
        {name}{" "}
        {asks ? (
          <button
            type="button"
            className="pointer-events-auto border-b border-indigo font-mono text-indigo"
            onClick={onTrace}
            aria-label={`Trace ${value} of ${name}`}
          >
            {value}
          </button>
        ) : (
          <span className="font-mono">{value}</span>
        )}
      </span>
      {leads && (
        <span
          aria-hidden="true"
          className="absolute -right-[120px] top-0 border-t border-indigo max-[1199px]:hidden"
          style={{ left: turns ? percentOf(at) : `calc(${percentOf(at)} + 14ch)` }}
        />
      )}
    </>
  );
}
