import "server-only";
import { fileOf, filesOf, type Snapshot } from "@/db/queries/snapshots";
import { database } from "../database";
import { canonicalJson } from "./canonicalJson";
import { zip } from "./zip";

/** `snapshot.json`: what stands outside the hash, with the hash of the snapshot before. People are opaque ids. */
export function snapshotJson(snapshot: Snapshot): Uint8Array {
  const { id, pageId, number, title, hash, previousHash, format, engine, frozenBy, frozenAt, note, about } = snapshot;
  return canonicalJson({ format, id, page: pageId, number, title, hash, previousHash, engine, frozenBy, frozenAt: frozenAt.toISOString(), note, about });
}

/** The bundle: the same snapshot gives the same bytes each time. */
export async function bundle(snapshot: Snapshot): Promise<Uint8Array> {
  const files: { path: string; bytes: Uint8Array }[] = [{ path: "snapshot.json", bytes: snapshotJson(snapshot) }];
  for (const { path } of await filesOf(database(), snapshot.id)) {
    const file = await fileOf(database(), snapshot.id, path);
    if (!file) throw new Error(`${path} of snapshot ${snapshot.id} is missing`);
    files.push(file);
  }
  files.sort((a, b) => (a.path < b.path ? -1 : 1));
  return zip(files, bundleName(snapshot));
}

/** Name of the bundle's folder and, with `.zip`, its file. */
export function bundleName({ number, hash }: Pick<Snapshot, "number" | "hash">): string {
  return `snapshot-${number}-${hash.slice(0, 12)}`;
}
