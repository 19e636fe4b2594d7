import type { Metadata } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { hasOrcid } from "@/app/_server/auth/options";
import { localPath } from "@/app/_server/localPath";
import { currentUser } from "@/app/_server/session";
import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { SignInForm } from "./SignInForm";

export const metadata: Metadata = { title: "Sign in" };

interface Props {
  readonly searchParams: Promise<{ callbackUrl?: string | string[]; signedOut?: string; email?: string; error?: string }>;
}

export default async function SignInPage({ searchParams }: Props) {
  const { callbackUrl, signedOut, email, error } = await searchParams;
  const to = localPath(callbackUrl);
  if (await currentUser()) redirect(to);
  return (
    <>
      <SiteHeader>
        <Link href="/sign-up">Sign up</Link>
      </SiteHeader>
      <Sheet
        title="Sign in"
        says={
          signedOut === "everywhere" ? (
            <p role="status">You are signed out on every device.</p>
          ) : to === "/" ? null : (
            <p>Sign in to go on to where you were going.</p>
          )
        }
      >
        {error ? (
          <p role="alert" className="mb-4 text-vermilion">
            Signing in elsewhere did not work. Try again, or sign in with your password.
          </p>
        ) : null}
        <SignInForm to={to} email={typeof email === "string" ? email.slice(0, 254) : ""} orcid={hasOrcid()} />
        <p className="mt-8 border-t border-hairline pt-3 text-second">
          New here?{" "}
          <Link className="underline" href="/sign-up">
            Sign up
          </Link>{" "}
          and make a group, or open the invitation you got by mail.
        </p>
      </Sheet>
    </>
  );
}
