import type { PageView } from "@/app/_page/contract";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { classCodes } from "@/app/_blocks/shared/classCodes";
import type { PlotResult } from "@/cells";
import { isDrawn } from "./isDrawn";
import { PickedPoints } from "./PickedPoints";

/** Classes drawn on a plot, with how many samples of each; in the order of the page's class sequence. */
export function classCounts(result: PlotResult, classIndex: (name: string) => number): readonly { readonly name: string; readonly count: number }[] {
  const counts = new Map<string, number>();
  const counted = new Set<number>();
  for (const layer of result.layers) {
    if (layer.what === "means") for (const { name, samples } of layer.classes) counts.set(name, (counts.get(name) ?? 0) + samples);
    if (layer.what !== "samples") continue;
    // A pattern has a layer for every value: a sample counts once.
    if (layer.of !== undefined) {
      if (counted.has(layer.drawn)) continue;
      counted.add(layer.drawn);
      for (const name of patternClasses(result, layer.drawn)) counts.set(name, (counts.get(name) ?? 0) + 1);
      continue;
    }
    const { names, codes } = classCodes(layer.classes);
    const found = new Uint32Array(names.length);
    for (let i = 0; i < codes.length; i++) {
      const code = codes[i] ?? 0;
      if (isDrawn(layer.points, i, result.plot)) found[code] = (found[code] ?? 0) + 1;
    }
    found.forEach((count, code) => {
      const name = names[code] ?? "";
      if (count > 0) counts.set(name, (counts.get(name) ?? 0) + count);
    });
  }
  const place = (name: string): number => (name === "" ? Infinity : classIndex(name));
  return Array.from(counts, ([name, count]) => ({ name, count })).sort((a, b) => place(a.name) - place(b.name));
}

/** The class of every sample that a line of a pattern draws at least one value of. */
function patternClasses(result: PlotResult, line: number): readonly string[] {
  const layers = result.layers.filter((layer) => layer.what === "samples" && layer.drawn === line);
  const first = layers[0];
  if (first?.what !== "samples") return [];
  return Array.from(first.points.x, (_, i) => i).flatMap((i) =>
    layers.some((layer) => layer.what === "samples" && isDrawn(layer.points, i, result.plot)) ? [first.classes[i] ?? ""] : [],
  );
}

/** The key of classes: marker, name and how many are drawn; under it the numbers of the points that are picked. */
export function ClassKey({ result, view }: { readonly result: PlotResult; readonly view: PageView }) {
  const counts = classCounts(result, (name) => view.classIndex(name));
  const aside = result.notDrawn["set aside"] ?? 0;
  if (counts.length === 0) return <PickedPoints result={result} view={view} />;
  return (
    <>
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
      <PickedPoints result={result} view={view} />
    </>
  );
}
