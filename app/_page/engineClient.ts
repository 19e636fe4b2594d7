import type { BlockResult, Column, Nearest, NearestRequest, OwnBody, PageResults, TraceNode, TraceRequest } from "@/cells";
import type { PageBlock } from "@/realtime/document";
import type { FileProposal, FromWorker, Preview, ResultsMessage, ToWorker, TravellingResult } from "./engineProtocol";
import { unpackPlot } from "./plotPacking";
import type { SimulationProgress } from "./simulationQueue";
import { keepSameLines } from "./sameLines";
import { unpackTable } from "./tablePacking";

/** As much of a Worker as is used; tests give their own. */
export interface WorkerLike {
  postMessage(message: ToWorker, transfer?: Transferable[]): void;
  onmessage: ((event: MessageEvent<FromWorker>) => void) | null;
  onerror: ((event: ErrorEvent) => void) | null;
  terminate(): void;
}

export interface PageInput {
  readonly title: string;
  readonly bodies: Readonly<Record<string, string>>;
  readonly ownBodies: Readonly<Record<string, OwnBody>>;
  readonly blocks: readonly PageBlock[];
}

export interface EngineClientEvents {
  /** New results; those that did not change are the identical objects. */
  readonly onResults: (results: PageResults, loading: ReadonlySet<string>, upToDate: boolean) => void;
  readonly onFault: (text: string) => void;
  /** How far simulations are, by handle; those that are done are not named any more. */
  readonly onSimulating?: (progress: ReadonlyMap<string, SimulationProgress>) => void;
}

/** The page's side of the engine. */
export interface EngineClient {
  /** Hands over the page as it is now; only changed blocks travel. */
  update(page: PageInput): void;
  trace(request: TraceRequest): Promise<TraceNode | null>;
  nearest(request: NearestRequest): Promise<Nearest | null>;
  /** Stops the simulation of a block, or lets it go on. */
  stopSimulation(handle: string, isStopped: boolean): void;
  propose(bytes: Uint8Array, fileName: string): Promise<FileProposal>;
  preview(bytes: Uint8Array, fileName: string, columns: readonly Column[]): Promise<Preview>;
  giveSource(sha256: string, bytes: Uint8Array): void;
  stop(): void;
}

function arrived(result: TravellingResult, results: ReadonlyMap<string, BlockResult>): BlockResult {
  if (result.kind === "plot") return unpackPlot(result, results);
  if (result.kind !== "data") return result;
  const { table, ...rest } = result;
  return table === undefined ? rest : { ...rest, table: unpackTable(table) };
}

/**
 * @param sourceUrl where the bytes of a source are fetched from, by hash and by file name.
 */
export function createEngineClient(
  worker: WorkerLike,
  sourceUrl: (sha256: string, file: string) => string | undefined,
  events: EngineClientEvents,
): EngineClient {
  let version = 0;
  let asked = 0;
  const given = new Map<string, PageBlock["block"]>();
  let results = new Map<string, BlockResult>();
  const waiting = new Map<number, { resolve: (message: FromWorker) => void; reject: (error: Error) => void }>();

  const take = (message: ResultsMessage) => {
    const changed = new Map(message.changed);
    const next = new Map<string, BlockResult>();
    for (const handle of message.order) {
      const fresh = changed.get(handle);
      const result = fresh === undefined ? results.get(handle) : keepSameLines(results.get(handle), arrived(fresh, next));
      if (result !== undefined) next.set(handle, result);
    }
    results = next;
    const readsFrom = new Map(message.readsFrom);
    events.onResults({ engine: message.engine, bodies: message.bodies, blocks: next, readsFrom }, new Set(message.loading), message.version === version);
  };

  worker.onmessage = ({ data }) => {
    if (data.type === "results") return take(data);
    if (data.type === "fault") return events.onFault(data.text);
    if (data.type === "simulating") return events.onSimulating?.(new Map(data.progress));
    const request = waiting.get(data.id);
    waiting.delete(data.id);
    if (data.type === "failed") request?.reject(new Error(data.text));
    else request?.resolve(data);
  };
  worker.onerror = () => events.onFault("The calculation stopped. Reload the page; nothing that was saved is lost.");

  const ask = (make: (id: number) => ToWorker): Promise<FromWorker> => {
    const id = ++asked;
    return new Promise((resolve, reject) => {
      waiting.set(id, { resolve, reject });
      worker.postMessage(make(id));
    });
  };

  return {
    update({ title, bodies, ownBodies, blocks }) {
      const changed: [string, PageBlock["block"]][] = [];
      const sources: Record<string, string> = {};
      const present = new Set<string>();
      for (const { key, block } of blocks) {
        present.add(key);
        if (given.get(key) !== block) {
          given.set(key, block);
          changed.push([key, block]);
        }
        if (block.kind === "data" && block.source?.sha256 !== undefined) {
          const url = sourceUrl(block.source.sha256, block.source.file);
          if (url !== undefined) sources[block.source.sha256] = url;
        }
      }
      for (const key of given.keys()) if (!present.has(key)) given.delete(key);
      worker.postMessage({ type: "page", version: ++version, title, bodies, ownBodies, order: blocks.map((b) => b.key), changed, sources });
    },
    stopSimulation(handle, isStopped) {
      worker.postMessage({ type: "simulation", block: handle, isStopped });
    },
    async trace(request) {
      const answer = await ask((id) => ({ type: "trace", id, request }));
      return answer.type === "trace" ? answer.node : null;
    },
    async nearest(request) {
      const answer = await ask((id) => ({ type: "nearest", id, request }));
      return answer.type === "nearest" ? answer.nearest : null;
    },
    async propose(bytes, fileName) {
      const answer = await ask((id) => ({ type: "propose", id, bytes, fileName }));
      if (answer.type !== "proposal") throw new Error("The engine gave another answer than the proposal it was asked for.");
      return answer.proposal;
    },
    async preview(bytes, fileName, columns) {
      const answer = await ask((id) => ({ type: "preview", id, bytes, fileName, columns }));
      if (answer.type !== "preview") throw new Error("The engine gave another answer than the preview it was asked for.");
      return answer.preview;
    },
    giveSource(sha256, bytes) {
      worker.postMessage({ type: "source", sha256, bytes });
    },
    stop() {
      for (const request of waiting.values()) request.reject(new Error("The page was closed."));
      waiting.clear();
      worker.terminate();
    },
  };
}
