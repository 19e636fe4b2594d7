import type { Metadata } from "next";
import Link from "next/link";
import { database } from "@/app/_server/database";
import { allowOnScreen } from "@/app/_server/screen";
import { Section } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { listBodies } from "@/cells";
import { may } from "@/db/access";
import { bodiesOfGroup } from "@/db/queries/bodies";
import { findGroup } from "@/db/queries/groups";
import { AddBody } from "./AddBody";
import { BuiltInBody, OwnBodyEntry } from "./BodyEntry";

export const metadata: Metadata = { title: "Bodies" };

interface Props {
  readonly params: Promise<{ groupId: string }>;
  readonly searchParams: Promise<{ edit?: string | string[] }>;
}

/** The reference compositions that pages of a group can use: its own, and those that come with the product. */
export default async function BodiesPage({ params, searchParams }: Props) {
  const { groupId } = await params;
  const { subject, object } = await allowOnScreen("group", groupId, "see", `/groups/${groupId}/bodies`);
  const [group, own, { edit }] = await Promise.all([findGroup(database(), groupId), bodiesOfGroup(database(), groupId), searchParams]);
  const edits = may(subject, "add body", object);
  const codes = [...new Set(own.map(({ code }) => code))];
  const corrected = edits ? own.find(({ code }) => code === edit) : undefined;
  const builtIn = listBodies().filter(({ kind }) => kind !== "phase");
  const phases = listBodies().filter(({ kind }) => kind === "phase");
  return (
    <>
      <SiteHeader home={`/groups/${groupId}`} title={group?.name}>
        <Link href={`/groups/${groupId}`}>Pages</Link>
        <Link href={`/groups/${groupId}/people`}>People</Link>
        <Link href="/account">Account</Link>
      </SiteHeader>
      <main className="mx-auto grid max-w-[760px] grid-cols-[minmax(0,1fr)] gap-10 px-4 pt-12 pb-16">
        <div>
          <h1 className="font-serif text-title-phone font-medium">Bodies of {group?.name}</h1>
          <p className="mt-3 text-second">
            A body is a reference composition: CI chondrite, bulk silicate Earth, the Sun. A page chooses which ones its names mean, and every result says which
            it used. A page keeps a copy of each of the group’s own, so that a new version here moves no number there.
          </p>
        </div>
        <Section id="own" title="The group’s own" beside={codes.length === 0 ? null : `${codes.length} ${codes.length === 1 ? "body" : "bodies"}`}>
          {codes.length === 0 ? (
            <p className="text-second">{edits ? "None yet. Add one below." : "None yet. A lead or an analyst adds the first."}</p>
          ) : (
            <ul>
              {codes.map((code) => (
                <OwnBodyEntry key={code} versions={own.filter((version) => version.code === code)} groupId={groupId} edits={edits} />
              ))}
            </ul>
          )}
        </Section>
        {edits ? (
          <Section
            id="add"
            title={corrected ? `A new version of ${corrected.code}` : "Add a body"}
            beside={corrected ? <Link href={`/groups/${groupId}/bodies`}>a new body instead</Link> : null}
          >
            <AddBody
              key={corrected ? `${corrected.code} ${corrected.version}` : `new ${own.length}`}
              groupId={groupId}
              corrected={corrected ? { code: corrected.code, version: corrected.version, body: corrected.body } : null}
            />
          </Section>
        ) : null}
        <Section id="built-in" title="Built in" beside={`${builtIn.length} compilations`}>
          <ul>
            {builtIn.map((body) => (
              <BuiltInBody key={body.id} body={body} />
            ))}
          </ul>
          <p className="mt-3 text-second">
            And {phases.length} minerals by their formulas, exact: {phases.map(({ id }) => id).join(", ")}.
          </p>
        </Section>
      </main>
    </>
  );
}
