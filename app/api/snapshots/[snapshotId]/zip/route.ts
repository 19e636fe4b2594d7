import { allow } from "@/app/_server/authorise";
import { database } from "@/app/_server/database";
import { bytesResponse } from "@/app/_server/download";
import { bundle, bundleName } from "@/app/_server/freeze/bundle";
import { Refusal } from "@/app/_server/problem";
import { route } from "@/app/_server/route";
import { findSnapshot } from "@/db/queries/snapshots";

/** The bundle of a snapshot as a zip. */
export const GET = route<{ snapshotId: string }>(async (_request, { snapshotId }) => {
  await allow("snapshot", snapshotId, "download");
  const snapshot = await findSnapshot(database(), snapshotId);
  if (!snapshot) throw new Refusal(404, "No such snapshot", "There is no snapshot at this address.");
  return bytesResponse(await bundle(snapshot), { name: `${bundleName(snapshot)}.zip`, mediaType: "application/zip", immutable: true });
});
