"use client";

import type { PageView } from "@/app/_page/contract";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { Value } from "@/app/_ui/Value";
import { rowLabel } from "@/app/_blocks/shared/picks";
import { tableOf } from "@/app/_blocks/shared/tableOf";
import type { PlotResult } from "@/cells";
import type { Hovered } from "./PlotCanvas";
import { axisInWords } from "./plotWords";

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
  const samples = result.layers.find((layer) => layer.what === "samples" && layer.data === ref.data);
  const body =
    ref.index < 0 ? result.layers.flatMap((layer) => (layer.what === "bodies" ? layer.bodies : [])).find((b) => `body ${b.name}` === ref.data) : undefined;
  if (samples?.what !== "samples" && body === undefined) return null;
  const table = tableOf(view.results, ref.data);
  const name = samples?.what === "samples" ? (samples.classes[ref.index] ?? "") : "";
  const isRight = hovered.x > width * 0.6;
  const points = samples?.what === "samples" ? samples.points : undefined;
  const x = body?.x ?? points?.x[ref.index] ?? null;
  const y = body?.y ?? points?.y[ref.index] ?? null;
  const sx = body === undefined ? (points?.sigmaX[ref.index] ?? null) : body.sigmaX;
  const sy = body === undefined ? (points?.sigmaY[ref.index] ?? null) : body.sigmaY;
  const correlation = body?.correlation ?? points?.correlation[ref.index] ?? NaN;
  const reference = samples?.what === "samples" ? (samples.references[ref.index] ?? "") : "";
  return (
    <div
      aria-hidden="true"
      className="pointer-events-none absolute z-10 w-max max-w-64 border border-ink bg-surface px-3 py-2 text-margin"
      style={{ top: hovered.y, transform: `translate(${isRight ? "calc(-100% - 12px)" : "12px"}, -50%)`, left: hovered.x }}
    >
      <p className="font-semibold">
        {body === undefined ? rowLabel(table, ref.index) : `${body.name}, ${body.compilation}`}
        {name !== "" && (
          <span className="ml-3 font-normal text-second">
            <ClassMarker index={view.classIndex(name)} className="mr-1.5" />
            {name}
          </span>
        )}
      </p>
      <dl className="mt-1 grid grid-cols-[auto_auto] gap-x-3">
        <dt className="text-second">{axisInWords(result.x, undefined)}</dt>
        <dd className="text-right">
          <Value value={x} sigma={sx} form={form} />
        </dd>
        {result.plot !== "distribution" && (
          <>
            <dt className="text-second">{axisInWords(result.y, undefined)}</dt>
            <dd className="text-right">
              <Value value={y} sigma={sy} form={form} />
            </dd>
          </>
        )}
        {Number.isFinite(correlation) && correlation !== 0 && result.plot !== "distribution" && (
          <>
            <dt className="text-second">correlation</dt>
            <dd className="text-right font-mono">{correlation.toFixed(2).replace("-", "−")}</dd>
          </>
        )}
      </dl>
      {reference !== "" && <p className="mt-1 text-second">{reference}</p>}
    </div>
  );
}
