import type { SnapshotFile } from "./props";

/** Where a live page's sources are. */
export function liveSourceUrl(pageId: string): (sha256: string) => string {
  return (sha256) => `/api/pages/${pageId}/sources/${sha256}`;
}

/** Where a snapshot's sources are: among its files, by hash, whatever their ending. */
export function frozenSourceUrl(snapshotId: string, files: readonly SnapshotFile[]): (sha256: string) => string | undefined {
  const paths = new Map(
    files.flatMap(({ path }): [string, string][] => {
      const sha256 = /^sources\/([0-9a-f]{64})\b/.exec(path)?.[1];
      return sha256 === undefined ? [] : [[sha256, path]];
    }),
  );
  return (sha256) => {
    const path = paths.get(sha256);
    return path === undefined ? undefined : `/api/snapshots/${snapshotId}/files/${path}`;
  };
}
