import "server-only";
import path from "node:path";
import { Worker } from "node:worker_threads";
import { Refusal } from "../problem";
import type { Answers, Reply, Task } from "./tasks";

/** Worker threads at once, in this process. */
const THREADS = 2;
const idle: Worker[] = [];
const waiting: (() => void)[] = [];
let running = 0;

/**
 * Has a worker thread do a calculation, so that no request waits for another's table, and ends it at its deadline.
 *
 * @param deadline milliseconds
 * @throws Refusal 422 with the reader's or the engine's own sentence, 503 past the deadline or the memory it may use
 */
export async function calculate<K extends Task["kind"]>(task: Extract<Task, { kind: K }>, deadline: number): Promise<Answers[K]> {
  if (running >= THREADS) await new Promise<void>((resolve) => waiting.push(resolve));
  running++;
  try {
    const reply = await ask(idle.pop() ?? start(), task, deadline);
    if ("refused" in reply) throw new Refusal(422, "Not readable", reply.refused);
    if ("fault" in reply) throw new Error(`a calculation failed: ${reply.fault}`);
    return reply.answer as Answers[K];
  } finally {
    running--;
    waiting.shift()?.();
  }
}

function start(): Worker {
  // The worker is TypeScript read at run time, so the bundler must not look for it.
  const file = path.join(/* turbopackIgnore: true */ process.cwd(), "app", "_server", "calculation", "start.mjs");
  const worker = new Worker(/* turbopackIgnore: true */ file, { resourceLimits: { maxOldGenerationSizeMb: 1024 } });
  worker.unref();
  return worker;
}

function ask(worker: Worker, task: Task, deadline: number): Promise<Reply> {
  return new Promise((resolve, reject) => {
    const end = (settle: () => void, reusable: boolean) => {
      clearTimeout(timer);
      worker.removeAllListeners("message").removeAllListeners("error").removeAllListeners("exit");
      if (reusable) idle.push(worker);
      else {
        worker.on("error", () => undefined);
        void worker.terminate();
      }
      settle();
    };
    const tooMuch = (what: string) =>
      new Refusal(503, "Too much to calculate", `This took more ${what} than one request may have. Nothing was saved. Try a smaller table.`);
    const timer = setTimeout(() => end(() => reject(tooMuch("time")), false), deadline);
    worker.on("message", (reply: Reply) => end(() => resolve(reply), true));
    worker.on("error", (error: Error & { code?: string }) => end(() => reject(error.code === "ERR_WORKER_OUT_OF_MEMORY" ? tooMuch("memory") : error), false));
    worker.on("exit", () => end(() => reject(new Error("the worker thread ended")), false));
    worker.postMessage(task);
  });
}
