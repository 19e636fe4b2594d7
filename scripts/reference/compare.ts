/** How near a number made again has to come: as `remade` of a recording says it. */
export interface Tolerance {
  readonly relative: number;
  readonly absolute: number;
  /** Relative tolerances of named parts of a case, where a method is less exact than the others. */
  readonly parts?: Readonly<Record<string, number>>;
}

export interface Comparison {
  /** Numbers compared. */
  readonly numbers: number;
  /** Largest difference over what it may be; 1 and less is within. */
  readonly worst: number;
  /** Sentences about what differs, the first few. */
  readonly differences: readonly string[];
}

const MOST_TOLD = 5;

/** Compares two recordings' cases, number by number; texts and the order of everything must be the same. */
export function compare(recorded: unknown, made: unknown, tolerance: Tolerance): Comparison {
  let numbers = 0;
  let worst = 0;
  const differences: string[] = [];
  const tell = (text: string): void => void (differences.length < MOST_TOLD && differences.push(text));
  const walk = (old: unknown, now: unknown, at: string, relative: number): void => {
    if (typeof old === "number" && typeof now === "number") {
      numbers++;
      const allowed = Math.max(tolerance.absolute, relative * Math.abs(old));
      const away = Math.abs(now - old);
      const share = away === 0 ? 0 : away / allowed;
      worst = Math.max(worst, share);
      if (!(share <= 1)) tell(`${at}: recorded ${old}, now ${now}`);
    } else if (typeof old === "object" && typeof now === "object" && old !== null && now !== null) {
      const keys = [...new Set([...Object.keys(old), ...Object.keys(now)])];
      for (const key of keys) walk(Reflect.get(old, key), Reflect.get(now, key), `${at}/${key}`, tolerance.parts?.[key] ?? relative);
    } else if (old !== now) {
      worst = Infinity;
      tell(`${at}: recorded ${JSON.stringify(old)}, now ${JSON.stringify(now)}`);
    }
  };
  walk(recorded, made, "", tolerance.relative);
  return { numbers, worst, differences };
}
