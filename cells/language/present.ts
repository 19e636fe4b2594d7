/** Whether every state is "present" (0), four rows at a time where the memory's alignment allows it. */
export function allPresent(state: Uint8Array): boolean {
  const words = state.byteOffset % 4 === 0 ? state.length >> 2 : 0;
  const fours = new Uint32Array(state.buffer, words === 0 ? 0 : state.byteOffset, words);
  for (let i = 0; i < words; i++) if (fours[i] !== 0) return false;
  for (let i = 4 * words; i < state.length; i++) if (state[i] !== 0) return false;
  return true;
}
