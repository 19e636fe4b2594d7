import { createRequire } from "node:module";
import { pathToFileURL } from "node:url";
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

/** A thread takes over no loader from the process that starts it: it registers the one for TypeScript itself, then reads its file. */
function boot(file: URL): string {
  const loader = pathToFileURL(createRequire(import.meta.url).resolve("tsx/esm/api"));
  return `import(${JSON.stringify(loader.href)}).then(({ register }) => { register(); return import(${JSON.stringify(file.href)}); });`;
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
    const worker = new Worker(boot(new URL("./compact.worker.ts", import.meta.url)), { eval: true, workerData: { databaseUrl: this.databaseUrl } });
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
