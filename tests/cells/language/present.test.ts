import { describe, expect, it } from "vitest";
import { allPresent } from "../../../cells/language/present";

describe("states that are all present", () => {
  it("are told from those with one that is not, wherever it stands and wherever the bytes begin", () => {
    for (let length = 0; length < 14; length++) {
      for (let from = 0; from < 4; from++) {
        const around = new Uint8Array(from + length + 3).fill(1);
        const state = around.subarray(from, from + length);
        state.fill(0);
        expect(allPresent(state)).toBe(true);
        for (let at = 0; at < length; at++) {
          state[at] = 1;
          expect(allPresent(state), `byte ${at} of ${length}, from ${from}`).toBe(false);
          state[at] = 0;
        }
      }
    }
  });
});
