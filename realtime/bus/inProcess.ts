import type { Bus, Flushed, FlushListener } from "./bus";

/** The bus of a single process: publishing is calling. */
export class InProcessBus implements Bus {
  private readonly listeners = new Map<string, Set<FlushListener>>();

  publish(flushed: Flushed): void {
    // A listener that leaves while it is told disturbs nobody.
    for (const listener of [...(this.listeners.get(flushed.pageId) ?? [])]) {
      try {
        listener(flushed);
      } catch (error) {
        console.error("A listener of the bus failed:", error);
      }
    }
  }

  listen(pageId: string, listener: FlushListener): () => void {
    const listeners = this.listeners.get(pageId) ?? new Set();
    this.listeners.set(pageId, listeners);
    listeners.add(listener);
    return () => {
      listeners.delete(listener);
      if (listeners.size === 0 && this.listeners.get(pageId) === listeners) this.listeners.delete(pageId);
    };
  }

  close(): Promise<void> {
    this.listeners.clear();
    return Promise.resolve();
  }
}
