import { createHash } from "node:crypto";
import type { PageDocument, PageResults } from "@/cells";
import { canonicalJson } from "./canonicalJson";
import { resultFiles, type NewFile } from "./resultFiles";

export const SNAPSHOT_FORMAT = "cotectic-snapshot/1";

export interface HashedFile extends NewFile {
  readonly sha256: string;
}

/** What a snapshot is made from. Everything in it is content; who froze it, when and under which number stand elsewhere. */
export interface SnapshotContent {
  readonly page: PageDocument;
  /** Bytes of each source the page uses, as uploaded. */
  readonly sources: readonly { readonly sha256: string; readonly name: string; readonly bytes: Uint8Array }[];
  readonly results: PageResults;
  /** The reference tables the engine calculates with. */
  readonly bodies: Uint8Array;
  readonly atomicWeights: Uint8Array;
}

export interface FrozenContent {
  /** SHA-256 of the manifest: the hash of the snapshot. */
  readonly hash: string;
  /** In path order, the manifest among them. */
  readonly files: readonly HashedFile[];
}

/** Freezes content into files and a manifest. The same content gives the same hash, whoever freezes it and whenever. */
export function snapshotFiles(content: SnapshotContent): FrozenContent {
  const files: NewFile[] = [
    { path: "page.json", bytes: canonicalJson(content.page) },
    ...content.sources.map(({ sha256, name, bytes }) => ({ path: `sources/${sha256}${extension(name)}`, bytes })),
    ...resultFiles(content.results),
    { path: "bodies.csv", bytes: content.bodies },
    { path: "atomic-weights.csv", bytes: content.atomicWeights },
  ];
  const hashed = files.map((file) => ({ ...file, sha256: sha256(file.bytes) })).sort(byPath);
  const manifest = canonicalJson({
    format: SNAPSHOT_FORMAT,
    engine: content.results.engine,
    files: hashed.map(({ path, bytes, sha256: hash }) => ({ path, bytes: bytes.length, sha256: hash })),
  });
  const hash = sha256(manifest);
  return { hash, files: [...hashed, { path: "manifest.json", bytes: manifest, sha256: hash }].sort(byPath) };
}

/** Extension of a source's file in a bundle, from the name it was uploaded under. */
export function extension(name: string): string {
  return /\.(csv|tsv|txt|xlsx)$/i.exec(name)?.[0].toLowerCase() ?? ".txt";
}

export function sha256(bytes: Uint8Array): string {
  return createHash("sha256").update(bytes).digest("hex");
}

const byPath = (a: { path: string }, b: { path: string }) => (a.path < b.path ? -1 : a.path > b.path ? 1 : 0);
