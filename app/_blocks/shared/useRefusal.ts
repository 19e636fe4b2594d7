"use client";

import { useCallback, useState } from "react";

/**
 * Runs edits and keeps the sentence of one that was refused.
 *
 * @returns a function that runs an edit and tells whether it went through, and why the last one did not
 */
export function useRefusal(): readonly [run: (edit: () => void) => boolean, refusal: string | null] {
  const [refusal, setRefusal] = useState<string | null>(null);
  const run = useCallback((edit: () => void): boolean => {
    try {
      edit();
      setRefusal(null);
      return true;
    } catch (error) {
      setRefusal(error instanceof Error ? error.message : "This could not be changed.");
      return false;
    }
  }, []);
  return [run, refusal];
}
