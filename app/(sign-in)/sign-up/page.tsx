import type { Metadata } from "next";
import Link from "next/link";
import { signUp } from "@/app/_server/actions/signUp";
import { ActionForm } from "@/app/_site/ActionForm";
import { FormField } from "@/app/_site/FormField";
import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";

export const metadata: Metadata = { title: "Sign up" };

export default function SignUpPage() {
  return (
    <>
      <SiteHeader>
        <Link href="/sign-in">Sign in</Link>
      </SiteHeader>
      <Sheet title="Sign up" says="You get an account and a group of your own, with you as its lead. Others come in by your invitation.">
        <ActionForm action={signUp} submit="Sign up">
          <FormField name="name" label="Your name" hint="As it should stand beside your edits." autoComplete="name" required maxLength={120} />
          <FormField name="email" label="E-mail" type="email" autoComplete="username" required maxLength={254} />
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
          <FormField name="group" label="Name of the group" required maxLength={120} />
        </ActionForm>
      </Sheet>
    </>
  );
}
