import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { pageSchema } from "@/cells";
import { FrozenPage } from "@/app/_page/FrozenPage";
import { database } from "@/app/_server/database";
import { allowOnScreen } from "@/app/_server/screen";
import { currentUser } from "@/app/_server/session";
import { findGroup } from "@/db/queries/groups";
import { fileOf, filesOf, findSnapshot, lastSnapshotOf } from "@/db/queries/snapshots";

interface Props {
  readonly params: Promise<{ snapshotId: string }>;
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { snapshotId } = await params;
  await allowOnScreen("snapshot", snapshotId, "read", `/snapshots/${snapshotId}`);
  const snapshot = await findSnapshot(database(), snapshotId);
  return { title: snapshot ? `Snapshot ${snapshot.number}, ${snapshot.title}` : "Snapshot", robots: { index: false } };
}

/** A frozen page, as its files say it. */
export default async function SnapshotPage({ params }: Props) {
  const { snapshotId } = await params;
  const { subject, object, userId } = await allowOnScreen("snapshot", snapshotId, "read", `/snapshots/${snapshotId}`);
  const db = database();
  const [snapshot, page, files, group, user] = await Promise.all([
    findSnapshot(db, snapshotId),
    fileOf(db, snapshotId, "page.json"),
    filesOf(db, snapshotId),
    findGroup(db, object.groupId),
    currentUser(),
  ]);
  if (!snapshot || !page) notFound();
  const previous = await lastSnapshotOf(db, snapshot.pageId, snapshot.number);
  return (
    <FrozenPage
      snapshot={{
        id: snapshot.id,
        pageId: snapshot.pageId,
        number: snapshot.number,
        title: snapshot.title,
        hash: snapshot.hash,
        previous: previous ? { number: previous.number, hash: previous.hash, frozenAt: previous.frozenAt.toISOString() } : null,
        frozenAt: snapshot.frozenAt.toISOString(),
        engine: snapshot.engine,
        note: snapshot.note,
      }}
      groupName={group?.name ?? ""}
      groupId={object.groupId}
      role={subject.role}
      me={userId && user ? { id: userId, name: user.name } : null}
      document={pageSchema.parse(JSON.parse(new TextDecoder().decode(page.bytes)))}
      files={files.map(({ path, size }) => ({ path, size }))}
      guestUntil={subject.role === "guest" ? subject.until.toISOString() : null}
    />
  );
}
