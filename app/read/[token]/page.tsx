import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { database } from "@/app/_server/database";
import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { When } from "@/app/_site/When";
import { Button } from "@/app/_ui/Button";
import { findLink } from "@/db/queries/links";

export const metadata: Metadata = { title: "Reading link", referrer: "no-referrer", robots: { index: false } };

/** Where a reading link leads. Opening it changes nothing; the button exchanges it for a cookie of this browser. */
export default async function ReadingLinkPage({ params }: { readonly params: Promise<{ token: string }> }) {
  const { token } = await params;
  const link = await findLink(database(), token);
  if (!link) notFound();
  if (link.state !== "open") redirect(`/read/${encodeURIComponent(token)}/ended`);
  const what = link.number === null ? "the live page" : `snapshot ${link.number} of`;
  return (
    <>
      <SiteHeader />
      <Sheet
        title={link.title || "Untitled page"}
        says={
          <>
            <p>
              The group {link.group} gives you {what} {link.number === null ? "" : "this page "}to read, until{" "}
              <When iso={link.expiresAt.toISOString()} as="day" />. You need no account.
            </p>
            <p className="mt-3">Nobody in the group sees who you are or that you are there. You can read and download everything and change nothing.</p>
          </>
        }
      >
        <form action="/api/reading" method="post">
          <input type="hidden" name="token" value={token} />
          <Button type="submit" look="main">
            Read it
          </Button>
        </form>
      </Sheet>
    </>
  );
}
