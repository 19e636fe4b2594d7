import Link from "next/link";
import { redirect } from "next/navigation";
import { database } from "@/app/_server/database";
import { currentUser } from "@/app/_server/session";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { groupsOf } from "@/db/queries/groups";

/** The start: one's group for whoever is signed in, what this is for whoever is not. */
export default async function StartPage() {
  const user = await currentUser();
  if (user) {
    const [last] = await groupsOf(database(), user.id);
    redirect(last ? `/groups/${last.id}` : "/start");
  }
  return (
    <>
      <SiteHeader>
        <Link href="/sign-in">Sign in</Link>
      </SiteHeader>
      <main className="mx-auto max-w-[680px] px-4 pt-20 pb-16 narrow:pt-10">
        <h1 className="font-serif text-title font-medium tracking-tight phone:text-title-phone">Bulk compositions, argued over on one page</h1>
        <p className="mt-6 font-serif text-note">
          Bring analyses from several laboratories to one basis, screen them, form element ratios with honest uncertainties, fit trends with errors on both
          axes, find where they cross, and test explanations as mass balances. Together, live, and then frozen so that a referee can check every number.
        </p>
        <p className="mt-8 flex gap-8 text-block">
          <Link href="/sign-up" className="border-b-2 border-indigo font-semibold no-underline">
            Sign up
          </Link>
          <Link href="/sign-in">Sign in</Link>
        </p>
      </main>
    </>
  );
}
