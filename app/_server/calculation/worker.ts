import { parentPort } from "node:worker_threads";
import { CellError } from "@/cells";
import { freezePage } from "./freezePage";
import { readSource } from "./readSource";
import type { Answers, Reply, Task } from "./tasks";

/** One worker thread: takes a task, answers, and waits for the next. */
parentPort?.on("message", (task: Task) => {
  parentPort?.postMessage(reply(task));
});

function reply(task: Task): Reply {
  try {
    return { answer: run(task) };
  } catch (error) {
    if (error instanceof CellError || error instanceof RangeError) return { refused: error.message };
    return { fault: error instanceof Error ? (error.stack ?? error.message) : String(error) };
  }
}

function run(task: Task): Answers[keyof Answers] {
  switch (task.kind) {
    case "read":
      return readSource(task.fileName, task.bytes);
    case "freeze":
      return freezePage(task);
  }
}
