import { writeName } from "../language";
import type { PlotLayer, PlotResult, TraceNode } from "../page/results";
import type { PlotBlock } from "../page/schema";
import { plotAxis, plotTable } from "../page/references";
import { Drawing } from "../plot/drawing";
import { ternaryBlock } from "../plot/ternary";
import { textsOf, nameOf } from "../plot/patternColumns";
import { CellError } from "../errors";
import type { Tracing } from "./commons";
import { expressionNode } from "./expression";
import { orNull } from "./node";

/**
 * Where a number on a plot comes from. A drawn sample's is named by its place in the list and its axis, `0:x`, or in a pattern by
 * its value, `0:Al`, with the row as index; a body's has the body between, `1:CI:x` or `1:CI:Al`; a class mean of a pattern has
 * the class, `0:CV:Al`.
 */
export function plotNode(tracing: Tracing, block: PlotBlock, result: PlotResult, name: string, index: number | undefined): TraceNode | null {
  const asked = /^(?<drawn>\d+):(?<rest>.+)$/u.exec(name)?.groups;
  const [drawn, rest] = [Number(asked?.["drawn"]), asked?.["rest"] ?? ""];
  for (const layer of result.layers) {
    if (layer.drawn !== drawn) continue;
    if (layer.what === "samples" && index !== undefined) {
      const node = sampleNode(tracing, block, result, layer, rest, index);
      if (node !== null) return node;
    } else if (layer.what === "bodies") {
      const node = bodyNode(tracing, block, result, layer, rest);
      if (node !== null) return node;
    } else if (layer.what === "means") {
      const node = meanNode(tracing, block, layer, rest);
      if (node !== null) return node;
    }
  }
  return null;
}

type Samples = Extract<PlotLayer, { what: "samples" }>;
type Bodies = Extract<PlotLayer, { what: "bodies" }>;
type Means = Extract<PlotLayer, { what: "means" }>;

function sampleNode(tracing: Tracing, block: PlotBlock, result: PlotResult, layer: Samples, what: string, index: number): TraceNode | null {
  const isPattern = result.plot === "pattern";
  if (isPattern ? layer.of !== what : what !== "x" && what !== "y" && what !== "z") return null;
  const text = isPattern ? patternText(tracing, block, layer.drawn, what) : axisText(tracing, block, layer.drawn, what);
  if (text === undefined) return null;
  const { points } = layer;
  const node = expressionNode(tracing, tracing.context.scope(layer.data), text, label(block, text), block.id, index);
  if (node === null) return null;
  // What the plot shows may be in the unit of an axis that other lines share.
  if (isPattern || what === "y") return shown(node, points.y[index], points.sigmaY[index], result.y.unit);
  if (what === "z") return node;
  return shown(node, points.x[index], points.sigmaX[index], result.x.unit);
}

function bodyNode(tracing: Tracing, block: PlotBlock, result: PlotResult, layer: Bodies, rest: string): TraceNode | null {
  const cut = rest.lastIndexOf(":");
  const [name, what] = [rest.slice(0, cut), rest.slice(cut + 1)];
  const isPattern = result.plot === "pattern";
  const body = layer.bodies.find((each) => (isPattern ? each.body === name && each.of === what : each.name === name));
  const text = body === undefined ? undefined : isPattern ? written(block, what) : axisText(tracing, block, undefined, what);
  if (body === undefined || text === undefined) return null;
  const data = isPattern ? undefined : plotTable(block);
  const on = `at((${text}), ${writeName(name)})`;
  const node = attempt(() => expressionNode(tracing, tracing.context.scope(data), on, label(block, text, `on ${name}`), block.id, 0));
  if (node === null || what === "z") return node;
  return isPattern || what === "y"
    ? shown(node, body.y, body.sigmaY ?? undefined, result.y.unit)
    : shown(node, body.x, body.sigmaX ?? undefined, result.x.unit);
}

/** The mean of a class in a pattern: the same as `mean` over what is drawn. Where a condition chooses the samples, it is not followed. */
function meanNode(tracing: Tracing, block: PlotBlock, layer: Means, rest: string): TraceNode | null {
  const cut = rest.lastIndexOf(":");
  const [name, of] = [rest.slice(0, cut), rest.slice(cut + 1)];
  const point = layer.classes.find((each) => each.name === name)?.points.find((each) => each.of === of);
  const text = patternText(tracing, block, layer.drawn, of);
  if (point === undefined || text === undefined) return null;
  const drawn = block.drawn[layer.drawn];
  const isChosen = drawn !== undefined && "data" in drawn && drawn.where !== undefined && drawn.where.trim() !== "";
  const asked = `mean(${text}, ${JSON.stringify(name)})`;
  const whole = isChosen || name === "" ? null : attempt(() => expressionNode(tracing, tracing.context.scope(layer.data), asked, asked, block.id, 0));
  const heading = label(block, text, `mean of ${point.n} of ${name === "" ? "no class" : name}`);
  if (whole !== null && sameNumber(whole.value, point.y))
    return { ...whole, label: heading, sigma: point.sigmaY, share: point.sigmaY === null ? null : whole.share };
  return {
    kind: "result",
    label: heading,
    value: orNull(point.y),
    sigma: point.sigmaY,
    unit: "1",
    share: null,
    notes: ["Mean over the samples that are drawn; ask a single sample for its own trace."],
    from: [],
  };
}

function shown(node: TraceNode, value: number | undefined, sigma: number | undefined, unit: string): TraceNode {
  if (node.value === null || node.unit === unit || value === undefined || !Number.isFinite(value)) return node;
  return { ...node, value, sigma: node.sigma === null ? null : orNull(sigma), unit };
}

function axisText({ context }: Tracing, block: PlotBlock, drawn: number | undefined, axis: string): string | undefined {
  const made = block.plot === "ternary" ? ternaryBlock(block, new Drawing(block, context)) : block;
  const line = drawn === undefined ? made.drawn.find((each) => "data" in each) : made.drawn[drawn];
  if (axis === "z") {
    const [x, y] = [axisOf(made, line, "x"), axisOf(made, line, "y")];
    return block.plot !== "ternary" || x === undefined || y === undefined ? undefined : `1 - ${x} - ${y}`;
  }
  return axis === "x" || axis === "y" ? axisOf(made, line, axis) : undefined;
}

function axisOf(block: PlotBlock, line: PlotBlock["drawn"][number] | undefined, axis: "x" | "y"): string | undefined {
  return (line !== undefined && "data" in line ? line[axis] : undefined) ?? plotAxis(block, axis);
}

function patternText({ context }: Tracing, block: PlotBlock, drawn: number, of: string): string | undefined {
  const line = block.drawn[drawn];
  if (line === undefined || !("data" in line)) return undefined;
  const text = textsOf(new Drawing(block, context), line).find((each) => nameOf(each) === of);
  return text === undefined ? undefined : written(block, text);
}

function written(block: PlotBlock, text: string): string | undefined {
  if (block.normalise === undefined) return undefined;
  const per = block.per === undefined || block.per.trim() === "" ? "" : ` / (${block.per})`;
  return `norm((${text})${per}, ${writeName(block.normalise)})`;
}

function label(block: PlotBlock, text: string, on = ""): string {
  return (
    [text.replace(/^\((?<inner>[^()]*)\)$/u, "$<inner>"), on].filter((part) => part !== "").join(" ") + (block.plot === "ternary" ? ", share of the three" : "")
  );
}

function sameNumber(a: number | null, b: number): boolean {
  return a !== null && Math.abs(a - b) <= 1e-9 * Math.abs(b);
}

function attempt<T>(work: () => T | null): T | null {
  try {
    return work();
  } catch (error) {
    if (error instanceof CellError) return null;
    throw error;
  }
}
