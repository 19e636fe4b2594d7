/** A linear scale from data to pixels. */
export interface Scale {
  readonly from: number;
  readonly to: number;
  at(value: number): number;
}

/** Data from `from`–`to` onto `start`–`end`; a range of no width maps to the middle. */
export function scale(from: number, to: number, start: number, end: number): Scale {
  const width = to - from;
  return { from, to, at: (v) => (width === 0 ? (start + end) / 2 : start + ((v - from) / width) * (end - start)) };
}

/** The step of 1, 2 or 5 times a power of ten that gives at most `count` ticks. */
export function tickStep(width: number, count: number): number {
  const rough = width / Math.max(1, count);
  if (!(rough > 0)) return 1;
  const power = 10 ** Math.floor(Math.log10(rough));
  for (const m of [1, 2, 5]) if (m * power >= rough * (1 - 1e-12)) return m * power;
  return 10 * power;
}

/** Decimals that ticks of a step need. */
export function tickDecimals(step: number): number {
  return Math.min(12, Math.max(0, -Math.floor(Math.log10(step) + 1e-9)));
}

/** Round values from `from` to `to`, ends included where they are round. */
export function ticks(from: number, to: number, count: number): number[] {
  const step = tickStep(to - from, count);
  const out: number[] = [];
  for (let k = Math.ceil(from / step - 1e-9); k * step <= to + step * 1e-9; k++) out.push(k === 0 ? 0 : Number((k * step).toPrecision(12)));
  return out;
}

/** A range widened on both sides by a part of its width; one value becomes a range around it. */
export function padded(low: number, high: number, part: number): readonly [number, number] {
  if (low === high) {
    const by = low === 0 ? 1 : Math.abs(low) * 0.1;
    return [low - by, high + by];
  }
  const by = (high - low) * part;
  return [low - by, high + by];
}
