import { CellError } from "../errors";
import { parseLines } from "../language";
import type { QuantityColumn } from "../table/table";
import { budgetNode, cellNodes, expressionNode, inUnit, plotNode, trendNode, type Tracing } from "../trace";
import type { BlockContext } from "./context";
import type { TraceNode, TraceRequest } from "./results";
import type { Block, DataBlock, FormulaBlock } from "./schema";

/** Numbers that lean on numbers of other blocks are followed this far. */
const MAX_FOLLOWED = 6;

/**
 * Where a number of the last evaluation comes from: a tree from the number down to the cells of its sources. The shares of
 * the variance of the branches of one node sum to that node's own share; the asked number's is 1.
 *
 * @returns null where there is no such number now
 */
export function traceNumber(block: Block, request: TraceRequest, context: BlockContext): TraceNode | null {
  try {
    return trace(block, request, context, 0);
  } catch (error) {
    // What cannot be calculated now has no origin; its block says why.
    if (error instanceof CellError) return null;
    throw error;
  }
}

function trace(block: Block, { name, index }: TraceRequest, context: BlockContext, depth: number): TraceNode | null {
  const tracing: Tracing = {
    context,
    ask: (request) => {
      const other = context.block(request.block);
      return other === undefined || depth >= MAX_FOLLOWED ? null : trace(other, request, context, depth + 1);
    },
  };
  switch (block.kind) {
    case "data":
      return ofColumn(tracing, block, name, index);
    case "formula":
      return ofLine(tracing, block, name, index);
    case "trend": {
      const result = context.result(block.id);
      return result?.kind === "trend" ? trendNode(tracing, block, result, name) : null;
    }
    case "budget": {
      const result = context.result(block.id);
      return result?.kind === "budget" ? budgetNode(tracing, block, result, name) : null;
    }
    case "plot": {
      const result = context.result(block.id);
      return result?.kind === "plot" ? plotNode(tracing, block, result, name, index) : null;
    }
    default:
      return null;
  }
}

function ofLine(tracing: Tracing, block: FormulaBlock, name: string, index: number | undefined): TraceNode | null {
  const line = parseLines(block.text).lines.find((each) => each.name === name.normalize("NFC"));
  if (line === undefined) return null;
  const result = tracing.context.result(block.id);
  const calculated = result?.kind === "formula" ? result.lines.find((each) => each.name === line.name) : undefined;
  if (calculated?.ok !== true) return null;
  // A line with a value for each sample is asked about for one of them.
  if (index === undefined && (calculated.perSample || calculated.byClass !== undefined)) return null;
  const place = calculated.perSample || calculated.byClass !== undefined ? (index ?? 0) : 0;
  return expressionNode(tracing, tracing.context.scope(block.data), line.text, `${line.name} = ${line.text}`, block.id, place);
}

function ofColumn({ context }: Tracing, block: DataBlock, name: string, index: number | undefined): TraceNode | null {
  const result = context.result(block.id);
  const table = result?.kind === "data" ? result.table : undefined;
  const column = table?.columns.find((each): each is QuantityColumn => each.kind === "quantity" && each.name === name);
  if (table === undefined || column === undefined || index === undefined || !(index >= 0 && index < table.rows)) return null;
  const number = inUnit(column.value[index] ?? Number.NaN, column.sigma[index] ?? Number.NaN, column.unit);
  const share = number.sigma === null ? null : 1;
  return {
    kind: "result",
    label: column.name,
    ...number,
    ...(column.basis === undefined ? {} : { basis: column.basis }),
    share,
    notes: [],
    from: cellNodes(context, table, column, index, share),
  };
}
