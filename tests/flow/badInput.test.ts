import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, inject, test } from "vitest";
import { launchBrowser } from "../support/browser";
import { block, open, saved, signUp, type Person } from "./people";

/** What people see when they bring something that cannot be taken: a sentence at the place, and nothing half-written. */
describe("bad input", () => {
  let browser: Browser;
  let ana: Person;
  let groupId = "";

  beforeAll(async () => {
    browser = await launchBrowser();
    ana = await open(browser, "Ana Whitcombe");
    groupId = await signUp(ana, "Tarn Petrology");
    await newPage();
  });
  afterAll(async () => {
    await browser.close();
  });

  async function newPage(): Promise<void> {
    const { page } = ana;
    await page.goto(`/groups/${groupId}`);
    await page.getByRole("button", { name: "New page" }).click();
    await page.waitForURL(/\/pages\//u);
    await page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }).click();
    await block(page, "d").getByRole("button", { name: "Upload a file" }).waitFor();
  }

  async function bring(name: string, content: Buffer): Promise<void> {
    await ana.page.getByLabel("Choose a table to upload").setInputFiles({ name, mimeType: "text/csv", buffer: content });
  }

  async function refusedFile(name: string, content: Buffer, sentence: RegExp): Promise<void> {
    const { page } = ana;
    await bring(name, content);
    const alert = page.getByRole("alert").filter({ hasText: sentence });
    await alert.first().waitFor();
    if (await page.getByRole("dialog").isVisible()) {
      expect(await page.getByRole("button", { name: "Save this table" }).isEnabled()).toBe(false);
      await page.getByRole("button", { name: "Leave it" }).click();
    }
    await block(page, "d").getByRole("button", { name: "Upload a file" }).waitFor();
  }

  test("an empty file", () => refusedFile("nothing.csv", Buffer.alloc(0), /nothing\.csv is empty/u));

  test("a file that is no table", async () => {
    const picture = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0x49, 0x48, 0x44, 0x52, 0, 0, 1, 0, 0, 0, 1, 0, 8, 6, 0, 0, 0]);
    await refusedFile("picture.csv", picture, /PNG image/u);
  });

  test("a header without rows", () => refusedFile("header.csv", Buffer.from("Sample,MgO (wt%),SiO2 (wt%)\n"), /no rows|without rows|rows/iu));

  test("200 MB: refused with its limit before anything is sent", async () => {
    const { page } = ana;
    const answer = await page.request
      .post(`${new URL(page.url()).pathname.replace("/pages/", "/api/pages/")}/sources`, {
        headers: { "x-file-name": "large.csv", "content-length": String(200 * 1024 * 1024), origin: inject("url") },
        data: Buffer.alloc(60 * 1024 * 1024, 0x20),
        timeout: 60_000,
      })
      .catch((error: unknown) => error);
    // Either the answer is read, or the server has hung up before the body had gone.
    if (answer instanceof Error) expect(answer.message).toMatch(/ECONNRESET|EPIPE|socket hang up|content-length/iu);
    else expect((answer as { status(): number }).status()).toBe(413);
    await block(page, "d").getByRole("button", { name: "Upload a file" }).waitFor();
  });

  test("two columns of one name are said before saving, and can be told apart", async () => {
    const { page } = ana;
    await bring("twice.csv", Buffer.from("Sample,MgO (wt%),MgO (wt%),SiO2 (wt%)\nA-1,38.1,38.2,44.0\nA-2,38.4,38.0,44.6\nA-3,37.9,38.3,44.2\n"));
    const dialog = page.getByRole("dialog");
    await dialog.getByText("3 rows, 4 columns").waitFor();
    const save = dialog.getByRole("button", { name: "Save this table" });
    await expect.poll(() => dialog.innerText()).toMatch(/two columns|both|MgO/iu);
    if (!(await save.isEnabled())) {
      await dialog
        .getByLabel("Role of MgO (wt%)")
        .nth(1)
        .selectOption({ label: "not used" })
        .catch(() => dialog.getByLabel(/^Name/u).nth(2).fill("MgO again"));
    }
    await expect.poll(() => save.isEnabled(), { timeout: 10_000 }).toBe(true);
    await save.click();
    await dialog.waitFor({ state: "detached" });
    await block(page, "d").getByText("A-1").first().waitFor();
    await saved(page);
  });

  /** Replaces the formulas of the page's one formula block. */
  async function write(text: string): Promise<void> {
    const { page } = ana;
    const editor = page.getByRole("textbox", { name: "Formulas of f" });
    await editor.click();
    await page.keyboard.press("Control+A");
    await page.keyboard.press("Delete");
    await page.keyboard.insertText(text);
  }

  test.each([
    ["a cycle", "a = b + 1\nb = a + 1", /circle|itself|round/iu],
    ["an unknown unit", "c = as_furlong(MgO)", /as_furlong/u],
    ["a name that is not there", "c = Unobtainium / Si", /Unobtainium/u],
    ["a formula of 5,000 characters", `c = ${"MgO + ".repeat(833)}MgO`, /at most 4000/u],
  ])("%s gets its sentence under the line", async (_, text, sentence) => {
    const { page } = ana;
    if ((await block(page, "f").count()) === 0) {
      await block(page, "d").getByRole("button", { name: "Add below" }).click();
      await page.getByRole("menuitem", { name: /Formula/u }).click();
    }
    await write(text);
    await expect.poll(() => block(page, "f").innerText(), { timeout: 15_000 }).toMatch(sentence);
  });

  test("a table in the bin that is still in use: its readers say so, and get it back", async () => {
    const { page } = ana;
    await write("ratio = Mg / Si");
    await expect.poll(() => block(page, "f").innerText(), { timeout: 15_000 }).not.toMatch(/at most 4000/u);
    await block(page, "d")
      .getByRole("button", { name: /^More for/u })
      .click();
    await page.getByRole("menuitem", { name: "Move to the bin" }).click();
    await expect.poll(() => block(page, "f").innerText(), { timeout: 15_000 }).toMatch(/there is no .*d\b|no block d|bin/iu);
    await page.getByRole("button", { name: /^Bin/u }).first().click();
    await page
      .getByRole("dialog")
      .getByRole("button", { name: /^Bring .* back$/u })
      .first()
      .click();
    await page.keyboard.press("Escape");
    await block(page, "d").getByText("A-1").first().waitFor();
    await expect.poll(() => block(page, "f").innerText(), { timeout: 15_000 }).not.toMatch(/there is no .*d\b|no block d/iu);
    await saved(page);
  });

  test("a page of another group", async () => {
    const stranger = await open(browser, "Somebody Else");
    await signUp(stranger, "Another Group");
    const answer = await stranger.page.goto(new URL(ana.page.url()).pathname);
    expect(answer?.status()).toBe(404);
    const text = await stranger.page.locator("main").innerText();
    expect(text).toMatch(/no page|not here|does not exist|no access|nothing/iu);
    expect(text).not.toContain("A-1");
    const upload = await stranger.page.request.post(`/api/pages/${new URL(ana.page.url()).pathname.split("/")[2] ?? ""}/sources`, {
      headers: { "x-file-name": "x.csv", origin: inject("url") },
      data: "Sample,MgO\nA,1\n",
    });
    expect([403, 404]).toContain(upload.status());
    await stranger.context.close();
  });

  test("a link that never was", async () => {
    const answer = await ana.page.goto("/read/abcdefghijklmnopqrstuvwxyz0123456789");
    expect(answer?.status()).toBe(404);
    expect(await ana.page.locator("main").innerText()).toMatch(/link/iu);
  });

  test("a session that has ended while the page was open: the page says so and stops editing", async () => {
    const other = await open(browser, "Ines Ferrante");
    await signUp(other, "Third Group");
    await other.page.getByRole("button", { name: "New page" }).click();
    await other.page.waitForURL(/\/pages\//u);
    await saved(other.page);
    const elsewhere = await other.context.newPage();
    await elsewhere.goto("/account");
    await elsewhere.getByRole("button", { name: /everywhere/iu }).click();
    await other.page
      .getByText(/signed out/iu)
      .first()
      .waitFor({ timeout: 15_000 });
    expect(await other.page.getByRole("region", { name: "The first block" }).getByRole("button").count()).toBe(0);
    await other.context.close();
  });
});
