import path from "node:path";
import type { Browser, BrowserContext, Locator, Page } from "playwright-core";
import { inject } from "vitest";
import { pointer, type Hand } from "./hands";

/** Somebody in front of a browser of their own. */
export interface Person {
  readonly name: string;
  readonly email: string;
  readonly context: BrowserContext;
  readonly page: Page;
  readonly hand: Hand;
  /** What the browser complained about: errors of scripts and broken security rules. */
  readonly complaints: string[];
}

export const PASSWORD = "thin-section-of-a-test";
export const analyses = path.resolve(import.meta.dirname, "analyses.csv");

/** Opens a browser window for a person, signed out. */
export async function open(browser: Browser, name: string, hand: (page: Page) => Hand = pointer, width = 1440): Promise<Person> {
  const context = await browser.newContext({ viewport: { width, height: 1000 }, baseURL: inject("url") });
  const page = await context.newPage();
  page.setDefaultTimeout(20_000);
  const complaints: string[] = [];
  page.on("pageerror", (error) => complaints.push(error.message));
  page.on("console", (message) => {
    // Freezing asks with a 409 whether values from memory are meant.
    if (message.type() === "error" && !message.text().includes("409")) complaints.push(message.text());
  });
  const stamp = `${Date.now().toString(36)}${Math.floor(process.hrtime()[1] / 1000).toString(36)}`;
  return { name, email: `${name.toLowerCase().replace(/\W+/gu, ".")}.${stamp}@example.org`, context, page, hand: hand(page), complaints };
}

/** Signs a new person up, with a group of their own; ends at the group's home. */
export async function signUp({ page, hand, name, email }: Person, group: string): Promise<string> {
  await page.goto("/sign-up");
  await hand.fill(page.getByLabel("Your name"), name);
  await hand.fill(page.getByLabel("E-mail"), email);
  await hand.fill(page.getByLabel("Password"), PASSWORD);
  await hand.fill(page.getByLabel("Name of the group"), group);
  await hand.press(page.getByRole("button", { name: "Sign up" }));
  await page.getByRole("heading", { level: 1, name: group, exact: true }).waitFor();
  return new URL(page.url()).pathname.split("/")[2] ?? "";
}

/** Invites somebody by mail from the group's list of people. */
export async function invite({ page, hand }: Person, groupId: string, guest: Person, role: string): Promise<void> {
  await page.goto(`/groups/${groupId}`);
  await hand.press(page.getByRole("navigation", { name: "Here" }).getByRole("link", { name: "People" }));
  const form = page.getByRole("form", { name: "Invite somebody" });
  await hand.fill(form.getByLabel("E-mail"), guest.email);
  await hand.pick(form.getByLabel("Role"), role);
  await hand.press(form.getByRole("button", { name: "Send the invitation" }));
  await page.getByText(`${guest.email} as ${role}`).waitFor();
}

/** Follows the link in the mail to this person, makes an account there and joins. */
export async function join({ page, hand, name, email }: Person, group: string): Promise<void> {
  await page.goto("/mail");
  const mail = page.getByRole("listitem").filter({ hasText: email });
  await hand.press(mail.getByRole("link").first());
  await hand.fill(page.getByLabel("Your name"), name);
  await hand.fill(page.getByLabel("Password"), PASSWORD);
  await hand.press(page.getByRole("button", { name: "Make an account and join" }));
  await page.getByRole("heading", { level: 1, name: group, exact: true }).waitFor();
}

/** Signs in somebody who has an account. */
export async function signIn({ page, hand }: Person, email: string, password: string): Promise<void> {
  await page.goto("/sign-in");
  await hand.fill(page.getByLabel("E-mail"), email);
  await hand.fill(page.getByLabel("Password"), password);
  await hand.press(page.getByRole("button", { name: "Sign in" }));
  await page.waitForURL((url) => !url.pathname.startsWith("/sign-in"));
}

/** A block of the page by its handle. */
export function block(page: Page, handle: string) {
  return page.locator(`section.block[id="${handle}"]`);
}

/** Waits until everything this person did is on the database's disk. */
export async function saved(page: Page): Promise<void> {
  await page
    .getByText(/^Saved/u)
    .first()
    .waitFor();
}

/** Keeps what everybody saw when a test failed, beside the logs. */
export async function shoot(test: string, people: readonly Person[]): Promise<void> {
  const stem = test.replace(/\W+/gu, "-").slice(0, 60);
  for (const { page, name } of people)
    await page.screenshot({ path: path.resolve(import.meta.dirname, `../../.data/logs/${stem}-${name.replace(/\W+/gu, "-")}.png`) }).catch(() => undefined);
}

/** Freezes the page that is open, taking every value from memory knowingly; gives the dialog that says so. */
export async function freeze({ page, hand }: Person, note: string): Promise<Locator> {
  await hand.press(page.getByRole("navigation", { name: "This page" }).getByRole("button", { name: "Freeze" }));
  const dialog = page.getByRole("dialog");
  await hand.fill(dialog.getByLabel("What this snapshot is for"), note);
  await hand.press(dialog.getByRole("button", { name: "Freeze", exact: true }));
  const frozen = page.getByRole("dialog", { name: /Frozen as no\. \d/u });
  const asked = dialog.getByRole("checkbox").first();
  await Promise.race([frozen.waitFor({ timeout: 60_000 }), asked.waitFor({ timeout: 60_000 })]);
  if (await asked.isVisible().catch(() => false)) {
    for (const box of await dialog.getByRole("checkbox").all()) await hand.tick(box);
    await hand.press(dialog.getByRole("button", { name: "Freeze", exact: true }));
    await frozen.waitFor({ timeout: 60_000 });
  }
  return frozen;
}

/** Makes a reading link to what was just frozen; gives its address and leaves the dialog open. */
export async function readingLink({ page, hand }: Person, frozen: Locator): Promise<string> {
  await hand.press(frozen.getByRole("button", { name: "Hand out a reading link" }));
  const links = page.getByRole("dialog", { name: "Reading links" });
  await hand.press(links.getByRole("button", { name: "Make the link" }));
  return links.getByLabel("Address of the reading link").inputValue();
}
