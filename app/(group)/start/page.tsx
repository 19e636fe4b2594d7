import type { Metadata } from "next";
import Link from "next/link";
import { makeGroup } from "@/app/_server/actions/people";
import { database } from "@/app/_server/database";
import { signedIn } from "@/app/_server/screen";
import { ActionForm } from "@/app/_site/ActionForm";
import { FormField } from "@/app/_site/FormField";
import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { groupsOf } from "@/db/queries/groups";

export const metadata: Metadata = { title: "Groups" };

/** One's groups, and a new one. */
export default async function GroupsPage() {
  const user = await signedIn("/start");
  const groups = await groupsOf(database(), user.id);
  return (
    <>
      <SiteHeader>
        <Link href="/account">{user.name}</Link>
      </SiteHeader>
      <Sheet
        title={groups.length > 0 ? "Your groups" : "You are in no group yet"}
        says={groups.length > 0 ? null : "Open the invitation you got by mail, or make a group of your own and invite others."}
      >
        {groups.length > 0 ? (
          <ul className="mb-8">
            {groups.map((group) => (
              <li key={group.id} className="flex items-baseline justify-between gap-4 border-b border-hairline py-2">
                <Link href={`/groups/${group.id}`} className="font-serif text-note-narrow">
                  {group.name}
                </Link>
                <span className="text-second">{group.role}</span>
              </li>
            ))}
          </ul>
        ) : null}
        <ActionForm action={makeGroup} submit="Make a group" look={groups.length > 0 ? "act" : "main"}>
          <FormField name="name" label="Name of the group" required maxLength={120} />
        </ActionForm>
      </Sheet>
    </>
  );
}
