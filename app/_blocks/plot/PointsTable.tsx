"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { originsOf, pickedIndices, rowLabel } from "@/app/_blocks/shared/picks";
import { handleOf, tableOf } from "@/app/_blocks/shared/tableOf";
import { State, stateName, type PlotResult } from "@/cells";
import { hasPlace } from "./isDrawn";
import { axisInWords } from "./plotWords";
import { PointNumber, type PointAsked } from "./PointNumber";
import { valuesAt } from "./underPointer";

/** Rows shown at once; a table that nobody can read to its end only slows the page. */
const step = 200;

/** The same as the drawing, as a table: for those who listen, for the keyboard, and for reading a number off. */
export function PointsTable({ result, view }: { readonly result: PlotResult; readonly view: PageView }) {
  const plot = handleOf(view.results, result);
  const [most, setMost] = useState(step);
  const rows = result.layers.flatMap((layer) => {
    if (layer.what !== "samples") return [];
    const table = tableOf(view.results, layer.data);
    const picked = new Set(pickedIndices(table, view.picked));
    return Array.from(layer.points.x, (x, index) => ({ layer, table, index, x, isPicked: picked.has(index) })).filter((row) =>
      hasPlace(row.layer.points, row.index, result.plot),
    );
  });
  const bodies = result.layers.flatMap((layer) => (layer.what === "bodies" ? layer.bodies.map((body) => ({ ...body, drawn: layer.drawn })) : []));
  const hasY = result.plot !== "distribution";
  const isPattern = result.plot === "pattern";
  const isTernary = result.plot === "ternary";
  const hasCorrelation = result.plot === "scatter";
  const means = result.layers.flatMap((layer) =>
    layer.what === "means" ? layer.classes.flatMap(({ name, points }) => points.map((point) => ({ name, drawn: layer.drawn, ...point }))) : [],
  );
  const numbers =
    isTernary && result.corners !== undefined
      ? [result.corners.x, result.corners.y, result.corners.z].map((corner) => `${corner}, %`)
      : isPattern
        ? ["value", axisInWords(result.y, undefined)]
        : [axisInWords(result.x, undefined), ...(hasY ? [axisInWords(result.y, undefined)] : [])];
  const heads = ["sample", "class", ...numbers, ...(hasCorrelation ? ["correlation"] : [])];
  /** Cells of a place: what the pointer would say there, or the value's name and number in a pattern. */
  const cells = (place: Parameters<typeof valuesAt>[1], of: string | undefined, asks: PointAsked) =>
    isPattern ? (
      <>
        <td className="pr-3 text-right">{of}</td>
        <td className="pr-3 text-right">
          <PointNumber value={place.y} sigma={place.sigmaY} of={of ?? ""} name={`${asks.name}:${of ?? ""}`} asks={asks} view={view} plot={plot} />
        </td>
      </>
    ) : (
      valuesAt(result, place, of).map((each, i) => (
        <td key={each.of} className="pr-3 text-right">
          <PointNumber value={each.value} sigma={each.sigma} of={each.of} name={`${asks.name}:${"xyz"[i] ?? ""}`} asks={asks} view={view} plot={plot} />
        </td>
      ))
    );
  return (
    <div className="mt-2 max-h-96 overflow-auto" tabIndex={0} role="region" aria-label="What is drawn, as a table">
      <table className="w-full border-collapse text-margin">
        <thead>
          <tr>
            {heads.map((head, i) => (
              <th
                key={i}
                scope="col"
                className={`sticky top-0 border-b border-ink bg-paper py-1 pr-3 font-normal whitespace-nowrap text-second ${i < 2 ? "text-left" : "text-right"}`}
              >
                {head}
              </th>
            ))}
            {view.mode !== "frozen" && (
              <th scope="col" className="sticky top-0 border-b border-ink bg-paper">
                <span className="sr-only">pick</span>
              </th>
            )}
          </tr>
        </thead>
        <tbody>
          {bodies.map((b) => (
            <tr key={`body ${b.name}`} className="border-b border-hairline">
              <th scope="row" className="py-0.5 pr-3 text-left font-medium">
                {b.body ?? b.name}
              </th>
              <td className="pr-3 text-second">body, {b.compilation}</td>
              {cells(b, b.of, { name: `${b.drawn}:${b.body ?? b.name}`, title: b.body ?? b.name })}
              {hasCorrelation && <td className="pr-3 text-right font-mono">{b.correlation.toFixed(2).replace("-", "−")}</td>}
              {view.mode !== "frozen" && <td />}
            </tr>
          ))}
          {means.map((mean) => (
            <tr key={`mean ${mean.name} ${mean.of}`} className="border-b border-hairline">
              <th scope="row" className="py-0.5 pr-3 text-left font-medium">
                mean of {mean.n}
              </th>
              <td className="pr-3 whitespace-nowrap">
                {mean.name !== "" && <ClassMarker index={view.classIndex(mean.name)} className="mr-2" />}
                {mean.name}
              </td>
              {cells({ x: mean.x, y: mean.y, sigmaX: 0, sigmaY: mean.sigmaY, correlation: 0 }, mean.of, {
                name: `${mean.drawn}:${mean.name}`,
                title: `the mean of ${mean.name}`,
              })}
              {view.mode !== "frozen" && <td />}
            </tr>
          ))}
          {rows.slice(0, most).map(({ layer, table, index, x, isPicked }) => {
            const name = layer.classes[index] ?? "";
            const correlation = layer.points.correlation[index] ?? NaN;
            const label = rowLabel(table, index);
            return (
              <tr
                key={`${layer.drawn} ${layer.of ?? ""} ${index}`}
                className={`border-b border-hairline ${isPicked ? "bg-surface shadow-[inset_2px_0_var(--indigo)]" : ""}`}
              >
                <th scope="row" className="py-0.5 pr-3 pl-2 text-left font-mono font-normal">
                  {label}
                </th>
                <td className="pr-3 whitespace-nowrap">
                  {name !== "" && <ClassMarker index={view.classIndex(name)} className="mr-2" />}
                  {name}
                  {layer.points.state[index] !== State.present && <span className="ml-2 text-second">{stateName(layer.points.state[index] ?? 0)}</span>}
                </td>
                {cells(
                  {
                    x,
                    y: layer.points.y[index] ?? null,
                    sigmaX: layer.points.sigmaX[index] ?? null,
                    sigmaY: layer.points.sigmaY[index] ?? null,
                    correlation,
                  },
                  layer.of,
                  { name: String(layer.drawn), title: label, index },
                )}
                {hasCorrelation && (
                  <td className="pr-3 text-right font-mono">{Number.isFinite(correlation) ? correlation.toFixed(2).replace("-", "−") : "–"}</td>
                )}
                {view.mode !== "frozen" && (
                  <td className="text-right">
                    {table !== undefined && (
                      <Button
                        aria-pressed={isPicked}
                        aria-label={`${isPicked ? "Let go of" : "Pick"} ${label}`}
                        onClick={() =>
                          view.pick(
                            isPicked
                              ? view.picked.filter((p) => !(table.origins[index] ?? []).some((o) => o.table === p.table && o.row === p.row))
                              : [...view.picked, ...originsOf(table, [index])],
                          )
                        }
                      >
                        {isPicked ? "Let go" : "Pick"}
                      </Button>
                    )}
                  </td>
                )}
              </tr>
            );
          })}
        </tbody>
      </table>
      {rows.length > most && (
        <Button className="mt-2" onClick={() => setMost(most + step)}>
          Show {Math.min(step, rows.length - most)} more of {rows.length}
        </Button>
      )}
    </div>
  );
}
