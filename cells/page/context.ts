import type { Scope } from "../language/scope";
import type { BodyLookup } from "../species/body";
import type { BlockResult } from "./results";
import type { Block } from "./schema";

/**
 * What the evaluation of one block may see of its page: only what the block reads from. Every evaluator is a function
 * `(block, context) → result` of these alone, so that a block whose document and inputs did not change need not be
 * calculated again.
 */
export interface BlockContext {
  readonly bodies: BodyLookup;
  /** The page's aliases for bodies, in the page's order: which bodies distances are reported from. */
  readonly aliases: readonly string[];
  /**
   * Names as they stand over one data block: its columns, its species, the lines of the formula blocks over it, and
   * `block.name` for the rest of the page. Without a data block only the latter.
   */
  scope(data: string | undefined): Scope;
  /** Result of a block this one reads from, by its handle or a former one; undefined where there is none or it is in a cycle. */
  result(handle: string): BlockResult | undefined;
  /** Document of a block this one reads from. */
  block(handle: string): Block | undefined;
  /**
   * The text of an expression with the names of lines over `data` replaced by their own expressions, for calculating it on
   * one composition, where there is no table: `mg_si` becomes `(Mg / Si)`.
   */
  expand(text: string, data: string | undefined): string;
}
