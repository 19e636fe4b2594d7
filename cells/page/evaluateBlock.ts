import { evaluateBudget } from "../budget";
import { evaluateData } from "../data";
import { evaluateFormula } from "../formula/evaluate";
import { evaluateNote, type LineFinder } from "../note/evaluate";
import { evaluatePlot } from "../plot";
import { evaluateTrend } from "../trend";
import type { BlockContext } from "./context";
import type { BlockResult } from "./results";
import type { Block } from "./schema";

/** Two lines over one data block that are drawn or fitted against each other. */
export interface Pair {
  readonly data: string;
  readonly of: readonly [string, string];
}

/** What a block gets from its page beside the blocks it reads from. */
export interface BlockExtras {
  /** Bytes of a data block's source; undefined where they are not there. */
  readonly source: Uint8Array | undefined;
  /** Names of a formula block's lines that are calculated from themselves. */
  readonly circular: ReadonlySet<string>;
  readonly drawnTogether: readonly Pair[];
  readonly linesNamed: LineFinder;
}

/** Calculates one block. To add a kind of block is to add a line here. */
export function evaluateBlock(block: Block, context: BlockContext, extras: BlockExtras): BlockResult {
  switch (block.kind) {
    case "data":
      return evaluateData(block, context, extras.source);
    case "formula":
      return evaluateFormula(block, context, { circular: extras.circular, drawnTogether: extras.drawnTogether.map((pair) => pair.of) });
    case "trend":
      return evaluateTrend(block, context);
    case "budget":
      return evaluateBudget(block, context);
    case "plot":
      return evaluatePlot(block, context);
    case "note":
      return evaluateNote(block, context, extras.linesNamed);
  }
}
