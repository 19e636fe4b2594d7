/** Numbers from 0 to below 1, the same for the same seed: a linear congruential generator (Knuth 1997, TAOCP 2, table 3.3.4-1, line 16). */
export function generator(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return state / 4_294_967_296;
  };
}
