/** The last calculation of each group, as a promise that never fails. */
const last = new Map<string, Promise<unknown>>();

/** Runs one long calculation of a group after the other, so that one busy group leaves threads to the rest. */
export async function oneAtATime<T>(groupId: string, run: () => Promise<T>): Promise<T> {
  const before = last.get(groupId) ?? Promise.resolve();
  const mine = before.then(run);
  const settled = mine.catch(() => undefined);
  last.set(groupId, settled);
  try {
    return await mine;
  } finally {
    if (last.get(groupId) === settled) last.delete(groupId);
  }
}
