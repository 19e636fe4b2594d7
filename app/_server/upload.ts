import "server-only";
import { createHash } from "node:crypto";
import { addSource } from "@/db/queries/sources";
import { calculate } from "./calculation/calculate";
import { database } from "./database";
import { Refusal } from "./problem";

const MIB = 1024 * 1024;
/** Largest file. */
export const MOST_BYTES = 50 * MIB;
/** All sources of a group together. */
export const GROUP_QUOTA = 2048 * MIB;
const DEADLINE = 30_000;

export interface Kept {
  readonly sha256: string;
  readonly name: string;
  readonly size: number;
  readonly rows: number;
}

/** Keeps an uploaded table byte for byte, once it is seen to be one. @throws Refusal with what is wrong with the file */
export async function keepUpload(request: Request, groupId: string, by: string | null): Promise<Kept> {
  const name = fileName(request.headers.get("x-file-name"));
  const bytes = await readBody(request, name);
  if (bytes.length === 0) throw new Refusal(422, "Empty file", `${name} is empty. Choose the file again, or export it again from where it came.`);
  const { rows } = await calculate<"read">({ kind: "read", fileName: name, bytes }, DEADLINE);
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const over = await addSource(database(), { groupId, sha256, name, mediaType: mediaType(name), bytes, rows, by }, GROUP_QUOTA);
  if (over !== null)
    throw new Refusal(413, "The group is full", `With ${name} the sources of this group would take ${inMiB(over)}; a group has ${inMiB(GROUP_QUOTA)}.`);
  return { sha256, name, size: bytes.length, rows };
}

function fileName(header: string | null): string {
  let name: string;
  try {
    name = decodeURIComponent(header ?? "");
  } catch {
    throw new Refusal(400, "No file name", "The header x-file-name is not URI-encoded.");
  }
  // A path that some browsers send along says nothing here.
  name = (name.split(/[\\/]/).at(-1) ?? "").replaceAll(/\p{Cc}/gu, "").trim();
  if (name === "" || name.length > 255)
    throw new Refusal(400, "No file name", "The upload must say the file's name, of at most 255 characters, in the header x-file-name.");
  return name;
}

/** Reads the body and stops as soon as it is too long, whatever its header said. */
async function readBody(request: Request, name: string): Promise<Uint8Array> {
  const tooLong = () =>
    new Refusal(
      413,
      "The file is too big",
      `${name} is larger than ${inMiB(MOST_BYTES)}, the most a table may have. Part it into several files and stack them on the page.`,
    );
  if (Number(request.headers.get("content-length") ?? 0) > MOST_BYTES) throw tooLong();
  const chunks: Uint8Array[] = [];
  let size = 0;
  const reader = request.body?.getReader();
  for (;;) {
    const { done, value } = (await reader?.read()) ?? { done: true as const, value: undefined };
    if (done) break;
    size += value.length;
    if (size > MOST_BYTES) {
      await reader?.cancel();
      throw tooLong();
    }
    chunks.push(value);
  }
  const bytes = new Uint8Array(size);
  let at = 0;
  for (const chunk of chunks) {
    bytes.set(chunk, at);
    at += chunk.length;
  }
  return bytes;
}

function mediaType(name: string): string {
  if (/\.tsv$/i.test(name)) return "text/tab-separated-values";
  if (/\.xlsx$/i.test(name)) return "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet";
  return /\.csv$/i.test(name) ? "text/csv" : "text/plain";
}

function inMiB(bytes: number): string {
  return `${Math.ceil(bytes / MIB)} MiB`;
}
