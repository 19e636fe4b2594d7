"use client";

import { createContext, useContext, useMemo, useSyncExternalStore, type ReactNode } from "react";
import { blockViewOf, wholeViewOf } from "./blockView";
import type { PageView } from "./contract";
import type { PageState, PageStore } from "./pageStore";

const StoreContext = createContext<PageStore | null>(null);

export function PageProvider({ store, children }: { readonly store: PageStore; readonly children: ReactNode }) {
  return <StoreContext value={store}>{children}</StoreContext>;
}

export function usePageStore(): PageStore {
  const store = useContext(StoreContext);
  if (store === null) throw new Error("usePageStore outside of a PageProvider");
  return store;
}

/** One thing of the page's state. `select` must give the identical value as long as nothing changed. */
export function usePage<T>(select: (state: PageState) => T): T {
  const store = usePageStore();
  const read = () => select(store.get());
  return useSyncExternalStore(store.subscribe, read, read);
}

/** The page as one block sees it; a new object only when something that block looks at changed. */
export function useBlockView(key: string): PageView {
  const store = usePageStore();
  const read = useMemo(() => blockViewOf(store, key), [store, key]);
  return useSyncExternalStore(store.subscribe, read, read);
}

/** The page as a whole, new with every change: only for what shows little. */
export function useWholeView(): PageView {
  const store = usePageStore();
  const read = useMemo(() => wholeViewOf(store), [store]);
  return useSyncExternalStore(store.subscribe, read, read);
}
