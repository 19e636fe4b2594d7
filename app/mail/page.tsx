import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { z } from "zod";
import { SiteHeader } from "@/app/_site/SiteHeader";
import { When } from "@/app/_site/When";

export const metadata: Metadata = { title: "Mailbox" };

const mailSchema = z.object({ id: z.string(), at: z.string(), to: z.array(z.string()), subject: z.string(), text: z.string() });

/** Mail that went to the mailbox on this machine, which stands in where no mail server is set. */
export default async function MailboxPage() {
  const url = process.env.MAILBOX_URL;
  if (!url) notFound();
  const answer = await fetch(`${url}/mails`, { cache: "no-store" }).catch(() => null);
  const mails = answer?.ok ? z.array(mailSchema).parse(await answer.json()) : null;
  return (
    <>
      <SiteHeader />
      <main className="mx-auto max-w-[720px] px-4 pt-12 pb-16">
        <h1 className="font-serif text-title-phone font-medium">Mailbox of this machine</h1>
        <p className="mt-3 text-second">No mail server is set, so mail goes nowhere but here, and is forgotten when the program stops.</p>
        {mails === null ? <p className="mt-8 text-vermilion">The mailbox does not answer. Start the program again.</p> : null}
        {mails?.length === 0 ? <p className="mt-8">No mail yet. Invite somebody, and the mail arrives here.</p> : null}
        <ol className="mt-8">
          {mails?.map((mail) => (
            <li key={mail.id} className="border-t border-ink pt-2 pb-8">
              <h2 className="text-block font-semibold">{mail.subject}</h2>
              <p className="text-margin text-second">
                to {mail.to.join(", ")}, <When iso={mail.at} />
              </p>
              <p className="mt-3 whitespace-pre-wrap">{withLinks(mail.text)}</p>
            </li>
          ))}
        </ol>
      </main>
    </>
  );
}

function withLinks(text: string) {
  return text.split(/(https?:\/\/\S+)/).map((part, n) =>
    n % 2 === 1 ? (
      <a key={n} href={part} className="break-all underline">
        {part}
      </a>
    ) : (
      part
    ),
  );
}
