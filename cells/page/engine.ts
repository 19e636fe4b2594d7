import type { Problem } from "../errors";
import type { PageResults, TraceNode, TraceRequest } from "./results";
import type { Column, PageDocument } from "./schema";

/** A column as import proposes it, and why. */
export interface ProposedColumn {
  readonly column: Column;
  /** Sentence for people: what in the header or the first rows led to this. */
  readonly reason: string;
}

/** What import proposes for a file, before anything is saved. */
export interface ImportProposal {
  readonly fileName: string;
  readonly headers: readonly string[];
  /** Every data row as text; ragged rows are filled up with `""`. */
  readonly rows: readonly (readonly string[])[];
  readonly columns: readonly ProposedColumn[];
  /** What could not be read, row by row. */
  readonly problems: readonly Problem[];
}

/**
 * The engine: synchronous, without clock, network or chance. It remembers its last evaluation, so that a block whose inputs
 * did not change keeps the identical result object.
 */
export interface Engine {
  /** Gives the bytes of a source, under its SHA-256 or, on the command line, its file name. */
  setSource(ref: string, bytes: Uint8Array): void;
  hasSource(ref: string): boolean;
  evaluate(page: PageDocument): PageResults;
  /** Where a number of the last evaluation comes from. */
  trace(request: TraceRequest): TraceNode | null;
  /** Reads a file and proposes what each of its columns is. Throws CellError where it is no table. */
  propose(bytes: Uint8Array, fileName: string): ImportProposal;
}
