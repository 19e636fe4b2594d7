import type { PageView } from "@/app/_page/contract";
import { pickedIndices, rowLabel } from "@/app/_blocks/shared/picks";
import { handleOf, tableOf } from "@/app/_blocks/shared/tableOf";
import type { PlotResult } from "@/cells";
import { hasPlace } from "./isDrawn";
import { PointNumber } from "./PointNumber";
import { valuesAt } from "./underPointer";

/** More picked points than these are read off the table. */
const most = 3;

/** The numbers of the points picked on a plot, beside it: the way from a point to where it comes from. */
export function PickedPoints({ result, view }: { readonly result: PlotResult; readonly view: PageView }) {
  const plot = handleOf(view.results, result);
  if (view.picked.length === 0 || result.plot === "pattern") return null;
  const points = result.layers.flatMap((layer) => {
    if (layer.what !== "samples") return [];
    const table = tableOf(view.results, layer.data);
    return pickedIndices(table, view.picked)
      .filter((index) => hasPlace(layer.points, index, result.plot))
      .map((index) => ({ layer, index, label: rowLabel(table, index) }));
  });
  if (points.length === 0 || points.length > most) return null;
  return (
    <ul aria-label="Picked points" className="mt-2 border-t border-hairline pt-2 text-margin">
      {points.map(({ layer, index, label }) => {
        const at = (values: Float64Array): number | null => values[index] ?? null;
        const { x, y, sigmaX, sigmaY, correlation } = layer.points;
        const place = { x: at(x), y: at(y), sigmaX: at(sigmaX), sigmaY: at(sigmaY), correlation: at(correlation) ?? NaN };
        return (
          <li key={`${layer.drawn} ${index}`} className="py-0.5">
            <span className="font-medium">{label}</span>
            {valuesAt(result, place, layer.of).map((each, i) => (
              <span key={each.of} className="flex justify-between gap-2">
                <span className="min-w-0 truncate text-second">{each.of}</span>
                <PointNumber
                  value={each.value}
                  sigma={each.sigma}
                  of={each.of}
                  name={`${layer.drawn}:${"xyz"[i] ?? ""}`}
                  asks={{ name: String(layer.drawn), title: label, index }}
                  view={view}
                  plot={plot}
                />
              </span>
            ))}
          </li>
        );
      })}
    </ul>
  );
}
