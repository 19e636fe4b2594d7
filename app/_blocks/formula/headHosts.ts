/**
 * Where the editor has put the elements that stand over its lines. The editor makes and drops them as it scrolls and edits;
 * React fills them through portals, so that results never touch the editor's own text.
 */
export interface HeadHosts {
  add(ordinal: number, element: HTMLElement): void;
  remove(ordinal: number, element: HTMLElement): void;
  readonly subscribe: (changed: () => void) => () => void;
  readonly snapshot: () => ReadonlyMap<number, HTMLElement>;
}

/** A fresh set of places. Changes are told after the editor's own update has ended. */
export function createHeadHosts(): HeadHosts {
  const hosts = new Map<number, HTMLElement>();
  const listeners = new Set<() => void>();
  let copy: ReadonlyMap<number, HTMLElement> = new Map();
  let isQueued = false;
  const tell = (): void => {
    if (isQueued) return;
    isQueued = true;
    queueMicrotask(() => {
      isQueued = false;
      copy = new Map(hosts);
      for (const listener of listeners) listener();
    });
  };
  return {
    add(ordinal, element) {
      hosts.set(ordinal, element);
      tell();
    },
    remove(ordinal, element) {
      if (hosts.get(ordinal) !== element) return;
      hosts.delete(ordinal);
      tell();
    },
    subscribe(changed) {
      listeners.add(changed);
      return () => listeners.delete(changed);
    },
    snapshot: () => copy,
  };
}
