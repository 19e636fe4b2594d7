import { useEffect, useState } from "react";

/**
 * A value once it has stood still for `ms`; with 0, and for the first one, at once. Drawing thousands of points takes longer than
 * a letter takes to type, so a large plot waits for the end of a word.
 */
export function useSettled<T>(value: T, ms: number): T {
  const [settled, setSettled] = useState(value);
  const isDue = ms === 0 || settled === null;
  useEffect(() => {
    if (isDue) return;
    const timer = setTimeout(() => setSettled(value), ms);
    return () => clearTimeout(timer);
  }, [value, ms, isDue]);
  if (isDue && settled !== value) setSettled(value);
  return isDue ? value : settled;
}
