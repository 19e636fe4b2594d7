import { CellError, PAGE_FORMAT, type Block, type BlockResult, type Engine, type PageDocument, type PageResults, type Table } from "@/cells";
import type { FileProposal, FromWorker, PageMessage, Preview, ToWorker, TravellingResult } from "./engineProtocol";
import { packPlot } from "./plotPacking";
import { createSimulationQueue } from "./simulationQueue";
import { packTable } from "./tablePacking";
import { copyForTransfer } from "./transfer";

export interface WorkerEngineParts {
  readonly createEngine: () => Engine;
  readonly post: (message: FromWorker, transfer: ArrayBuffer[]) => void;
  readonly fetchBytes: (url: string) => Promise<Uint8Array>;
  /** Runs something after the messages that wait already. */
  readonly later: (run: () => void) => void;
}

/** Rows an import shows before it is saved. */
export const PREVIEW_ROWS = 50;
/** Handle of the one block of a preview's page. */
const PREVIEW_HANDLE = "preview";
/** So many values show what a column holds. */
const SAMPLE_VALUES = 4;
/** More problems than this are counted only. */
const MOST_PROBLEMS = 500;

function travelling(result: BlockResult, results: ReadonlyMap<string, BlockResult>): TravellingResult {
  if (result.kind === "plot")
    return packPlot(result, (handle) => {
      const from = results.get(handle);
      return from?.kind === "data" ? from.table : undefined;
    });
  if (result.kind !== "data") return result;
  const { table, ...rest } = result;
  return table === undefined ? rest : { ...rest, table: packTable(table) };
}

function firstRows(table: Table, n: number): Table {
  const rows = Math.min(n, table.rows);
  return {
    ...table,
    rows,
    rowIds: table.rowIds.slice(0, rows),
    samples: table.samples.slice(0, rows),
    classes: table.classes.slice(0, rows),
    origins: table.origins.slice(0, rows),
    setAside: table.setAside.slice(0, rows),
    columns: table.columns.map((c) =>
      c.kind === "text"
        ? { ...c, text: c.text.slice(0, rows) }
        : {
            ...c,
            value: c.value.slice(0, rows),
            sigma: c.sigma.slice(0, rows),
            state: c.state.slice(0, rows),
            limit: c.limit.slice(0, rows),
            assumed: c.assumed.slice(0, rows),
            amended: c.amended.slice(0, rows),
            raw: c.raw.slice(0, rows),
            rawSigma: c.rawSigma.slice(0, rows),
          },
    ),
    correlations: [],
  };
}

function sentence(error: unknown): string {
  if (error instanceof CellError) return error.message;
  return error instanceof Error ? `The engine failed: ${error.message}. This is a fault of the program.` : "The engine failed. This is a fault of the program.";
}

/** Handles that lean, directly or through others, on one of `on`. */
function leaning(on: ReadonlySet<string>, readsFrom: ReadonlyMap<string, readonly string[]>): Set<string> {
  const found = new Set(on);
  for (let grew = on.size > 0; grew;) {
    grew = false;
    for (const [handle, from] of readsFrom) {
      if (found.has(handle) || !from.some((f) => found.has(f))) continue;
      found.add(handle);
      grew = true;
    }
  }
  return found;
}

/**
 * The worker's side: keeps the page and the engine, fetches sources, evaluates the newest page only, and sends what changed.
 */
export function createWorkerEngine(parts: WorkerEngineParts): { receive: (message: ToWorker) => void } {
  const engine = parts.createEngine();
  const blocks = new Map<string, Block>();
  let page: PageMessage | undefined;
  let due = false;
  const sent = new Map<string, BlockResult>();
  const fetching = new Set<string>();
  const failed = new Set<string>();

  const schedule = () => {
    if (due) return;
    due = true;
    parts.later(() => {
      due = false;
      evaluate();
    });
  };

  const fetchSource = (sha256: string, url: string) => {
    fetching.add(sha256);
    parts
      .fetchBytes(url)
      .then((bytes) => engine.setSource(sha256, bytes))
      // Evaluated without it, the block itself says that its source is not here.
      .catch(() => failed.add(sha256))
      .finally(() => {
        fetching.delete(sha256);
        schedule();
      });
  };

  const document = (): PageDocument => {
    const ordered: Block[] = [];
    for (const key of page?.order ?? []) {
      const block = blocks.get(key);
      if (block !== undefined) ordered.push(block);
    }
    return { format: PAGE_FORMAT, title: page?.title ?? "", bodies: { ...page?.bodies }, ownBodies: { ...page?.ownBodies }, blocks: ordered };
  };

  const evaluate = () => {
    if (page === undefined) return;
    const { version, sources } = page;
    const now = document();
    const waiting = new Set<string>();
    for (const block of now.blocks) {
      const sha256 = block.kind === "data" ? block.source?.sha256 : undefined;
      if (sha256 === undefined || engine.hasSource(sha256) || failed.has(sha256)) continue;
      const url = sources[sha256];
      if (!fetching.has(sha256) && url !== undefined) fetchSource(sha256, url);
      if (fetching.has(sha256)) waiting.add(block.id);
    }
    const began = performance.now();
    let results: PageResults;
    try {
      results = engine.evaluate(now, "later");
    } catch (error) {
      parts.post({ type: "fault", version, text: sentence(error) }, []);
      return;
    }
    const loading = leaning(waiting, results.readsFrom);
    const changed: [string, TravellingResult][] = [];
    const order: string[] = [];
    for (const [handle, result] of results.blocks) {
      if (loading.has(handle)) continue;
      order.push(handle);
      if (sent.get(handle) === result) continue;
      sent.set(handle, result);
      changed.push([handle, travelling(result, results.blocks)]);
    }
    for (const handle of sent.keys()) if (!results.blocks.has(handle) || loading.has(handle)) sent.delete(handle);
    const { copy, transfer } = copyForTransfer(changed);
    parts.post(
      {
        type: "results",
        version,
        engine: results.engine,
        bodies: results.bodies,
        order,
        changed: copy,
        readsFrom: [...results.readsFrom],
        loading: [...loading],
        took: performance.now() - began,
      },
      transfer,
    );
    simulations.take(new Map([...(results.simulations ?? [])].filter(([handle]) => !loading.has(handle))));
  };

  const simulations = createSimulationQueue({
    later: parts.later,
    now: () => performance.now(),
    onProgress: (progress) => parts.post({ type: "simulating", progress: [...progress] }, []),
    onDone: schedule,
  });

  const preview = (message: Extract<ToWorker, { type: "preview" }>): Preview => {
    // An engine of its own: a preview must not touch what the page's engine remembers.
    const own = parts.createEngine();
    own.setSource(message.fileName, message.bytes);
    const block: Block = { id: PREVIEW_HANDLE, kind: "data", source: { file: message.fileName }, columns: [...message.columns] };
    const result = own.evaluate({ format: PAGE_FORMAT, title: "", blocks: [block] }).blocks.get(PREVIEW_HANDLE);
    if (result?.kind !== "data") throw new CellError("no-preview", "This file gives no table.");
    const table = result.table === undefined ? null : packTable(firstRows(result.table, PREVIEW_ROWS));
    return { rows: result.table?.rows ?? 0, problems: result.problems.slice(0, MOST_PROBLEMS), summaries: result.columns, screening: result.screening, table };
  };

  const propose = (bytes: Uint8Array, fileName: string): FileProposal => {
    const { headers, rows, columns, problems } = engine.propose(bytes, fileName);
    return {
      fileName,
      headers,
      rows: rows.length,
      columns,
      samples: headers.map((_, c) => rows.slice(0, SAMPLE_VALUES).map((row) => row[c] ?? "")),
      problems: problems.slice(0, MOST_PROBLEMS),
      problemCount: problems.length,
    };
  };

  const answer = (id: number, make: () => FromWorker) => {
    try {
      const { copy, transfer } = copyForTransfer(make());
      parts.post(copy, transfer);
    } catch (error) {
      parts.post({ type: "failed", id, text: sentence(error) }, []);
    }
  };

  const receive = (message: ToWorker) => {
    switch (message.type) {
      case "page": {
        if (page !== undefined && message.version <= page.version) return;
        page = message;
        for (const [key, block] of message.changed) blocks.set(key, block);
        const present = new Set(message.order);
        for (const key of blocks.keys()) if (!present.has(key)) blocks.delete(key);
        failed.clear();
        schedule();
        return;
      }
      case "source":
        engine.setSource(message.sha256, message.bytes);
        schedule();
        return;
      case "simulation":
        simulations.stop(message.block, message.isStopped);
        return;
      case "trace":
        // A trace is asked of what was evaluated last; a page that waits is evaluated first.
        if (due) evaluate();
        answer(message.id, () => ({ type: "trace", id: message.id, node: engine.trace(message.request) }));
        return;
      case "nearest":
        if (due) evaluate();
        answer(message.id, () => ({ type: "nearest", id: message.id, nearest: engine.nearest(message.request) }));
        return;
      case "propose":
        answer(message.id, () => ({ type: "proposal", id: message.id, proposal: propose(message.bytes, message.fileName) }));
        return;
      case "preview":
        answer(message.id, () => ({ type: "preview", id: message.id, preview: preview(message) }));
        return;
    }
  };

  return { receive };
}
