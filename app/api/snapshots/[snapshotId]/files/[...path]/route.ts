import { allow } from "@/app/_server/authorise";
import { database } from "@/app/_server/database";
import { bytesResponse } from "@/app/_server/download";
import { snapshotJson } from "@/app/_server/freeze/bundle";
import { Refusal } from "@/app/_server/problem";
import { route } from "@/app/_server/route";
import { fileOf, findSnapshot } from "@/db/queries/snapshots";

/** One file of a snapshot, by its path in the bundle. */
export const GET = route<{ snapshotId: string; path: string[] }>(async (_request, { snapshotId, path }) => {
  await allow("snapshot", snapshotId, "read");
  const wanted = path.join("/");
  const bytes = wanted === "snapshot.json" ? await about(snapshotId) : (await fileOf(database(), snapshotId, wanted))?.bytes;
  if (!bytes) throw new Refusal(404, "No such file", `This snapshot has no file ${wanted}. manifest.json lists the files it has.`);
  return bytesResponse(bytes, { name: path.at(-1) ?? "file", mediaType: mediaType(wanted), immutable: true });
});

async function about(snapshotId: string): Promise<Uint8Array | undefined> {
  const snapshot = await findSnapshot(database(), snapshotId);
  return snapshot ? snapshotJson(snapshot) : undefined;
}

function mediaType(path: string): string {
  if (path.endsWith(".json")) return "application/json";
  if (path.endsWith(".csv")) return "text/csv; charset=utf-8";
  return "application/octet-stream";
}
