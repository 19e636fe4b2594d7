/** Results end here, so that no engine may leave work out whose result nobody reads. */
let sink = 0;

/**
 * One side of a comparison: seconds of one call, the mean of `calls`. Both sides count the processor's time of their whole process,
 * all its threads (this one collects garbage and compiles beside), so that other programs on the machine stay out of it.
 */
export type Side = (calls: number) => number | Promise<number>;

/** A piece of work of ours as a side; it gives one number of its result. */
export function sideOf(work: () => number): Side {
  return (calls) => {
    const before = process.cpuUsage();
    for (let i = 0; i < calls; i++) sink += work();
    const { user, system } = process.cpuUsage(before);
    const seconds = (user + system) / 1e6 / calls;
    if (sink !== sink) throw new Error("what was measured gave no number");
    return seconds;
  };
}

/** How many calls fill `least` seconds, after as many to warm up. */
export async function callsFor(side: Side, least = 0.08): Promise<number> {
  let calls = 1;
  for (;;) {
    const seconds = (await side(calls)) * calls;
    if (seconds >= least) return calls;
    calls = Math.ceil(calls * Math.min(20, Math.max(2, (1.2 * least) / Math.max(seconds, 1e-6))));
  }
}

export interface Compared {
  /** Median over the rounds of ours ÷ theirs. */
  readonly ratio: number;
  /** Medians of each side, seconds; for ratios between sizes, never shown alone. */
  readonly ours: number;
  readonly theirs: number;
}

/** Five rounds in which the two sides take turns, so that whatever else the machine does meets both. */
export async function compare(ours: Side, theirs: Side, rounds = 5): Promise<Compared> {
  const [n, m] = [await callsFor(ours), await callsFor(theirs)];
  const found: { readonly ours: number; readonly theirs: number }[] = [];
  for (let round = 0; round < rounds; round++) {
    // Who goes first changes too.
    const early = round % 2 === 0 ? await ours(n) : undefined;
    const other = await theirs(m);
    found.push({ ours: early ?? (await ours(n)), theirs: other });
  }
  return {
    ratio: medianOf(found.map((round) => round.ours / round.theirs)),
    ours: medianOf(found.map((round) => round.ours)),
    theirs: medianOf(found.map((round) => round.theirs)),
  };
}

export function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? (sorted[middle] ?? Number.NaN) : ((sorted[middle - 1] ?? Number.NaN) + (sorted[middle] ?? Number.NaN)) / 2;
}
