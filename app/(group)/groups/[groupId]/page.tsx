import type { Metadata } from "next";
import Link from "next/link";
import { newPage } from "@/app/_server/actions/pages";
import { database } from "@/app/_server/database";
import { allowOnScreen } from "@/app/_server/screen";
import { ActionForm } from "@/app/_site/ActionForm";
import { Section } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { may } from "@/db/access";
import { findGroup, membersOf, noteSeen } from "@/db/queries/groups";
import { pagesOf } from "@/db/queries/pages";
import { snapshotsOf } from "@/db/queries/snapshots";
import { sourcesOf } from "@/db/queries/sources";
import { ArchivedPages } from "./_panel/ArchivedPages";
import { CorrelationPanel } from "./_panel/CorrelationPanel";
import { PeopleList, SourceList } from "./_panel/SidePanel";
import { SnapshotList } from "./_panel/SnapshotList";

interface Props {
  readonly params: Promise<{ groupId: string }>;
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { groupId } = await params;
  await allowOnScreen("group", groupId, "see", `/groups/${groupId}`);
  return { title: (await findGroup(database(), groupId))?.name ?? "Group" };
}

/** A group's home: its pages as a correlation panel, its snapshots, people and sources. */
export default async function GroupPage({ params }: Props) {
  const { groupId } = await params;
  const { subject, object, userId } = await allowOnScreen("group", groupId, "see", `/groups/${groupId}`);
  const db = database();
  if (userId) await noteSeen(db, groupId, userId);
  const [group, pages, archived, snapshots, members, sources] = await Promise.all([
    findGroup(db, groupId),
    pagesOf(db, groupId),
    pagesOf(db, groupId, true),
    snapshotsOf(db, groupId),
    membersOf(db, groupId),
    sourcesOf(db, groupId),
  ]);
  const edits = may(subject, "create page", object);
  return (
    <>
      <SiteHeader>
        <Link href={`/groups/${groupId}/people`}>People</Link>
        <Link href={`/groups/${groupId}/bodies`}>Bodies</Link>
        <Link href="/start">Groups</Link>
        <Link href="/account">Account</Link>
      </SiteHeader>
      <main className="px-12 pt-10 pb-16 narrow:px-4 narrow:pt-6">
        <h1 className="font-serif text-title font-medium tracking-tight phone:text-title-phone">{group?.name}</h1>
        <p className="mt-2 text-second">{inWords(pages.length, members.length, snapshots.length)}</p>
        {group?.demo ? (
          <p className="mt-1 text-second">
            This group, its people, its finds and their analyses are invented, to show what a page can do. Published bodies are real and say where they are
            from.
          </p>
        ) : null}
        <div className="mt-10 grid grid-cols-[minmax(0,1fr)_280px] gap-x-8 gap-y-10 narrow:grid-cols-[minmax(0,1fr)]">
          <div className="grid min-w-0 grid-cols-[minmax(0,1fr)] content-start gap-10">
            <Section
              id="pages"
              title="Pages"
              beside={
                edits ? (
                  <ActionForm action={newPage} submit="New page" label="New page">
                    <input type="hidden" name="groupId" value={groupId} />
                  </ActionForm>
                ) : (
                  "neighbours share sources"
                )
              }
            >
              {pages.length === 0 ? (
                <p className="pt-4 text-second">{edits ? "No page yet. Make one with New page." : "No page yet. A lead or an analyst makes the first."}</p>
              ) : (
                <CorrelationPanel pages={pages} sources={sources} edits={edits} />
              )}
              <ArchivedPages pages={archived} edits={edits} />
            </Section>
            <Section id="snapshots" title="Snapshots" beside={snapshots.length === 0 ? null : `${snapshots.length} frozen`}>
              {snapshots.length === 0 ? (
                <p className="text-second">Nothing frozen yet. A lead freezes a page with Freeze, on the page.</p>
              ) : (
                <SnapshotList snapshots={snapshots} />
              )}
            </Section>
          </div>
          <div className="grid content-start gap-8">
            <PeopleList members={members} me={userId} groupId={groupId} />
            <SourceList sources={sources} pages={pages} />
          </div>
        </div>
      </main>
    </>
  );
}

function inWords(pages: number, people: number, snapshots: number): string {
  const some = (n: number, one: string, many: string) => (n === 0 ? `no ${many} yet` : n === 1 ? `1 ${one}` : `${n} ${many}`);
  return [some(pages, "page", "pages"), some(people, "person", "people"), some(snapshots, "snapshot", "snapshots")].join(", ");
}
