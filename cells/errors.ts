/**
 * What can be wrong with a block, said once, in words a person can act on.
 *
 * A problem never throws across a block's border: it is collected, shown where it belongs, and everything that does not
 * depend on the faulty part still calculates.
 */
export type Severity = "error" | "warning" | "note";

/** A place inside a formula's text: first character and one past the last, in UTF-16 code units of the block's whole text. */
export type Span = readonly [start: number, end: number];

/** A problem of one block, as it stands in results. `text` says what, where and what to do. */
export interface Problem {
  readonly code: string;
  readonly severity: Severity;
  /** Handle of the block. */
  readonly block?: string;
  /** Place in the block's text, for formulas and expressions. */
  readonly span?: Span;
  /** Which field of the block an expression stands in (`x`, `where`, `target.expression` …), where it is not `text`. */
  readonly field?: string;
  /** 1-based data row of the source, or the stable id of a typed row. */
  readonly row?: number | string;
  /** Name or header of the column. */
  readonly column?: string;
  readonly text: string;
}

/** Thrown inside the engine, turned into a {@link Problem} at a block's border. */
export class CellError extends Error {
  override readonly name = "CellError";
  constructor(
    readonly code: string,
    message: string,
    readonly place: { readonly span?: Span; readonly field?: string; readonly row?: number | string; readonly column?: string } = {},
  ) {
    super(message);
  }

  /** The problem this error becomes in the results of `block`. */
  toProblem(block: string): Problem {
    return { code: this.code, severity: "error", block, ...this.place, text: this.message };
  }
}

/** Thrown when a page document cannot be read at all (exit code 2 of the command line). */
export class UnreadablePageError extends Error {
  override readonly name = "UnreadablePageError";
}

/** What is said of whole tables, and would otherwise be said again by every line and axis that uses them. */
const ofTables: ReadonlySet<string> = new Set(["renormalised", "as-measured"]);

/** Problems to be added to others, without those of whole tables that are among them already. */
export function notYetSaid(more: readonly Problem[], problems: readonly Problem[]): Problem[] {
  const said = new Set(problems.map(({ text }) => text));
  return more.filter(({ code, text }) => !ofTables.has(code) || !said.has(text));
}
