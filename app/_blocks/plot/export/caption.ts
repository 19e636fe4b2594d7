import { counted, formatNumber, formatP, formatValue } from "@/app/_ui/concise";
import { absent, listed } from "@/app/_blocks/shared/words";
import { resultOf } from "@/app/_blocks/shared/tableOf";
import { condensationTemperature, lookupBody, type OwnBody, type PageResults, type PlotBlock, type PlotLayer, type PlotResult } from "@/cells";
import { heldBy } from "../ellipse";
import { mostEllipses, axisInWords } from "../plotWords";
import { sumInWords } from "../ternaryTraces";

export interface CaptionOf {
  readonly block: PlotBlock;
  readonly result: PlotResult;
  readonly results: PageResults;
  /** Bodies of the group's own that the page carries, by id. */
  readonly ownBodies: Readonly<Record<string, OwnBody>>;
  /** Name of a block by its handle. */
  nameOf(handle: string): string;
}

const methods = {
  york: "York fit (York et al. 2004, errors on both axes with their correlation)",
  "ordinary least squares": "ordinary least squares",
  "reduced major axis": "reduced major axis",
  "theil-sen": "Theil–Sen",
} as const;

/** What a figure shows, in sentences that can stand under it in print: every count, convention, method and source. */
export function captionOf(of: CaptionOf): string {
  const { block, result } = of;
  const sentences = [
    heading(of),
    counts(of),
    ...ellipses(result),
    ...patternSays(of),
    ...result.layers.flatMap((layer) => lineSays(layer, of)),
    ...bodiesSay(of),
    ...annotationsSay(result),
    `Calculated with Cotectic, engine ${of.results.engine}.`,
  ];
  const name = block.name ?? "";
  return [name === "" ? "" : `${name}${/[.?!]$/u.test(name) ? "" : "."}`, ...sentences].filter((text) => text !== "").join(" ");
}

function axes({ block, result }: CaptionOf): { readonly x: string; readonly y: string } {
  const log = (axis: "xAxis" | "yAxis"): string => (block[axis]?.scale === "log" ? " (logarithmic axis)" : "");
  const x = axisInWords(result.x, block.xAxis?.label) + (result.plot === "pattern" ? "" : log("xAxis"));
  return { x, y: axisInWords(result.y, block.yAxis?.label) + log("yAxis") };
}

function heading(of: CaptionOf): string {
  const { x, y } = axes(of);
  switch (of.result.plot) {
    case "scatter":
      return `${y} against ${x}.`;
    case "distribution":
      return `Distribution of ${x} by class; heights within a row only part samples of like values.`;
    case "ternary":
      return `Ternary of ${listed([of.result.corners?.x ?? "", of.result.corners?.y ?? "", of.result.corners?.z ?? ""])}: ${sumInWords(of.result)}.`;
    case "pattern":
      return of.result.x.unit === "K"
        ? `Pattern ${y}, against ${x}.`
        : `Pattern ${y}, in the order ${(of.result.columns ?? []).map((column) => column.of).join(", ")}${of.block.order === "condensation order" ? ", that of their 50 % condensation temperatures" : ""}.`;
  }
}

function tables(result: PlotResult): string[] {
  return [...new Set(result.layers.flatMap((layer) => (layer.what === "samples" || layer.what === "means" ? [layer.data] : [])))];
}

function counts({ result, block, nameOf }: CaptionOf): string {
  const handles = tables(result);
  if (handles.length === 0) return "";
  const without = absent(result.notDrawn);
  const missing = without.length === 0 ? "none is left out" : `not drawn: ${listed(without.map(({ state, count }) => `${count} ${state}`))}`;
  const where = block.drawn.flatMap((drawn) => ("data" in drawn && drawn.hidden !== true && drawn.where ? [`${drawn.data} where ${drawn.where.trim()}`] : []));
  return `${counted(result.drawn, "sample")} of ${listed(handles.map((handle) => named(handle, nameOf)))}; ${missing}.${where.length > 0 ? ` Of ${listed(where)} only.` : ""}`;
}

function named(handle: string, nameOf: (handle: string) => string): string {
  const name = nameOf(handle);
  return name === handle ? handle : `${name} (${handle})`;
}

function ellipses(result: PlotResult): string[] {
  if (result.plot === "distribution" || result.plot === "pattern") return [];
  const drawn = result.layers.filter((layer) => layer.what === "samples");
  const many = drawn.some((layer) => layer.points.x.length > mostEllipses);
  const radii = [...new Set(drawn.filter((layer) => layer.points.x.length <= mostEllipses).map((layer) => layer.ellipses))].filter((radius) => radius > 0);
  const says = radii.map((radius) => `Ellipses of samples are ${sizeOf(radius)}, with the correlation of their errors.`);
  if (many) says.push(`Above ${mostEllipses} samples in a table no ellipses are drawn.`);
  return says;
}

/** `1σ in two dimensions and hold 39 %`. */
function sizeOf(radius: number): string {
  const held = Math.round(heldBy(radius) * 100);
  return Math.abs(radius - Math.round(radius)) < 1e-9 ? `${Math.round(radius)}σ in two dimensions and hold ${held} %` : `drawn to hold ${held} %`;
}

function patternSays({ result, block }: CaptionOf): string[] {
  if (result.plot !== "pattern") return [];
  const sources = [...new Set((result.columns ?? []).flatMap(({ of }) => condensationTemperature(of)?.source ?? []))];
  const memory = (result.columns ?? []).some(({ of }) => condensationTemperature(of)?.checked.includes("memory") === true);
  const means = block.drawn.some((drawn) => "data" in drawn && drawn.hidden !== true && drawn.join === "class");
  const gaps = result.layers.reduce(
    (sum, layer) =>
      sum +
      (layer.what === "samples" ? layer.points.state.reduce((n, state, i) => (state === 0 || Number.isFinite(layer.points.y[i] ?? NaN) ? n : n + 1), 0) : 0),
    0,
  );
  return [
    `Bars are 1σ and hold that of the normalising body${means ? "; of a class mean that of the mean, and none where one sample makes the class" : ""}. Lines are broken where a value is missing${gaps > 0 ? ` (${counted(gaps, "value")})` : ""}.`,
    ...(sources.length > 0 ? [`Condensation temperatures: ${sources.join("; ")}${memory ? ", written down from memory" : ""}.`] : []),
  ];
}

function lineSays(layer: PlotLayer, { results, nameOf }: CaptionOf): string[] {
  if (layer.what === "trend") {
    const trend = resultOf(results, layer.trend, "trend");
    if (trend === undefined) return [];
    const scatter = trend.usesScatter === true;
    const slope = trend.slope === undefined ? "" : `, slope ${formatValue(trend.slope.value, scatter ? trend.slope.sigmaWithScatter : trend.slope.sigma)}`;
    const intercept =
      trend.intercept === undefined
        ? ""
        : `, intercept ${formatValue(trend.intercept.value, scatter ? trend.intercept.sigmaWithScatter : trend.intercept.sigma)}`;
    const fit = trend.mswd === undefined ? "" : `, MSWD ${formatNumber(trend.mswd, 3)}${trend.p === undefined ? "" : ` (p ${formatP(trend.p)})`}`;
    const band = layer.band === undefined ? "no band" : `band 95 %${scatter ? ", with the scatter beyond the errors" : ", by the errors alone"}`;
    return [
      `Line ${named(layer.trend, nameOf)}: ${methods[trend.method]} through ${counted(trend.n, "sample")}${slope}${intercept}${fit}; ${band}; dashed where carried past its samples.`,
    ];
  }
  if (layer.what === "crossing")
    return [
      `${layer.trends[0]} and ${layer.trends[1]} cross at ${formatValue(layer.x, layer.sigmaX)}, ${formatValue(layer.y, layer.sigmaY)} (1σ); the ellipse there holds 95 %.`,
    ];
  if (layer.what === "path") {
    const end = layer.end === undefined ? "" : `, to ${layer.end.label}`;
    return [`Path of ${named(layer.budget, nameOf)}${end}, ticks at round amounts; curved where mixing in ratios is a hyperbola.`];
  }
  return [];
}

/** Every body that anything on the drawing leans on: alias, compilation, source, and whether its values were read. */
function bodiesSay({ result, ownBodies }: CaptionOf): string[] {
  const drawn = new Map(
    result.layers.flatMap((layer) => (layer.what === "bodies" ? layer.bodies.map((body) => [body.body ?? body.name, body.compilation] as const) : [])),
  );
  const used = new Map([...Object.entries(result.bodiesUsed), ...drawn]);
  if (used.size === 0) return [];
  const radii =
    result.plot === "distribution" || result.plot === "pattern"
      ? false
      : result.layers.some((layer) => layer.what === "bodies" && layer.bodies.some((body) => body.ellipse !== undefined));
  const each = [...used].map(([name, id]) => {
    const own = Object.hasOwn(ownBodies, id) ? ownBodies[id] : undefined;
    const body = lookupBody(id);
    const sources = own === undefined ? [...new Set((body?.values ?? []).map(({ source }) => source))] : [own.source];
    const memory = own === undefined && body?.fromMemory === true ? ", some of it written down from memory" : "";
    return `${name === id ? id : `${name} is ${id}`}${sources.length > 0 ? ` (${sources.join("; ")}${memory})` : ""}`;
  });
  return [`Bodies: ${each.join("; ")}.${radii ? " Ellipses of bodies are as their sources give σ." : ""}`];
}

function annotationsSay(result: PlotResult): string[] {
  const count = result.layers.filter((layer) => layer.what === "annotation").length;
  return count === 0 ? [] : [`${counted(count, "annotation")} placed by hand.`];
}
