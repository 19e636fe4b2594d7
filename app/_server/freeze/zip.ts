import { zipSync, type Zippable } from "fflate";

/**
 * A zip with fixed order and times: the same files give the same bytes.
 *
 * @param files in path order
 * @param folder name of the one folder everything unpacks into
 */
export function zip(files: readonly { readonly path: string; readonly bytes: Uint8Array }[], folder: string): Uint8Array {
  // A zip writes the parts of a local time: these are the same parts everywhere.
  const mtime = new Date(1980, 0, 1, 12, 0, 0);
  const tree: Zippable = {};
  for (const { path, bytes } of files) tree[`${folder}/${path}`] = [bytes, { mtime, level: 6, os: 3, attrs: 0o644 << 16 }];
  return zipSync(tree);
}
