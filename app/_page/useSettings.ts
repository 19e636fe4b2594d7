"use client";

import { useEffect } from "react";
import type { PageStore } from "./pageStore";
import { storedUncertainty, storeUncertainty } from "./settings";

/** Takes a person's own settings from the browser after the first paint. */
export function useStoredSettings(store: PageStore): void {
  useEffect(() => {
    store.set({ settings: { ...store.get().settings, uncertainty: storedUncertainty() } });
    return () => document.documentElement.classList.remove("projector");
  }, [store]);
}

/** Concise form and ± in turn. */
export function switchUncertainty(store: PageStore): void {
  const { settings } = store.get();
  const uncertainty = settings.uncertainty === "concise" ? "plus-minus" : "concise";
  storeUncertainty(uncertainty);
  store.set({ settings: { ...settings, uncertainty } });
}

/** Larger type, thicker marks, chrome gone: read from the back of a meeting room. */
export function switchProjector(store: PageStore): void {
  const { settings } = store.get();
  const projector = !settings.projector;
  document.documentElement.classList.toggle("projector", projector);
  store.set({ settings: { ...settings, projector } });
}
