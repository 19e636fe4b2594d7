import { spawn, type ChildProcess } from "node:child_process";
import path from "node:path";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { sendMail } from "@/app/_server/mail";

let mailbox: ChildProcess;
let http = "";
beforeAll(async () => {
  mailbox = spawn(process.execPath, [path.resolve(import.meta.dirname, "../../../scripts/mailbox.mjs")], {
    env: { ...process.env, MAILBOX_SMTP_PORT: "0", MAILBOX_HTTP_PORT: "0" },
    stdio: ["ignore", "pipe", "inherit"],
  });
  const said = await new Promise<string>((resolve) => mailbox.stdout?.once("data", (data: Buffer) => resolve(data.toString())));
  const [, smtp, port] = /127\.0\.0\.1:(\d+), read it on 127\.0\.0\.1:(\d+)/.exec(said) ?? [];
  http = `http://127.0.0.1:${port}/mails`;
  vi.stubEnv("SMTP_URL", `smtp://127.0.0.1:${smtp}`);
});
afterAll(() => void mailbox.kill());

describe("mail", () => {
  it("goes to the server that SMTP_URL names, whole and in any alphabet", async () => {
    const text = `Tomás invites you.\n\nhttp://127.0.0.1:3000/invite/${"x".repeat(60)}\n`;
    await sendMail({ to: "new@person.example", subject: "Tomás invites you to Þingvellir", text });
    const mails = (await (await fetch(http)).json()) as unknown[];
    expect(mails).toMatchObject([{ to: ["new@person.example"], subject: "Tomás invites you to Þingvellir", text }]);
    await fetch(http, { method: "DELETE" });
    expect(await (await fetch(http)).json()).toEqual([]);
  });
  it("to nowhere that can be reached is said in a sentence", async () => {
    vi.spyOn(console, "error").mockImplementation(() => undefined);
    await expect(sendMail({ to: "not an address", subject: "s", text: "t" })).rejects.toMatchObject({
      status: 502,
      detail: expect.stringMatching(/did not take the mail/),
    });
  });
});
