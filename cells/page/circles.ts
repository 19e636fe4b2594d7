/**
 * Depth-first order of a graph, each node after what it needs, and its circles (strongly connected components of more than
 * one node, or a node that needs itself). R. E. Tarjan 1972, SIAM J. Comput. 1, 146; written without recursion, since a
 * page may hold thousands of lines.
 *
 * @param keys every node, in the order in which equals are kept
 * @param needs what a node needs; only keys that are nodes
 * @returns the order, and each circle in the order in which it goes round as far as it was met
 */
export function circles(keys: readonly string[], needs: (key: string) => readonly string[]): { order: string[]; cycles: string[][] } {
  const index = new Map<string, number>();
  const low = new Map<string, number>();
  const open: string[] = [];
  const isOpen = new Set<string>();
  const order: string[] = [];
  const cycles: string[][] = [];

  const enter = (key: string): { key: string; needs: readonly string[]; next: number } => {
    index.set(key, index.size);
    low.set(key, index.size - 1);
    open.push(key);
    isOpen.add(key);
    return { key, needs: needs(key), next: 0 };
  };
  const lower = (key: string, to: number): void => {
    if (to < (low.get(key) ?? 0)) low.set(key, to);
  };

  for (const start of keys) {
    if (index.has(start)) continue;
    const stack = [enter(start)];
    for (let frame = stack.at(-1); frame !== undefined; frame = stack.at(-1)) {
      const need = frame.needs[frame.next++];
      if (need !== undefined) {
        if (!index.has(need)) stack.push(enter(need));
        else if (isOpen.has(need)) lower(frame.key, index.get(need) ?? 0);
        continue;
      }
      stack.pop();
      const parent = stack.at(-1);
      if (parent !== undefined) lower(parent.key, low.get(frame.key) ?? 0);
      if (low.get(frame.key) !== index.get(frame.key)) continue;
      const component = open.splice(open.indexOf(frame.key));
      for (const key of component) isOpen.delete(key);
      order.push(...[...component].reverse());
      if (component.length > 1 || needs(frame.key).includes(frame.key)) cycles.push(component);
    }
  }
  return { order, cycles };
}
