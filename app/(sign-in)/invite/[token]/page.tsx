import type { Metadata } from "next";
import Link from "next/link";
import { notFound } from "next/navigation";
import { accept } from "@/app/_server/actions/people";
import { signUpInvited } from "@/app/_server/actions/signUp";
import { database } from "@/app/_server/database";
import { signInPath } from "@/app/_server/screen";
import { currentUser } from "@/app/_server/session";
import { ActionForm } from "@/app/_site/ActionForm";
import { FormField } from "@/app/_site/FormField";
import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { findInvitation, type FoundInvitation } from "@/db/queries/invitations";
import { findUserByEmail } from "@/db/queries/users";

export const metadata: Metadata = { title: "Invitation", robots: { index: false } };

const can: Record<FoundInvitation["role"], string> = {
  lead: "A lead edits every page, freezes snapshots, hands out reading links and looks after the people.",
  analyst: "An analyst edits every page of the group.",
  reader: "A reader reads every page of the group and edits nothing.",
};

/** Where a mailed invitation leads. Opening it changes nothing: programs that check mail open links too. */
export default async function InvitationPage({ params }: { readonly params: Promise<{ token: string }> }) {
  const { token } = await params;
  const invitation = await findInvitation(database(), token);
  if (!invitation) notFound();
  return (
    <>
      <SiteHeader />
      {invitation.state === "open" ? <Open invitation={invitation} token={token} /> : <Ended invitation={invitation} />}
    </>
  );
}

function Ended({ invitation }: { readonly invitation: FoundInvitation }) {
  const why = {
    open: "",
    accepted: "This invitation has been accepted already. It opens the door once; after that, sign in.",
    withdrawn: "This invitation was withdrawn, or replaced by a newer one. Look for a later mail, or ask for a new one.",
    expired: "This invitation has run out. Ask for a new one.",
  }[invitation.state];
  return (
    <Sheet title={`Invitation to ${invitation.group}`} says={why}>
      <Link href="/sign-in">Sign in</Link>
    </Sheet>
  );
}

async function Open({ invitation, token }: { readonly invitation: FoundInvitation; readonly token: string }) {
  const [user, account] = await Promise.all([currentUser(), findUserByEmail(database(), invitation.email)]);
  const says = (
    <>
      <p>
        {invitation.invitedBy ?? "Somebody"} invites {invitation.email} to the group {invitation.group}, as {invitation.role}. {can[invitation.role]}
      </p>
    </>
  );
  if (user)
    return (
      <Sheet title={`Join ${invitation.group}`} says={says}>
        <p className="mb-4">
          You are signed in as {user.name}
          {user.email ? ` (${user.email})` : ""}.
        </p>
        <ActionForm action={accept} submit={`Join as ${user.name}`}>
          <input type="hidden" name="token" value={token} />
        </ActionForm>
      </Sheet>
    );
  if (account)
    return (
      <Sheet title={`Join ${invitation.group}`} says={says}>
        <p>
          There is an account with this e-mail.{" "}
          <Link className="underline" href={`${signInPath(`/invite/${token}`)}&email=${encodeURIComponent(invitation.email)}`}>
            Sign in
          </Link>{" "}
          and come back here.
        </p>
      </Sheet>
    );
  return (
    <Sheet title={`Join ${invitation.group}`} says={says}>
      <ActionForm action={signUpInvited} submit="Make an account and join">
        <input type="hidden" name="token" value={token} />
        <FormField name="name" label="Your name" hint="As it should stand beside your edits." autoComplete="name" required maxLength={120} />
        <FormField
          name="password"
          label="Password"
          hint="At least 10 characters."
          type="password"
          autoComplete="new-password"
          required
          minLength={10}
          maxLength={200}
        />
      </ActionForm>
      <p className="mt-8 border-t border-hairline pt-3 text-second">
        Do you have an account under another e-mail?{" "}
        <Link className="underline" href={signInPath(`/invite/${token}`)}>
          Sign in
        </Link>{" "}
        with it and come back here.
      </p>
    </Sheet>
  );
}
