import type { Problem } from "../errors";

/** What a decimal sign is in one file; settled once for the whole of it. */
export type DecimalSign = "." | ",";

/** A source, read as text and not yet understood. Rows are numbered from 1; blank lines are not rows. */
export interface RawTable {
  /** One a column, never empty and never longer than 200 characters; a column without a header is called `column 3`. */
  readonly headers: readonly string[];
  /** Units from a line of their own below the headers, `""` where none; undefined where there is no such line. */
  readonly units?: readonly string[];
  /** Text of every cell exactly as it stands, as many a row as there are headers. */
  readonly rows: readonly (readonly string[])[];
  /** Lines above the headers. */
  readonly preamble: readonly string[];
  readonly encoding: string;
  readonly delimiter: string;
  readonly decimal: DecimalSign;
  readonly problems: readonly Problem[];
}

/** Quotas of one source. */
export const quotas = { bytes: 50 * 1024 * 1024, rows: 200_000, columns: 300 } as const;
