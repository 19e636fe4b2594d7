import type { NoteValue } from "@/cells";

/** A quoted value becomes a link to this address, which only our own renderer reads. */
export const quoteAddress = "#value-";

/** A piece of Markdown where a quote stands; its label is replaced by the live value when it is drawn. */
function placeholder(index: number): string {
  return `[value](${quoteAddress}${index})`;
}

/**
 * A note's text with each live value replaced by a link that says which one it is. The spans are those of the text the values
 * were found in; a value whose braces are no longer there (the text has moved on) is left as it is written.
 */
export function withQuotes(text: string, values: readonly NoteValue[]): string {
  let out = "";
  let at = 0;
  values.forEach((value, index) => {
    const [start, end] = value.span;
    if (start < at || !text.startsWith("{{", start) || text.slice(end - 2, end) !== "}}") return;
    out += text.slice(at, start) + placeholder(index);
    at = end;
  });
  return out + text.slice(at);
}
