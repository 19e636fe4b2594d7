import { zipSync, type Zippable } from "fflate";

/** The earliest moment a zip can write, in local parts: every file gets it, so that equal files give an equal zip. */
const epoch = new Date(1980, 0, 1, 0, 0, 0);

/**
 * A zip with fixed order and times: the same files give the same bytes.
 *
 * @param files in path order
 * @param folder name of the one folder everything unpacks into
 */
export function zip(files: readonly { readonly path: string; readonly bytes: Uint8Array }[], folder: string): Uint8Array {
  const tree: Zippable = {};
  for (const { path, bytes } of files) tree[`${folder}/${path}`] = [bytes, { mtime: epoch, level: 6, os: 3, attrs: 0o644 << 16 }];
  return zipSync(tree);
}
