import { createEngine } from "@/cells";
import type { FromWorker, ToWorker } from "./engineProtocol";
import { createWorkerEngine } from "./workerEngine";

/** The engine's thread. All logic stands in workerEngine.ts, where it is tested without a worker. */
declare const self: DedicatedWorkerGlobalScope;

const worker = createWorkerEngine({
  createEngine,
  post: (message: FromWorker, transfer: ArrayBuffer[]) => self.postMessage(message, transfer),
  fetchBytes: async (url) => {
    const answer = await fetch(url, { credentials: "same-origin" });
    if (!answer.ok) throw new Error(`the server answered ${answer.status}`);
    return new Uint8Array(await answer.arrayBuffer());
  },
  later: (run) => setTimeout(run, 0),
});

self.onmessage = (event: MessageEvent<ToWorker>) => worker.receive(event.data);
