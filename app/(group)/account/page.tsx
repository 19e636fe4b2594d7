import type { Metadata } from "next";
import Link from "next/link";
import { changeName, changePassword, signOut, signOutEverywhere } from "@/app/_server/actions/account";
import { database } from "@/app/_server/database";
import { signedIn } from "@/app/_server/screen";
import { ActionForm } from "@/app/_site/ActionForm";
import { FormField } from "@/app/_site/FormField";
import { Section, Sheet } from "@/app/_site/Sheet";
import { SignOut } from "@/app/_site/SignOut";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { findUser } from "@/db/queries/users";

export const metadata: Metadata = { title: "Your account" };

export default async function AccountPage() {
  const user = await signedIn("/account");
  const hasPassword = Boolean((await findUser(database(), user.id))?.passwordHash);
  return (
    <>
      <SiteHeader>
        <Link href="/start">Groups</Link>
      </SiteHeader>
      <Sheet title={user.name} says={user.email ?? "Signed in without an e-mail address"}>
        <div className="grid gap-10">
          <Section id="name" title="Name">
            <ActionForm action={changeName} submit="Save the name" look="act" label="Name">
              <FormField name="name" label="As it stands beside your edits" defaultValue={user.name} required maxLength={120} autoComplete="name" />
            </ActionForm>
          </Section>
          <Section id="password" title="Password">
            <ActionForm action={changePassword} submit="Change the password" look="act" label="Password">
              {hasPassword ? (
                <FormField name="present" label="Present password" type="password" autoComplete="current-password" required maxLength={200} />
              ) : null}
              <FormField
                name="password"
                label="New password"
                hint="At least 10 characters. Every other device is then signed out."
                type="password"
                autoComplete="new-password"
                required
                minLength={10}
                maxLength={200}
              />
            </ActionForm>
          </Section>
          <Section id="sessions" title="Signed in">
            <div className="flex flex-wrap gap-x-8 gap-y-2 pt-1">
              <SignOut action={signOut} label="Sign out here" userId={user.id} />
              <SignOut action={signOutEverywhere} label="Sign out everywhere" userId={user.id} />
            </div>
          </Section>
        </div>
      </Sheet>
    </>
  );
}
