import "server-only";
import { createTransport, type Transporter } from "nodemailer";
import { Refusal } from "./problem";

export interface Mail {
  readonly to: string;
  readonly subject: string;
  readonly text: string;
}

let transport: Transporter | undefined;

/** Sends a mail in plain text through `SMTP_URL`. @throws Refusal 502 when the mail server does not take it */
export async function sendMail(mail: Mail): Promise<void> {
  const url = process.env.SMTP_URL;
  if (!url) throw new Refusal(503, "No mail here", "This server has no mail server to send by. Whoever runs it must set SMTP_URL.");
  transport ??= createTransport(url, { connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 20_000 } as object);
  try {
    await transport.sendMail({ from: process.env.MAIL_FROM ?? "Cotectic <cotectic@localhost>", ...mail });
  } catch (error) {
    console.error(error);
    throw new Refusal(502, "The mail was not sent", `The mail server did not take the mail to ${mail.to}. Check the address, wait a moment and try again.`);
  }
}

/** An address of ours as people reach it. */
export function address(path: string): string {
  return new URL(path, process.env.NEXTAUTH_URL ?? "http://127.0.0.1:3000").href;
}
