import { parentPort, workerData } from "node:worker_threads";
import pg from "pg";
import { compactPage } from "./compact";
import type { CompactAnswer, CompactRequest } from "./compactor";

/** Worker thread that folds pages, one after the other, over a database connection of its own. */
const { databaseUrl } = workerData as { databaseUrl: string };
let queue: Promise<void> = Promise.resolve();

async function answer(request: CompactRequest): Promise<CompactAnswer> {
  const client = new pg.Client({ connectionString: databaseUrl, statement_timeout: 60_000 });
  // A connection that breaks makes the query fail, which is said; it must not end the process.
  client.on("error", () => undefined);
  try {
    await client.connect();
    return { id: request.id, covered: await compactPage(client, request.pageId) };
  } catch (error) {
    return { id: request.id, error: error instanceof Error ? error.message : String(error) };
  } finally {
    await client.end().catch(() => undefined);
  }
}

parentPort?.on("message", (request: CompactRequest) => {
  queue = queue.then(async () => {
    parentPort?.postMessage(await answer(request));
  });
});
