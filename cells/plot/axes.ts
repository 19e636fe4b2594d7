import { CellError } from "../errors";
import type { Evaluated } from "../language";
import { plotTable } from "../page/references";
import type { AxisInfo } from "../page/results";
import type { PlotBlock } from "../page/schema";
import { units, type Unit } from "../quantity/unit";
import type { Drawing, Placed } from "./drawing";
import { valueOnBody } from "./valueOnBody";

/** What stands on one axis. */
export interface PlotAxis {
  readonly info: AxisInfo;
  readonly unit: Unit;
  readonly remark: string | null;
  readonly placed: Placed;
}

/**
 * What may stand on an axis, best first: the plot's own expression alone where it has one, else those of its samples in the
 * list's order, those that are drawn first, else those of its trends. The first that can be calculated is the axis.
 */
export function axisCandidates(block: PlotBlock, axis: "x" | "y", drawing: Drawing): Placed[] {
  const own = block[axis];
  if (own !== undefined && own.trim() !== "") return [{ text: own, data: plotTable(block), field: axis }];
  const lines = block.drawn.map((drawn, place) => ({ drawn, place }));
  const inOrder = [...lines.filter(({ drawn }) => drawn.hidden !== true), ...lines.filter(({ drawn }) => drawn.hidden === true)];
  const ofSamples = inOrder.flatMap(({ drawn, place }): Placed[] => {
    const text = "data" in drawn ? drawn[axis] : undefined;
    if (!("data" in drawn) || text === undefined || text.trim() === "") return [];
    return [{ text, data: drawn.data, field: `drawn[${place}].${axis}` }];
  });
  const ofTrends = inOrder.flatMap(({ drawn, place }): Placed[] => {
    const handle = "trend" in drawn ? drawn.trend : "crossing" in drawn ? drawn.crossing : undefined;
    const trend = handle === undefined ? undefined : drawing.context.block(handle);
    return trend?.kind === "trend" ? [{ text: trend[axis], data: trend.data, field: `drawn[${place}]` }] : [];
  });
  return ofSamples.length > 0 ? ofSamples : ofTrends;
}

/** The meaning of an axis. @throws CellError where its expression has none */
export function axisOf(placed: Placed, drawing: Drawing): PlotAxis {
  const { unit, basis, remark } = meaningOf(placed, drawing);
  const label = compact(placed.text) + (remark === null ? "" : `, ${remark}`);
  return { info: { expression: placed.text, label, unit: unit.symbol, basis }, unit, remark, placed };
}

/**
 * What an expression is: over its table or, on a plot of nothing but bodies and budgets, over the first body that has it. Only
 * unit and basis are asked for, and those are the same on every body.
 */
function meaningOf(placed: Placed, drawing: Drawing): Pick<Evaluated, "unit" | "basis" | "remark"> {
  if (placed.data !== undefined) return drawing.evaluate(placed);
  try {
    return drawing.evaluate(placed);
  } catch (error) {
    const { block, context } = drawing;
    const drawn = block.drawn.flatMap((line) => ("bodies" in line ? line.bodies : []));
    for (const body of [...drawn, ...context.aliases, ...context.bodies.all.map(({ id }) => id)]) {
      const found = valueOnBody(context.scope(undefined), placed.text, body, { block: block.id, field: placed.field });
      if (!(found instanceof CellError)) return found;
    }
    throw error;
  }
}

/** An axis whose expression could not be calculated still has its name. */
export function nameOnly(text: string | undefined): AxisInfo {
  return { expression: text ?? "", label: compact(text ?? ""), unit: "1", basis: null };
}

export function compact(text: string): string {
  return text.trim().replace(/\s*\/\s*/gu, "/");
}

const basisWords = { mass: "by mass", atoms: "by atoms", "formula units": "by formula units" } as const;

function inWords({ unit, basis, remark }: Pick<Evaluated, "unit" | "basis" | "remark">): string {
  if (unit.symbol !== "1") return `in ${unit.symbol}`;
  if (remark !== null && remark.includes("normalised to")) return remark;
  return basis === null ? "a number that has no basis" : `a ratio ${basisWords[basis]}`;
}

/**
 * Whether something can stand on an axis beside what stands there: one kind of quantity, one basis, normalised to one body.
 *
 * @throws CellError `basis-mismatch` or `unit-mismatch` that explains itself
 */
export function requireOnAxis(axis: PlotAxis, what: string, other: Pick<Evaluated, "unit" | "basis" | "remark">, field: string): void {
  const own = { unit: axis.unit, basis: axis.info.basis, remark: axis.remark };
  const sides = `${what} is ${inWords(other)}, and this axis shows ${compact(axis.placed.text)}, ${inWords(own)}`;
  if (!sameKind(axis.unit, other.unit))
    throw new CellError("unit-mismatch", `${sides}. They cannot stand on one axis; bring both to one kind of quantity, or draw them on two plots.`, { field });
  if (axis.info.basis !== other.basis)
    throw new CellError(
      "basis-mismatch",
      `${sides}. They cannot stand on one axis: forsterite's Mg/Si is 2 by atoms and 1.7308 by mass. Write both by mass, or both with atoms( ).`,
      { field },
    );
  const [a, b] = [normaliser(axis.remark), normaliser(other.remark)];
  if (a !== b)
    throw new CellError("basis-mismatch", `${sides}. Normalised and unnormalised values, or values normalised to two bodies, cannot stand on one axis.`, {
      field,
    });
}

function sameKind(a: Unit, b: Unit): boolean {
  return a.symbol === b.symbol || (isListed(a) && isListed(b) && a.dimension === b.dimension);
}

function isListed(unit: Unit): boolean {
  return Object.hasOwn(units, unit.symbol);
}

/** Id of the body a remark says something is normalised to. */
function normaliser(remark: string | null): string | null {
  const found = /normalised to (?:[^,(]*\((?<aliased>[^)]+)\)|(?<id>[^,]+))/u.exec(remark ?? "")?.groups;
  return found?.["aliased"] ?? found?.["id"]?.trim() ?? null;
}

/** Brings a value and its 1σ from one unit of a kind to another. */
export interface Conversion {
  value(x: number): number;
  /** How a small difference changes. */
  readonly factor: number;
}

export function conversion(from: Unit, to: Unit): Conversion {
  if (from.symbol === to.symbol) return { value: (x) => x, factor: 1 };
  return { value: (x) => (x / from.per + from.offset - to.offset) * to.per, factor: to.per / from.per };
}
