import { Worker } from "node:worker_threads";

export interface CompactRequest {
  readonly id: number;
  readonly pageId: string;
}
export type CompactAnswer = { readonly id: number; readonly covered: number } | { readonly id: number; readonly error: string };

interface Waiting {
  resolve(covered: number): void;
  reject(error: Error): void;
}

/** Folds pages in a worker thread, so that opening and typing never wait for it. The thread is started when first needed. */
export class Compactor {
  private worker: Worker | null = null;
  private readonly waiting = new Map<number, Waiting>();
  private next = 1;

  constructor(private readonly databaseUrl: string) {}

  /** Folds a page; see `compactPage`. */
  run(pageId: string): Promise<number> {
    const worker = (this.worker ??= this.start());
    const id = this.next++;
    return new Promise((resolve, reject) => {
      this.waiting.set(id, { resolve, reject });
      worker.postMessage({ id, pageId } satisfies CompactRequest);
    });
  }

  private start(): Worker {
    // TypeScript is read by tsx in the thread as in the process itself.
    const worker = new Worker(new URL("./compact.worker.ts", import.meta.url), {
      workerData: { databaseUrl: this.databaseUrl },
      execArgv: ["--import", "tsx"],
    });
    worker.unref();
    worker.on("message", (answer: CompactAnswer) => {
      const waiting = this.waiting.get(answer.id);
      this.waiting.delete(answer.id);
      if ("error" in answer) waiting?.reject(new Error(answer.error));
      else waiting?.resolve(answer.covered);
    });
    const lost = (error: Error): void => {
      if (this.worker === worker) this.worker = null;
      for (const waiting of this.waiting.values()) waiting.reject(error);
      this.waiting.clear();
    };
    worker.on("error", lost);
    worker.on("exit", () => {
      lost(new Error("The thread that folds pages ended."));
    });
    return worker;
  }

  async close(): Promise<void> {
    await this.worker?.terminate();
    this.worker = null;
  }
}
