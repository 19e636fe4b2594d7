import type { ListName } from "./shape";

const ALPHABET = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";

/** A key nobody else makes: 12 characters of 62, about 71 bits. */
export function freshKey(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(12));
  let key = "";
  for (const byte of bytes) key += ALPHABET[byte % ALPHABET.length] ?? "0";
  return key;
}

const rowKey = (row: unknown): string => (typeof row === "number" ? `r${row.toString()}` : `t${String(row)}`);
const word = (value: unknown): string => (typeof value === "string" || typeof value === "number" ? String(value) : "");

/**
 * The stable key of an entry that has one by its nature, so that two people who amend one value meet in one place and
 * the page never holds two amendments of it. `null` for lists whose entries have no nature of their own (steps, drawn).
 */
export function naturalKey(list: ListName, entry: Readonly<Record<string, unknown>>): string | null {
  switch (list) {
    case "typed":
      return word(entry.id);
    case "columns":
      return `${word(entry.header ?? entry.name)}#${word(entry.position)}`;
    case "assumed":
      return word(entry.column);
    case "amendments":
    case "setAside":
      return `${rowKey(entry.row)}/${word(entry.column)}`;
    case "leaveOut":
      return rowKey(entry.row);
    case "correlations":
      return Array.isArray(entry.of) ? entry.of.map(word).join("|") : null;
    case "drawn":
    case "steps":
      return null;
  }
}

/** The natural key, or one made up where there is none or it is taken (a document may say one thing twice). */
export function entryKeyFor(list: ListName, entry: Readonly<Record<string, unknown>>, taken: (key: string) => boolean): string {
  const natural = naturalKey(list, entry);
  return natural === null || natural === "" || taken(natural) ? freshKey() : natural;
}
