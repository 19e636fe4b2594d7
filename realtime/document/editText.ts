import type * as Y from "yjs";

const isTail = (code: number): boolean => code >= 0xdc00 && code <= 0xdfff;

/** Replaces what differs between two versions of one stretch of text, and nothing else of it. */
function replaceStretch(text: Y.Text, at: number, before: string, after: string): void {
  let start = 0;
  while (start < before.length && start < after.length && before[start] === after[start]) start++;
  let end = 0;
  while (end < before.length - start && end < after.length - start && before[before.length - 1 - end] === after[after.length - 1 - end]) end++;
  // Never cut a character of two code units in half.
  if (start > 0 && isTail(before.charCodeAt(start))) start--;
  if (end > 0 && isTail(before.charCodeAt(before.length - end))) end--;
  if (before.length - end > start) text.delete(at + start, before.length - end - start);
  if (after.length - end > start) text.insert(at + start, after.slice(start, after.length - end));
}

/**
 * Brings a shared text to `wanted` with the smallest edits by line, so that what others type in other lines meanwhile
 * stays where it is.
 */
export function editText(text: Y.Text, wanted: string): void {
  const present = text.toString();
  if (present === wanted) return;
  const before = present.split("\n");
  const after = wanted.split("\n");
  if (before.length !== after.length) {
    replaceStretch(text, 0, present, wanted);
    return;
  }
  let at = present.length;
  for (let line = before.length - 1; line >= 0; line--) {
    const old = before[line] ?? "";
    const next = after[line] ?? "";
    at -= old.length;
    if (old !== next) replaceStretch(text, at, old, next);
    at -= 1;
  }
}
