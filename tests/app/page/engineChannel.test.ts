import { describe, expect, it } from "vitest";
import { createEngineClient, type EngineClient, type WorkerLike } from "@/app/_page/engineClient";
import { createWorkerEngine } from "@/app/_page/workerEngine";
import type { FromWorker, ToWorker } from "@/app/_page/engineProtocol";
import { CellError, type Block, type OwnBody, type BlockResult, type Engine, type PageResults } from "@/cells";
import type { PageBlock } from "@/realtime/document";
import { exampleTable } from "./table";

/** An engine that counts what it is asked and gives a block the same result until the block changes. */
function countingEngine() {
  const sources = new Set<string>();
  const known = new Map<Block, BlockResult>();
  const evaluated: string[][] = [];
  const result = (block: Block): BlockResult => {
    if (block.kind === "data") {
      const isThere = block.source?.sha256 === undefined || sources.has(block.source.sha256);
      return {
        kind: "data",
        problems: isThere ? [] : [{ code: "no-source", severity: "error", text: "The source is not here." }],
        bodiesUsed: {},
        samples: 4,
        setAside: 1,
        valuesSetAside: 0,
        amended: 0,
        columns: [],
        screening: [],
        proposed: false,
        ...(isThere ? { table: exampleTable() } : {}),
      };
    }
    return { kind: "note", problems: [], bodiesUsed: {}, values: [] };
  };
  const engine: Engine = {
    setSource: (ref) => {
      sources.add(ref);
      known.clear();
    },
    hasSource: (ref) => sources.has(ref),
    evaluate(page): PageResults {
      evaluated.push(page.blocks.map((b) => b.id));
      const blocks = new Map<string, BlockResult>();
      for (const block of page.blocks) {
        let one = known.get(block);
        if (one === undefined) known.set(block, (one = result(block)));
        blocks.set(block.id, one);
      }
      const readsFrom = new Map(page.blocks.map((b) => [b.id, b.kind === "formula" && b.data !== undefined ? [b.data] : []]));
      return { engine: "test", bodies: {}, blocks, readsFrom };
    },
    nearest: () => null,
    trace: ({ name }) => ({ kind: "result", label: name, value: 1, sigma: null, unit: "1", share: null, notes: [], from: [] }),
    propose(_, fileName) {
      if (fileName === "bad") throw new CellError("no-table", "This file is no table.");
      return {
        fileName,
        headers: ["Sample"],
        rows: [["TH-1"], ["TH-2"]],
        columns: [{ column: { header: "Sample", role: "sample" }, reason: "the header says so" }],
        problems: [],
      };
    },
  };
  return { engine, evaluated };
}

function channel(fetchBytes: (url: string) => Promise<Uint8Array> = () => Promise.reject(new Error("nothing there"))) {
  const { engine, evaluated } = countingEngine();
  const due: (() => void)[] = [];
  const sent: FromWorker[] = [];
  const like: WorkerLike = {
    onmessage: null,
    onerror: null,
    terminate: () => undefined,
    postMessage: (message: ToWorker) => worker.receive(structuredClone(message)),
  };
  const worker = createWorkerEngine({
    createEngine: () => engine,
    fetchBytes,
    later: (run) => due.push(run),
    post: (message, transfer) => {
      const arrived = structuredClone(message, { transfer });
      sent.push(arrived);
      like.onmessage?.({ data: arrived } as MessageEvent<FromWorker>);
    },
  });
  const seen: { results: PageResults; loading: ReadonlySet<string>; upToDate: boolean }[] = [];
  const client: EngineClient = createEngineClient(like, (sha256) => `/sources/${sha256}`, {
    onResults: (results, loading, upToDate) => seen.push({ results, loading, upToDate }),
    onFault: () => undefined,
  });
  const settle = () => {
    for (let run = due.shift(); run !== undefined; run = due.shift()) run();
  };
  return { client, seen, sent, settle, evaluated };
}

const on = (...blocks: Block[]): { title: string; bodies: Record<string, string>; ownBodies: Record<string, OwnBody>; blocks: PageBlock[] } => ({
  title: "t",
  bodies: {},
  ownBodies: {},
  blocks: blocks.map((block, i) => ({ key: block.id, order: String(i), block })),
});
const note: Block = { id: "n", kind: "note", text: "a" };
const typed: Block = { id: "d", kind: "data", typed: [] };

describe("page and engine", () => {
  it("calculates the newest page only", () => {
    const { client, seen, settle, evaluated } = channel();
    client.update(on(note));
    client.update(on(note, typed));
    settle();
    expect(evaluated).toEqual([["n", "d"]]);
    expect(seen).toHaveLength(1);
    expect(seen[0]?.upToDate).toBe(true);
  });

  it("sends only blocks that changed, and keeps results that did not", () => {
    const { client, seen, sent, settle } = channel();
    client.update(on(note, typed));
    settle();
    client.update(on({ ...note, text: "b" }, typed));
    settle();
    const last = sent[sent.length - 1];
    expect(last?.type === "results" ? last.changed.map(([handle]) => handle) : []).toEqual(["n"]);
    expect(seen[1]?.results.blocks.get("d")).toBe(seen[0]?.results.blocks.get("d"));
    expect(seen[1]?.results.blocks.get("n")).not.toBe(seen[0]?.results.blocks.get("n"));
    const data = seen[1]?.results.blocks.get("d");
    expect(data?.kind === "data" ? data.table?.samples : []).toEqual(exampleTable().samples);
  });

  it("forgets blocks that are gone", () => {
    const { client, seen, settle } = channel();
    client.update(on(note, typed));
    settle();
    client.update(on(typed));
    settle();
    expect([...(seen[1]?.results.blocks.keys() ?? [])]).toEqual(["d"]);
    client.update(on(typed, note));
    settle();
    expect([...(seen[2]?.results.blocks.keys() ?? [])]).toEqual(["d", "n"]);
  });

  it("says which blocks wait for a source, and calculates them when it is there", async () => {
    const sha256 = "a".repeat(64);
    const table: Block = { id: "d", kind: "data", source: { file: "x.csv", sha256 } };
    const formula: Block = { id: "f", kind: "formula", data: "d", text: "" };
    const { client, seen, settle } = channel(() => Promise.resolve(new Uint8Array([1])));
    client.update(on(table, formula, note));
    settle();
    expect([...(seen[0]?.loading ?? [])].sort()).toEqual(["d", "f"]);
    expect([...(seen[0]?.results.blocks.keys() ?? [])]).toEqual(["n"]);
    await new Promise((resolve) => setTimeout(resolve, 0));
    settle();
    expect(seen[1]?.loading.size).toBe(0);
    expect([...(seen[1]?.results.blocks.keys() ?? [])]).toEqual(["d", "f", "n"]);
  });

  it("lets a block say itself that its source cannot be had", async () => {
    const { client, seen, settle } = channel();
    client.update(on({ id: "d", kind: "data", source: { file: "x.csv", sha256: "b".repeat(64) } }));
    settle();
    await new Promise((resolve) => setTimeout(resolve, 0));
    settle();
    expect(seen[1]?.results.blocks.get("d")?.problems[0]?.text).toBe("The source is not here.");
  });

  it("answers questions, and refuses in words", async () => {
    const { client, settle } = channel();
    client.update(on(note));
    settle();
    expect((await client.trace({ block: "n", name: "mg_si" }))?.label).toBe("mg_si");
    const proposal = await client.propose(new Uint8Array(), "x.csv");
    expect(proposal.rows).toBe(2);
    expect(proposal.samples).toEqual([["TH-1", "TH-2"]]);
    await expect(client.propose(new Uint8Array(), "bad")).rejects.toThrow("This file is no table.");
  });
});
