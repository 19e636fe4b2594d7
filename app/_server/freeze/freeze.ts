import "server-only";
import { readFile } from "node:fs/promises";
import path from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import * as Y from "yjs";
import { readPage, toPageDocument } from "@/realtime/document";
import { addSnapshot } from "@/db/queries/snapshots";
import { sourceBytes } from "@/db/queries/sources";
import type { FreezeAnswer, TaskSource } from "../calculation/tasks";
import { calculate } from "../calculation/calculate";
import { oneAtATime } from "../calculation/oneAtATime";
import { database } from "../database";
import { loadDocument } from "../documents";
import { Refusal } from "../problem";
import { SNAPSHOT_FORMAT } from "./snapshotFiles";

export interface FreezeRequest {
  readonly pageId: string;
  readonly groupId: string;
  readonly by: string;
  /** Yjs state vector of what the person saw when they froze. */
  readonly stateVector: Uint8Array;
  readonly note: string | null;
  /** A lead has seen the list of values written down from memory and takes them knowingly. */
  readonly acceptFromMemory: boolean;
}

export interface Frozen {
  readonly snapshotId: string;
  readonly number: number;
  readonly hash: string;
}

/** A server's calculation may take this long. */
const DEADLINE = 60_000;
/** Edits on their way to the database get this long to arrive, looked for this often. */
const PATIENCE = { tries: 20, pause: 150 } as const;

/**
 * Freezes a page: the first committed state that covers what the person saw, its results calculated anew, everything
 * written in one transaction.
 *
 * @throws Refusal 409 when edits have not arrived, or values from memory have not been accepted; 422 when it cannot be frozen
 */
export async function freeze(request: FreezeRequest): Promise<Frozen> {
  const doc = await coveringDocument(request.pageId, request.stateVector);
  const reading = readPage(doc);
  const page = toPageDocument(doc);
  doc.destroy();
  const unreadable = reading.problems.find((problem) => problem.severity === "error");
  if (unreadable) throw new Refusal(422, "Not ready to be frozen", unreadable.text);
  if (page.blocks.length === 0) throw new Refusal(422, "Nothing to freeze", "This page has no blocks yet. Add what the snapshot should hold, then freeze it.");
  const sources = await sourcesUsed(request.groupId, page.blocks);
  const [bodies, atomicWeights] = await Promise.all(["bodies.csv", "atomic-weights.csv"].map(referenceTable));
  if (!bodies || !atomicWeights) throw new Error("a reference table is missing");
  const frozen = await oneAtATime(request.groupId, () => calculate<"freeze">({ kind: "freeze", page, sources, bodies, atomicWeights }, DEADLINE));
  if (frozen.fromMemory.length > 0 && !request.acceptFromMemory) throw memoryRefusal(frozen);
  const { id, number } = await addSnapshot(database(), {
    pageId: request.pageId,
    groupId: request.groupId,
    title: page.title,
    hash: frozen.hash,
    format: SNAPSHOT_FORMAT,
    engine: frozen.engine,
    frozenBy: request.by,
    note: request.note,
    about: about(frozen),
    files: frozen.files,
  });
  return { snapshotId: id, number, hash: frozen.hash };
}

/** What a snapshot says about itself besides its content; outside the hash. */
export interface About {
  readonly counts: FreezeAnswer["counts"];
  readonly bodies: FreezeAnswer["bodies"];
  readonly fromMemory: FreezeAnswer["fromMemory"];
  readonly problems: { readonly errors: number; readonly warnings: number };
}

function about(frozen: FreezeAnswer): Record<string, unknown> {
  const count = (severity: string) => frozen.problems.filter((problem) => problem.severity === severity).length;
  const said: About = {
    counts: frozen.counts,
    bodies: frozen.bodies,
    fromMemory: frozen.fromMemory,
    problems: { errors: count("error"), warnings: count("warning") },
  };
  return { ...said };
}

function memoryRefusal(frozen: FreezeAnswer): Refusal {
  const n = frozen.fromMemory.length;
  return new Refusal(
    409,
    "Values from memory",
    `${n === 1 ? "One reference value this page leans on was" : `${n} reference values this page leans on were`} written down from memory and never read in a copy of the source. Look at the list and tick that you take ${n === 1 ? "it" : "them"} knowingly.`,
    { fromMemory: frozen.fromMemory },
  );
}

async function coveringDocument(pageId: string, stateVector: Uint8Array): Promise<Y.Doc> {
  let seen: Map<number, number>;
  try {
    seen = Y.decodeStateVector(stateVector);
  } catch {
    throw new Refusal(400, "No state vector", "The request does not say which state of the page it means. Reload the page and freeze it again.");
  }
  for (let n = 0; n < PATIENCE.tries; n++) {
    if (n > 0) await wait(PATIENCE.pause);
    const doc = await loadDocument(pageId);
    const committed = Y.decodeStateVector(Y.encodeStateVector(doc));
    if ([...seen].every(([client, clock]) => (committed.get(client) ?? 0) >= clock)) return doc;
    doc.destroy();
  }
  throw new Refusal(409, "Edits are still on their way", "Some of what you see has not been saved yet. Wait until the page says Saved, then freeze it.");
}

async function sourcesUsed(groupId: string, blocks: ReturnType<typeof toPageDocument>["blocks"]): Promise<TaskSource[]> {
  const used = new Map<string, string>();
  for (const block of blocks) if (block.kind === "data" && block.source?.sha256) used.set(block.source.sha256, block.source.file);
  const found: TaskSource[] = [];
  for (const [sha256, file] of used) {
    const source = await sourceBytes(database(), groupId, sha256);
    if (!source)
      throw new Refusal(
        422,
        "A source is missing",
        `The bytes of ${file} are not among the sources of this group. Upload the file again, then freeze the page.`,
      );
    found.push({ sha256, name: file, bytes: source.bytes });
  }
  return found;
}

function referenceTable(name: string): Promise<Uint8Array> {
  return readFile(path.join(/* turbopackIgnore: true */ process.cwd(), "cells", "species", "reference", name));
}
