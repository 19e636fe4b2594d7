import type { TraceRequest } from "@/cells";
import { classSequence } from "./classSequence";
import { createEngineClient, type EngineClient } from "./engineClient";
import type { PageStore } from "./pageStore";

/** Starts the engine's worker for a page and keeps its results in the store. Only in the browser. */
export function startPageEngine(
  store: PageStore,
  sourceUrl: (sha256: string, file: string) => string | undefined,
): EngineClient & { askTrace(request: TraceRequest | null): void } {
  const worker = new Worker(new URL("./engine.worker.ts", import.meta.url), { type: "module" });
  let asked = 0;

  const askTrace = (request: TraceRequest | null) => {
    const mine = ++asked;
    if (request === null) return store.set({ traced: null });
    const before = store.get().traced;
    const same = before !== null && before.request.block === request.block && before.request.name === request.name && before.request.index === request.index;
    // The old answer stays on the screen until the new one is there.
    store.set({ traced: { request, node: same ? before.node : null } });
    client.trace(request).then(
      (node) => mine === asked && store.set({ traced: { request, node } }),
      () => mine === asked && store.set({ traced: null }),
    );
  };

  const client = createEngineClient(worker, sourceUrl, {
    onResults(results, loading, upToDate) {
      const { classes, traced } = store.get();
      store.set({ results, loading, calculating: !upToDate, fault: null, classes: classSequence(results, classes) });
      if (traced !== null && upToDate) askTrace(traced.request);
    },
    onSimulating: (simulating) => store.set({ simulating }),
    onFault: (fault) => store.set({ fault, calculating: false }),
  });
  return { ...client, askTrace };
}
