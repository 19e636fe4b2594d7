import { describe, expect, it } from "vitest";
import { createEngineClient, type WorkerLike } from "@/app/_page/engineClient";
import type { FromWorker, ToWorker } from "@/app/_page/engineProtocol";
import type { SimulationProgress } from "@/app/_page/simulationQueue";
import { createWorkerEngine } from "@/app/_page/workerEngine";
import { createEngine, resultsJson, type Block, type FormulaResult, type PageResults } from "@/cells";

const rows = Array.from({ length: 40 }, (_, i) => ({ id: `r${i}`, cells: { Mg: String(20 + i / 10), "1s Mg": "1", Si: "10", "1s Si": "0.2" } }));
const table: Block = {
  id: "ch",
  kind: "data",
  typed: rows,
  columns: ["Mg", "Si"].flatMap((name) => [
    { name, role: "quantity" as const, species: name, unit: "wt%" },
    { name: `1s ${name}`, role: "uncertainty" as const, of: name, as: "1 sigma" as const },
  ]),
};
const formula = (text: string, seed = 1): Block => ({ id: "r", kind: "formula", data: "ch", text, simulate: { draws: 5000, seed } });

/** A page and its worker, joined as by messages, with the real engine; tasks of the worker run one at a time. */
function channel() {
  const due: (() => void)[] = [];
  const log: string[] = [];
  const progress: ReadonlyMap<string, SimulationProgress>[] = [];
  let results: PageResults | undefined;
  const like: WorkerLike = {
    onmessage: null,
    onerror: null,
    terminate: () => undefined,
    postMessage: (message: ToWorker) => worker.receive(structuredClone(message)),
  };
  const worker = createWorkerEngine({
    createEngine,
    fetchBytes: () => Promise.reject(new Error("nothing there")),
    later: (run) => due.push(run),
    post: (message, transfer) => like.onmessage?.({ data: structuredClone(message, { transfer }) } as MessageEvent<FromWorker>),
  });
  const client = createEngineClient(like, () => undefined, {
    onResults: (now) => {
      results = now;
      log.push(line() === undefined ? "no line" : line()?.simulated === undefined ? "first order" : "simulated");
    },
    onSimulating: (now) => {
      progress.push(now);
      log.push(now.size === 0 ? "done" : "progress");
    },
    onFault: (text) => log.push(text),
  });
  const line = () => (results?.blocks.get("r") as FormulaResult | undefined)?.lines[0];
  const update = (...blocks: Block[]): void =>
    client.update({ title: "t", bodies: {}, ownBodies: {}, blocks: blocks.map((block, i) => ({ key: block.id, order: String(i), block })) });
  const step = (): boolean => {
    const run = due.shift();
    run?.();
    return run !== undefined;
  };
  const settle = (): void => {
    while (step());
  };
  return { client, update, step, settle, log, progress, line, now: () => results };
}

describe("simulation in the worker", () => {
  it("gives first order first, then progress, then the quantiles", () => {
    const { update, step, settle, log, line } = channel();
    update(table, formula("x = Mg / Si"));
    step();
    expect(log).toEqual(["first order", "progress"]);
    settle();
    expect(log[log.length - 1]).toBe("done");
    expect(log.filter((entry) => entry === "first order")).toHaveLength(1);
    expect(line()?.simulated?.median).toHaveLength(40);
  });

  it("comes to what the engine comes to in one go", () => {
    const { update, settle, now } = channel();
    update(table, formula("x = Mg / Si"));
    settle();
    const whole = createEngine().evaluate({ format: "cotectic-page/1", title: "t", bodies: {}, blocks: [table, formula("x = Mg / Si")] });
    const results = now();
    expect(results === undefined ? null : JSON.stringify(resultsJson(results))).toBe(JSON.stringify(resultsJson(whole)));
  });

  it("lets a newer edit go first, and gives up what it supersedes", () => {
    const { update, step, settle, log, line } = channel();
    update(table, formula("x = Mg / Si"));
    step();
    step();
    update(table, formula("x = Si / Mg"));
    step();
    step();
    // The slice that was due, then the edit: results of first order again, before the old simulation is done.
    expect(log.filter((entry) => entry === "first order")).toHaveLength(2);
    settle();
    expect(line()?.simulated?.median[0]).toBeCloseTo(0.5, 2);
  });

  it("goes on with a simulation that an edit elsewhere does not concern", () => {
    const { update, step, settle, progress } = channel();
    update(table, formula("x = Mg / Si"));
    step();
    step();
    step();
    const before = progress[progress.length - 1]?.get("r")?.done ?? 0;
    update(table, formula("x = Mg / Si"), { id: "n", kind: "note", text: "a" });
    step();
    step();
    expect(progress[progress.length - 1]?.get("r")?.done ?? 0).toBeGreaterThanOrEqual(before);
    settle();
    expect(progress[progress.length - 1]?.size).toBe(0);
  });

  it("stops when told to, says so, keeps the wish, and goes on when told to", () => {
    const { client, update, step, settle, line, progress } = channel();
    update(table, formula("x = Mg / Si"));
    step();
    step();
    client.stopSimulation("r", true);
    settle();
    expect(progress[progress.length - 1]?.get("r")).toMatchObject({ isStopped: true, total: 200_000 });
    expect(line()?.simulated).toBeUndefined();
    expect(line()?.value[0]).toBe(2);
    client.stopSimulation("r", false);
    settle();
    expect(line()?.simulated?.draws).toBe(5000);
    expect(progress[progress.length - 1]?.size).toBe(0);
  });

  it("begins anew with another seed, without calculating first order again", () => {
    const { update, settle, line } = channel();
    update(table, formula("x = Mg / Si"));
    settle();
    const first = line()?.simulated?.median[0];
    update(table, formula("x = Mg / Si", 2));
    settle();
    expect(line()?.simulated?.seed).toBe(2);
    expect(line()?.simulated?.median[0]).not.toBe(first);
  });
});
