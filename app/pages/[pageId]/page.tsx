import type { Metadata } from "next";
import { LivePage } from "@/app/_page/LivePage";
import { database } from "@/app/_server/database";
import { loadPage } from "@/app/_server/documents";
import { realtimeAddressOnPage } from "@/app/_server/realtimeAddress";
import { allowOnScreen } from "@/app/_server/screen";
import { currentUser } from "@/app/_server/session";
import { findGroup, membersOf, noteSeen } from "@/db/queries/groups";
import { findPage } from "@/db/queries/pages";
import { lastSnapshotOf } from "@/db/queries/snapshots";
import { CLIENT_VERSION } from "@/realtime/protocol";

interface Props {
  readonly params: Promise<{ pageId: string }>;
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { pageId } = await params;
  await allowOnScreen("page", pageId, "read", `/pages/${pageId}`);
  return { title: (await findPage(database(), pageId))?.title || "Untitled page" };
}

/** A live page. Who may read it and in which role is settled here; the socket asks again for itself. */
export default async function PagePage({ params }: Props) {
  const { pageId } = await params;
  const { subject, object, userId } = await allowOnScreen("page", pageId, "read", `/pages/${pageId}`);
  const db = database();
  const [page, group, user, last, { page: document }, members] = await Promise.all([
    findPage(db, pageId),
    findGroup(db, object.groupId),
    currentUser(),
    lastSnapshotOf(db, pageId),
    loadPage(pageId),
    subject.role === "guest" ? [] : membersOf(db, object.groupId),
    userId ? noteSeen(db, object.groupId, userId) : null,
  ]);
  return (
    <LivePage
      page={{ id: pageId, groupId: object.groupId, groupName: group?.name ?? "", epoch: page?.epoch ?? 1, title: document.title }}
      me={userId && user ? { id: userId, name: user.name } : null}
      role={object.archived && subject.role !== "guest" ? "reader" : subject.role}
      realtimeUrl={realtimeAddressOnPage()}
      version={String(CLIENT_VERSION)}
      initialDocument={document}
      lastSnapshot={last ? { id: last.id, number: last.number, hash: last.hash, frozenAt: last.frozenAt.toISOString() } : null}
      people={Object.fromEntries(members.map((member) => [member.userId, member.name]))}
      guestUntil={subject.role === "guest" ? subject.until.toISOString() : null}
    />
  );
}
