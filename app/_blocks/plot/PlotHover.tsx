"use client";

import { Fragment } from "react";
import type { PageView } from "@/app/_page/contract";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { Value } from "@/app/_ui/Value";
import { rowLabel } from "@/app/_blocks/shared/picks";
import { tableOf } from "@/app/_blocks/shared/tableOf";
import type { PlotResult } from "@/cells";
import type { Hovered } from "./PlotCanvas";
import { pointedAt } from "./underPointer";

export interface PlotHoverProps {
  readonly hovered: Hovered;
  readonly result: PlotResult;
  readonly view: PageView;
  readonly width: number;
}

/** What is under the pointer: sample, values with their σ, and the reference they come from. */
export function PlotHover({ hovered, result, view, width }: PlotHoverProps) {
  const { ref } = hovered;
  const form = view.settings.uncertainty;
  const pointed = pointedAt(result, ref);
  if (pointed === null) return null;
  const isRight = hovered.x > width * 0.6;
  return (
    <div
      aria-hidden="true"
      className="pointer-events-none absolute z-10 w-max max-w-64 border border-ink bg-surface px-3 py-2 text-margin"
      style={{ top: hovered.y, transform: `translate(${isRight ? "calc(-100% - 12px)" : "12px"}, -50%)`, left: hovered.x }}
    >
      <p className="font-semibold">
        {pointed.title ?? rowLabel(tableOf(view.results, ref.data), ref.index)}
        {pointed.class !== "" && (
          <span className="ml-3 font-normal text-second">
            <ClassMarker index={view.classIndex(pointed.class)} className="mr-1.5" />
            {pointed.class}
          </span>
        )}
      </p>
      <dl className="mt-1 grid grid-cols-[auto_auto] gap-x-3">
        {pointed.values.map(({ of, value, sigma }) => (
          <Fragment key={of}>
            <dt className="text-second">{of}</dt>
            <dd className="text-right">
              <Value value={value} sigma={sigma} form={form} />
            </dd>
          </Fragment>
        ))}
        {Number.isFinite(pointed.correlation) && pointed.correlation !== 0 && (
          <>
            <dt className="text-second">correlation</dt>
            <dd className="text-right font-mono">{pointed.correlation.toFixed(2).replace("-", "−")}</dd>
          </>
        )}
      </dl>
      {pointed.reference !== "" && <p className="mt-1 text-second">{pointed.reference}</p>}
    </div>
  );
}
