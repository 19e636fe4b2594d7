import { basisInWords, compactExpression } from "@/app/_blocks/shared/words";
import { absent } from "@/app/_blocks/shared/words";
import type { AxisInfo, Drawn, PlotLayer, PlotResult } from "@/cells";
import { ellipseInWords } from "./ellipse";
import { isDrawn } from "./isDrawn";

/** Samples up to this many are drawn with ellipses, each a marker of its own; more are painted as a cloud of points. */
export const mostEllipses = 2000;

/** An axis in words: its label, unit and basis. */
export function axisInWords(axis: AxisInfo, label: string | undefined): string {
  if (label !== undefined && label !== "") return label;
  const name = axis.label === "" ? compactExpression(axis.expression) : axis.label;
  const unit = axis.unit === "" || axis.unit === "1" ? "" : `, ${axis.unit}`;
  // A concentration in a unit of mass says by what it is; a ratio does not.
  const basis = unit !== "" && axis.basis === "mass" ? "" : basisInWords(axis.basis);
  return name + unit + (basis === "" ? "" : ` ${basis}`);
}

export interface DrawnWords {
  readonly title: string;
  readonly says: string;
  readonly count: string;
}

function countDrawn(layer: Extract<PlotLayer, { what: "samples" }>, plot: PlotResult["plot"]): number {
  let count = 0;
  for (let i = 0; i < layer.points.x.length; i++) if (isDrawn(layer.points, i, plot)) count++;
  return count;
}

/** One line of the list of what is drawn. `layer` is what it came to, if it is drawn. */
export function drawnInWords(drawn: Drawn, layer: PlotLayer | undefined, plot: PlotResult["plot"] = "scatter"): DrawnWords {
  const says = (text: string): string => (drawn.hidden ? "hidden" : layer === undefined ? `${text}${text === "" ? "" : "; "}nothing to draw` : text);
  if ("data" in drawn) {
    const count = layer?.what === "samples" ? countDrawn(layer, plot) : layer?.what === "means" ? layer.classes.length : 0;
    const size =
      layer?.what === "samples" && (plot === "scatter" || plot === "ternary")
        ? layer.points.x.length > mostEllipses && layer.ellipses > 0
          ? `ellipses left off above ${mostEllipses} samples`
          : ellipseInWords(layer.ellipses)
        : "";
    const pattern = plot !== "pattern" ? "" : drawn.join === "class" ? "means of classes, bars 1σ of the mean" : "bars 1σ, broken where a value is missing";
    const where = drawn.where === undefined || drawn.where.trim() === "" ? "" : `where ${drawn.where.trim()}`;
    return {
      title: `Samples of ${drawn.data}`,
      says: says([size, pattern, where].filter((t) => t !== "").join("; ")),
      count: drawn.hidden ? "" : String(count),
    };
  }
  if ("trend" in drawn) {
    const band = layer?.what === "trend" && layer.band !== undefined ? `band 95 %${layer.usesScatter ? ", with scatter" : ""}; ` : "";
    return { title: `Trend ${drawn.trend}`, says: says(`${band}dashed where carried on past its samples`), count: "" };
  }
  if ("crossing" in drawn)
    return {
      title: "Crossing",
      says: says(layer?.what === "crossing" ? `${layer.trends[0]} with ${layer.trends[1]}, ellipse 95 %` : drawn.crossing),
      count: "",
    };
  if ("budget" in drawn) return { title: "Path", says: says(drawn.budget), count: "" };
  if ("bodies" in drawn) {
    const compilations = layer?.what === "bodies" ? layer.bodies.map((b) => b.compilation) : drawn.bodies;
    const size =
      plot === "pattern" || plot === "distribution"
        ? ""
        : drawn.ellipses === "2 sigma"
          ? ", 2σ"
          : drawn.ellipses === "95 %"
            ? ", 95 %"
            : drawn.ellipses === "none"
              ? ""
              : ", 1σ";
    return {
      title: "Bodies",
      says: says(Array.from(new Set(compilations)).join(", ") + size),
      count: drawn.hidden ? "" : String(layer?.what === "bodies" ? new Set(layer.bodies.map((b) => b.body ?? b.name)).size : 0),
    };
  }
  return { title: "Annotation", says: says(drawn.annotation), count: "" };
}

/** What the head of a plot says: how many samples are drawn, and what became of the others. */
export function stateInWords(result: PlotResult | undefined): { readonly text: string; readonly problem: boolean } {
  if (result === undefined) return { text: "", problem: false };
  const problem = result.problems.find((p) => p.severity === "error");
  const counts = [`${result.drawn} drawn`, ...absent(result.notDrawn).map(({ state, count }) => `${count} ${state}`)].join(", ");
  return problem === undefined ? { text: counts, problem: false } : { text: `${counts}; has a problem`, problem: true };
}

/** The whole drawing in one sentence, for those who listen. */
export function plotInWords(result: PlotResult): string {
  const axes = result.plot === "scatter" ? `${axisInWords(result.y, undefined)} against ${axisInWords(result.x, undefined)}` : `${result.plot} plot`;
  return `${axes}: ${stateInWords(result).text}. The same as a table stands under the plot.`;
}
