import type { PageView } from "@/app/_page/contract";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import type { PlotResult } from "@/cells";
import { isDrawn } from "./isDrawn";

/** Classes drawn on a plot, with how many samples of each; in the order of the page's class sequence. */
export function classCounts(result: PlotResult, classIndex: (name: string) => number): readonly { readonly name: string; readonly count: number }[] {
  const counts = new Map<string, number>();
  for (const layer of result.layers) {
    if (layer.what !== "samples") continue;
    for (let i = 0; i < layer.points.x.length; i++) {
      if (!isDrawn(layer.points, i, result.plot)) continue;
      const name = layer.classes[i] ?? "";
      counts.set(name, (counts.get(name) ?? 0) + 1);
    }
  }
  const place = (name: string): number => (name === "" ? Infinity : classIndex(name));
  return Array.from(counts, ([name, count]) => ({ name, count })).sort((a, b) => place(a.name) - place(b.name));
}

/** The key of classes: marker, name and how many are drawn. */
export function ClassKey({ result, view }: { readonly result: PlotResult; readonly view: PageView }) {
  const counts = classCounts(result, (name) => view.classIndex(name));
  const aside = result.notDrawn["set aside"] ?? 0;
  if (counts.length === 0) return null;
  return (
    <ul aria-label="Classes" className="grid grid-cols-[repeat(auto-fill,minmax(108px,1fr))] gap-x-3 gap-y-1 pt-3 text-margin">
      {counts.map(({ name, count }) => (
        <li key={name} className="flex min-w-0 items-baseline">
          <ClassMarker index={name === "" ? -1 : view.classIndex(name)} className="mr-2 self-center" />
          <span className="min-w-0 truncate">{name === "" ? "no class" : name}</span>
          <span className="ml-1.5 text-second">{count}</span>
        </li>
      ))}
      {aside > 0 && (
        <li className="flex items-baseline text-second">
          <span aria-hidden="true" className="mr-2">
            ×
          </span>
          set aside <span className="ml-1.5">{aside}</span>
        </li>
      )}
    </ul>
  );
}
