import type { Span } from "../errors";

/** A value of the page that a note quotes: `{{mg_si}}`, `{{t.slope}}`, ``{{b.`Al / Si`.miss}}``. */
export interface Quote {
  /** Braces included. */
  readonly span: Span;
  /** What stands between the braces, without the spaces around it. */
  readonly name: string;
  /** Its parts, without backticks: one for a name alone, two for `block.name`, three where a part of it is asked for. */
  readonly parts: readonly string[];
}

const quotePattern = /\{\{([^{}\n]{1,400})\}\}/gu;
const partPattern = /\s*(?:`([^`\n]+)`|([\p{L}_][\p{L}\p{N}_]*))\s*(\.|$)/uy;

/** The values that a note quotes, in order of the text. Braces after a backslash are text. */
export function quotesIn(text: string): Quote[] {
  const found: Quote[] = [];
  for (const match of text.matchAll(quotePattern)) {
    if (text[match.index - 1] === "\\") continue;
    const name = (match[1] ?? "").trim();
    found.push({ span: [match.index, match.index + match[0].length], name, parts: partsOf(name) });
  }
  return found;
}

/** Splits at the points outside backticks; `[]` where the name is not one. */
function partsOf(name: string): string[] {
  const parts: string[] = [];
  partPattern.lastIndex = 0;
  while (partPattern.lastIndex < name.length) {
    const match = partPattern.exec(name);
    if (match === null) return [];
    parts.push((match[1] ?? match[2] ?? "").normalize("NFC"));
    if (match[3] === "" || match[3] === undefined) break;
    if (partPattern.lastIndex >= name.length) return [];
  }
  return parts.length > 3 ? [] : parts;
}
