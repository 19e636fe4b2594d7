import type { Metadata } from "next";
import Link from "next/link";
import { changeRole, invite, removePerson, renameGroup, withdrawInvitation } from "@/app/_server/actions/people";
import { database } from "@/app/_server/database";
import { allowOnScreen } from "@/app/_server/screen";
import { ActionForm } from "@/app/_site/ActionForm";
import { FormChoice, FormField } from "@/app/_site/FormField";
import { Section } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { When } from "@/app/_site/When";
import { may } from "@/db/access";
import { findGroup, membersOf, type Member } from "@/db/queries/groups";
import { openInvitations } from "@/db/queries/invitations";

export const metadata: Metadata = { title: "People" };

const roles = [
  { value: "lead", label: "lead" },
  { value: "analyst", label: "analyst" },
  { value: "reader", label: "reader" },
];

/** Who is in a group, in which role; for leads, what can be changed about it. */
export default async function PeoplePage({ params }: { readonly params: Promise<{ groupId: string }> }) {
  const { groupId } = await params;
  const { subject, object, userId } = await allowOnScreen("group", groupId, "see", `/groups/${groupId}/people`);
  const leads = may(subject, "change role", object);
  const [group, members, invitations] = await Promise.all([
    findGroup(database(), groupId),
    membersOf(database(), groupId),
    leads ? openInvitations(database(), groupId) : [],
  ]);
  return (
    <>
      <SiteHeader home={`/groups/${groupId}`} title={group?.name}>
        <Link href={`/groups/${groupId}`}>Pages</Link>
        <Link href={`/groups/${groupId}/bodies`}>Bodies</Link>
        <Link href="/account">Account</Link>
      </SiteHeader>
      <main className="mx-auto grid max-w-[760px] gap-10 px-4 pt-12 pb-16">
        <div>
          <h1 className="font-serif text-title-phone font-medium">People of {group?.name}</h1>
          <p className="mt-3 text-second">
            A lead edits, freezes snapshots, hands out reading links and looks after the people. An analyst edits every page. A reader reads every page and
            edits nothing. A change here holds at once, also on pages that are open now.
          </p>
        </div>
        <Section id="people" title="In the group" beside={`${members.length} ${members.length === 1 ? "person" : "people"}`}>
          <ul>
            {members.map((member) => (
              <Person key={member.userId} member={member} groupId={groupId} leads={leads} me={member.userId === userId} />
            ))}
          </ul>
        </Section>
        {leads ? (
          <Section id="invite" title="Invite somebody" beside="by mail, good for 14 days">
            <ActionForm action={invite} submit="Send the invitation" look="act" inline label="Invite somebody">
              <input type="hidden" name="groupId" value={groupId} />
              <FormField name="email" label="E-mail" type="email" required maxLength={254} autoComplete="off" className="w-72" />
              <FormChoice name="role" label="Role" options={roles} defaultValue="analyst" className="w-28" />
            </ActionForm>
            {invitations.length > 0 ? (
              <ul className="mt-6">
                {invitations.map((invitation) => (
                  <li key={invitation.id} className="flex flex-wrap items-baseline justify-between gap-x-4 border-b border-hairline py-1.5">
                    <span>
                      {invitation.email}{" "}
                      <span className="text-second">
                        as {invitation.role}, not accepted yet, until <When iso={invitation.expiresAt.toISOString()} as="day" />
                      </span>
                    </span>
                    <ActionForm action={withdrawInvitation} submit="Withdraw" look="danger" label={`Withdraw the invitation of ${invitation.email}`}>
                      <input type="hidden" name="groupId" value={groupId} />
                      <input type="hidden" name="invitationId" value={invitation.id} />
                    </ActionForm>
                  </li>
                ))}
              </ul>
            ) : null}
          </Section>
        ) : null}
        {leads ? (
          <Section id="group" title="The group itself">
            <ActionForm action={renameGroup} submit="Rename" look="act" inline label="Rename the group">
              <input type="hidden" name="groupId" value={groupId} />
              <FormField name="name" label="Name of the group" defaultValue={group?.name} required maxLength={120} className="w-72" />
            </ActionForm>
          </Section>
        ) : null}
      </main>
    </>
  );
}

function Person({ member, groupId, leads, me }: { readonly member: Member; readonly groupId: string; readonly leads: boolean; readonly me: boolean }) {
  const seen = member.lastSeenAt ? (
    <>
      last here <When iso={member.lastSeenAt.toISOString()} />
    </>
  ) : (
    "not here yet"
  );
  return (
    <li className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1 border-b border-hairline py-2">
      <div>
        {member.name}
        <div className="text-margin text-second">
          {member.email ? `${member.email}, ` : ""}
          {me ? "you" : seen}
        </div>
      </div>
      {leads ? (
        <div className="flex flex-wrap items-end gap-x-6 gap-y-1">
          <ActionForm action={changeRole} submit="Change" look="act" inline label={`Role of ${member.name}`}>
            <input type="hidden" name="groupId" value={groupId} />
            <input type="hidden" name="userId" value={member.userId} />
            <FormChoice name="role" label={`Role of ${member.name}`} options={roles} defaultValue={member.role} className="w-24" bare />
          </ActionForm>
          <ActionForm action={removePerson} submit={me ? "Leave" : "Remove"} look="danger" label={`Remove ${member.name}`}>
            <input type="hidden" name="groupId" value={groupId} />
            <input type="hidden" name="userId" value={member.userId} />
          </ActionForm>
        </div>
      ) : (
        <span className="text-second">{member.role}</span>
      )}
    </li>
  );
}
