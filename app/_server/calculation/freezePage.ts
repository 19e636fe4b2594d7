import { CellError, createEngine, pageSchema, type PageDocument } from "@/cells";
import { snapshotFiles } from "../freeze/snapshotFiles";
import { valuesFromMemory } from "./fromMemory";
import type { FreezeAnswer, Task } from "./tasks";

/** Evaluates a page and makes the files of its snapshot. @throws CellError when the document cannot be frozen as it is */
export function freezePage(task: Extract<Task, { kind: "freeze" }>): FreezeAnswer {
  const page = readDocument(task.page);
  const engine = createEngine();
  for (const { sha256, bytes } of task.sources) engine.setSource(sha256, bytes);
  const results = engine.evaluate(page);
  const { hash, files } = snapshotFiles({ page, sources: task.sources, results, bodies: task.bodies, atomicWeights: task.atomicWeights });
  const data = [...results.blocks.values()].filter((result) => result.kind === "data");
  const total = (of: (result: (typeof data)[number]) => number) => data.reduce((sum, result) => sum + of(result), 0);
  return {
    hash,
    engine: results.engine,
    files,
    bodies: results.bodies,
    fromMemory: valuesFromMemory(page, results.bodies),
    problems: [...results.blocks.values()].flatMap((result) => result.problems),
    counts: { blocks: page.blocks.length, samples: total((r) => r.samples), setAside: total((r) => r.setAside), amended: total((r) => r.amended) },
  };
}

function readDocument(document: unknown): PageDocument {
  const read = pageSchema.safeParse(document);
  if (read.success) return read.data;
  const issue = read.error.issues[0];
  throw new CellError(
    "unreadable-page",
    `The page cannot be frozen: ${issue?.path.join(".") ?? "it"} is not as it must be (${issue?.message ?? "unknown"}). Repair that block first.`,
  );
}
