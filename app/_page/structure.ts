/**
 * The next value, with every part that did not change taken over from the old one, so that `===` tells what changed.
 *
 * Works on plain values, arrays and plain objects, which is all a page document has.
 */
export function shareStructure<T>(old: T | undefined, next: T): T {
  if (Object.is(old, next)) return next;
  if (typeof old !== "object" || typeof next !== "object" || old === null || next === null) return next;
  if (Array.isArray(next)) {
    if (!Array.isArray(old)) return next;
    let same = old.length === next.length;
    const shared = next.map((item: unknown, i) => {
      const one: unknown = shareStructure(old[i] as unknown, item);
      if (one !== old[i]) same = false;
      return one;
    });
    // The elements are those of `next` or equal ones of `old`.
    return (same ? old : shared) as T;
  }
  const oldObject = old as Record<string, unknown>;
  const nextObject = next as Record<string, unknown>;
  const keys = Object.keys(nextObject);
  let same = Object.keys(oldObject).length === keys.length;
  const shared: Record<string, unknown> = {};
  for (const key of keys) {
    const one = shareStructure(oldObject[key], nextObject[key]);
    shared[key] = one;
    if (!(key in oldObject) || one !== oldObject[key]) same = false;
  }
  return (same ? old : shared) as T;
}

/** True where two lists have the same entries, each `===`. */
export function sameEntries(a: readonly unknown[], b: readonly unknown[]): boolean {
  return a.length === b.length && a.every((entry, i) => entry === b[i]);
}
