/**
 * The known name that a misspelt one is closest to, for "Did you mean …?": at most two letters changed, left out or added,
 * capitals not counted. Short names, which are close to many, get none.
 *
 * @param names at most a few hundred; those longer than 60 characters are passed over
 */
export function nearestName(written: string, names: Iterable<string>): string | undefined {
  if (written.length < 4 || written.length > 60) return undefined;
  let best: string | undefined;
  let least = 3;
  for (const name of names) {
    if (name.length > 60 || Math.abs(name.length - written.length) >= least) continue;
    const distance = editDistance(written.toLowerCase(), name.toLowerCase());
    if (distance < least && distance < name.length / 2) [best, least] = [name, distance];
  }
  return best;
}

/** Letters to change, leave out or add to make one word of another (Levenshtein 1966). */
function editDistance(a: string, b: string): number {
  let above = Array.from({ length: b.length + 1 }, (_, i) => i);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const changed = (above[j - 1] ?? 0) + (a.charAt(i - 1) === b.charAt(j - 1) ? 0 : 1);
      row.push(Math.min(changed, (above[j] ?? 0) + 1, (row[j - 1] ?? 0) + 1));
    }
    above = row;
  }
  return above[b.length] ?? 0;
}
