/** Results end here, so that no engine may leave work out whose result nobody reads. */
let sink = 0;

/** Seconds of one call: the median of `rounds` after one round to warm up, each of as many calls as fill `least` seconds. */
export function secondsOf(work: () => number, rounds = 5, least = 0.04): number {
  let calls = 1;
  for (;;) {
    const seconds = timed(work, calls);
    if (seconds >= least) break;
    calls = Math.ceil(calls * Math.min(20, Math.max(2, (1.2 * least) / Math.max(seconds, 1e-6))));
  }
  const seconds = medianOf(Array.from({ length: rounds }, () => timed(work, calls) / calls));
  if (!Number.isFinite(sink)) throw new Error("what was measured gave no number");
  return seconds;
}

function timed(work: () => number, calls: number): number {
  const start = performance.now();
  for (let i = 0; i < calls; i++) sink += work();
  return (performance.now() - start) / 1000;
}

export function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? (sorted[middle] ?? Number.NaN) : ((sorted[middle - 1] ?? Number.NaN) + (sorted[middle] ?? Number.NaN)) / 2;
}
