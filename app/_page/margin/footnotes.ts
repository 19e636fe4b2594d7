import type { DataBlock, DataResult, RowId } from "@/cells";

/** Something said about a place in a table, tied to it by a letter. */
export interface Footnote {
  readonly letter: string;
  readonly kind: "amended" | "set aside" | "value set aside" | "screening";
  readonly row: RowId;
  readonly sample: string;
  /** Name or header of the column; none where the whole sample is meant. */
  readonly column?: string;
  /** After the kind: "from 42.1 to 24.1", "TH-11", "total 95.8, below 98.0". */
  readonly title: string;
  readonly reason: string;
  readonly by?: string;
  readonly at?: string;
}

/** Where notes on a row's sum of oxides stand: the grid's own column at the right. */
export const TOTAL_COLUMN = "total";

/** a … z, aa, ab … */
export function footnoteLetter(index: number): string {
  const last = String.fromCharCode(97 + (index % 26));
  return index < 26 ? last : footnoteLetter(Math.floor(index / 26) - 1) + last;
}

interface Said {
  readonly by?: string | undefined;
  readonly at?: string | undefined;
}
const said = ({ by, at }: Said): { by?: string; at?: string } => ({ ...(by === undefined ? {} : { by }), ...(at === undefined ? {} : { at }) });

/** Every amendment, set-aside and screening flag of a table, in that order, each with its letter. */
export function footnotesOf(block: DataBlock, result: DataResult | undefined): Footnote[] {
  const notes: Omit<Footnote, "letter">[] = [];
  for (const a of block.amendments ?? [])
    notes.push({
      kind: "amended",
      row: a.row,
      sample: a.sample,
      column: a.column,
      title: `from ${a.was === "" ? "nothing" : a.was} to ${a.value === "" ? "nothing" : a.value}`,
      reason: a.reason,
      ...said(a),
    });
  for (const s of block.setAside ?? []) {
    const sample = s.sample ?? `row ${s.row}`;
    if (s.column === undefined) notes.push({ kind: "set aside", row: s.row, sample, title: sample, reason: s.reason, ...said(s) });
    else notes.push({ kind: "value set aside", row: s.row, sample, column: s.column, title: `${sample}, ${s.column} only`, reason: s.reason, ...said(s) });
  }
  for (const flag of result?.screening ?? [])
    notes.push({
      kind: "screening",
      row: flag.row,
      sample: flag.sample,
      ...(flag.code === "total" ? { column: TOTAL_COLUMN } : flag.column === undefined ? {} : { column: flag.column }),
      title: flag.sample,
      reason: flag.text,
    });
  return notes.map((note, i) => ({ ...note, letter: footnoteLetter(i) }));
}

/** Letters by place, for the table: of a row as a whole under `row`, of one value under `row/column`. */
export function lettersByPlace(notes: readonly Footnote[]): ReadonlyMap<string, string> {
  const letters = new Map<string, string>();
  for (const note of notes) {
    const place = note.column === undefined ? String(note.row) : `${note.row}/${note.column}`;
    letters.set(place, (letters.get(place) ?? "") + note.letter);
  }
  return letters;
}
