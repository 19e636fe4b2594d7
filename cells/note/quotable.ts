import { State } from "../quantity/state";
import { formatNumber, formatUncertain } from "../quantity/format";
import type { BlockResult, BodyDistance, BudgetReport, FormulaResult, TraceRequest, TrendResult } from "../page/results";

/** A value as a note shows it. */
export interface Quoted {
  readonly shown: string;
  readonly unit: string;
  readonly value?: number;
  readonly sigma?: number | null;
  readonly trace?: TraceRequest;
}

/**
 * A value of one block's result by name, or the sentence that says why there is none.
 *
 * @param part for a budget's reported expression: `start`, `end`, `target` or `miss`; the end, where left out
 */
export function quotable(handle: string, result: BlockResult, name: string, part: string | undefined): Quoted | string {
  if (part !== undefined && result.kind !== "budget") return `"${part}" can be asked only of what a budget reports; ${handle} is a ${result.kind} block.`;
  switch (result.kind) {
    case "data": {
      if (name === "samples") return count(result.samples);
      if (name === "set_aside") return count(result.setAside);
      if (name === "amended") return count(result.amended);
      const column = result.columns.find((candidate) => candidate.name === name);
      return column === undefined ? unknown(handle, name, ["samples", "set_aside", "amended", ...result.columns.map((each) => each.name)]) : count(column.n);
    }
    case "formula":
      return ofLine(handle, result, name);
    case "trend":
      return ofTrend(handle, result, name);
    case "budget": {
      if (name === "solved") {
        if (result.solved === undefined) return `${handle} has no solved amount.`;
        return uncertain(result.solved.value, result.solved.sigma, result.solved.unit, { block: handle, name: "solved" });
      }
      const report = result.report.find((candidate) => squeeze(candidate.expression) === squeeze(name));
      return report === undefined
        ? unknown(handle, name, ["solved", ...result.report.map((each) => each.expression)])
        : ofReport(handle, report, part ?? "end");
    }
    default:
      return `A ${result.kind} has no values to quote.`;
  }
}

/** A line with one value shows it; one with a value a sample shows their range. */
function ofLine(handle: string, result: FormulaResult, name: string): Quoted | string {
  const line = result.lines.find((candidate) => candidate.name === name);
  if (line === undefined)
    return unknown(
      handle,
      name,
      result.lines.map((each) => each.name),
    );
  if (!line.ok) return `${handle}.${name} has no result; see its line.`;
  const unit = line.unit === "1" ? "" : line.unit;
  const trace = { block: handle, name };
  if (!line.perSample && line.byClass === undefined && line.state[0] === State.present) {
    const sigma = line.sigma[0] ?? Number.NaN;
    return uncertain(line.value[0] ?? Number.NaN, Number.isFinite(sigma) ? sigma : null, unit, { ...trace, index: 0 });
  }
  let least = Number.POSITIVE_INFINITY;
  let most = Number.NEGATIVE_INFINITY;
  line.value.forEach((value, index) => {
    if (line.state[index] !== State.present) return;
    if (value < least) least = value;
    if (value > most) most = value;
  });
  if (least > most) return `${handle}.${name} has no value in any row.`;
  return { shown: `${formatNumber(least)} to ${formatNumber(most)}`, unit };
}

function ofTrend(handle: string, result: TrendResult, name: string): Quoted | string {
  if (name === "n") return count(result.n);
  if (!result.ok) return `${handle} has no line; see what it says.`;
  if (name === "slope" || name === "intercept") {
    const parameter = result[name];
    if (parameter === undefined) return `${handle} has no ${name}.`;
    const sigma = result.usesScatter === true ? parameter.sigmaWithScatter : parameter.sigma;
    return uncertain(parameter.value, sigma, "", { block: handle, name });
  }
  if (name === "mswd" || name === "p")
    return result[name] === undefined
      ? `${handle} has no ${name}: its method gives none.`
      : { shown: formatNumber(result[name], 2), unit: "", value: result[name], ...(result.S === undefined ? {} : { trace: { block: handle, name } }) };
  if (name === "crossing_x" || name === "crossing_y") {
    if (result.crossing === undefined) return `${handle} has no crossing; choose the trend it is crossed with.`;
    const axis = name === "crossing_x" ? "x" : "y";
    const at = result.crossing[axis];
    const unit = result[axis].unit === "1" ? "" : result[axis].unit;
    return uncertain(at.value, at.sigma, unit, { block: handle, name: `crossing.${axis}` });
  }
  const body = /^(?<from>crossing_from|from)_(?<body>.+)$/u.exec(name)?.groups;
  if (body !== undefined) {
    const distances = body["from"] === "from" ? result.fromBodies : (result.crossing?.fromBodies ?? []);
    return distance(handle, name, distances, body["body"] ?? "");
  }
  return unknown(handle, name, ["slope", "intercept", "n", "mswd", "p", "crossing_x", "crossing_y", "from_BODY", "crossing_from_BODY"]);
}

function distance(handle: string, name: string, distances: readonly BodyDistance[], body: string): Quoted | string {
  const found = distances.find((candidate) => candidate.body === body);
  if (found === undefined)
    return `${handle} gives no distance from ${body} for {{${handle}.${name}}}; it gives those from ${distances.map((each) => each.body).join(", ") || "no body"}.`;
  return { shown: formatNumber(found.distance, 2), unit: "σ", value: found.distance, trace: { block: handle, name } };
}

function ofReport(handle: string, report: BudgetReport, part: string): Quoted | string {
  const unit = report.unit === "1" ? "" : report.unit;
  const none = `${handle} has no ${part} for ${report.expression}${report.note === undefined ? "" : `: ${report.note}`}.`;
  switch (part) {
    case "start":
      return report.start === null ? none : uncertain(report.start, report.startSigma, unit, { block: handle, name: `${report.expression}.start` });
    case "end":
      return report.end === null ? none : uncertain(report.end, report.sigma, unit);
    case "target":
      return report.target === null ? none : uncertain(report.target, report.targetSigma, unit, { block: handle, name: `${report.expression}.target` });
    case "miss":
      return report.miss === null
        ? none
        : { shown: formatNumber(report.miss, 2), unit: "σ", value: report.miss, trace: { block: handle, name: `${report.expression}.miss` } };
    default:
      return `A reported expression has start, end, target and miss, and no "${part}".`;
  }
}

function uncertain(value: number, sigma: number | null, unit: string, trace?: TraceRequest): Quoted {
  return { shown: formatUncertain(value, sigma), unit, value, sigma, ...(trace === undefined ? {} : { trace }) };
}

function count(value: number): Quoted {
  return { shown: String(value), unit: "", value };
}

function squeeze(text: string): string {
  return text.replace(/\s+/gu, "");
}

function unknown(handle: string, name: string, known: readonly string[]): string {
  return `${handle} has nothing called "${name}". It has ${known.slice(0, 12).join(", ")}${known.length > 12 ? " …" : ""}.`;
}
