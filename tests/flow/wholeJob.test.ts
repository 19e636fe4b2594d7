import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, describe, expect, inject, test } from "vitest";
import { RawSocket } from "../realtime/support/rawSocket";
import { launchBrowser } from "../support/browser";
import { keyboard } from "./hands";
import { analyses, block, freeze, invite, join, open, readingLink, saved, shoot, signUp, type Person } from "./people";

/**
 * The whole job, by a lead who uses nothing but the keyboard and an analyst with a pointer, each in a browser of their own and
 * both on one page at once, with a reader beside them. Steps stand on each other.
 */
describe("a group takes a table of compositions to a frozen, shared result", () => {
  const group = "Fennmark Meteorite Group";
  let browser: Browser;
  let lead: Person;
  let analyst: Person;
  let reader: Person;
  let groupId = "";
  let pageId = "";

  beforeAll(async () => {
    browser = await launchBrowser();
    [lead, analyst, reader] = await Promise.all([open(browser, "Runa Haavik", keyboard), open(browser, "Desmond Achebe"), open(browser, "Lotte Brandsma")]);
  });
  afterEach(async ({ task }) => {
    if (task.result?.state === "fail") await shoot(task.name, [lead, analyst, reader]);
  });
  afterAll(async () => {
    await browser.close();
  });

  /** Both see it: a text in a block. */
  async function bothSee(handle: string, text: RegExp | string): Promise<void> {
    for (const { page } of [lead, analyst]) await block(page, handle).getByText(text).first().waitFor();
  }

  test("the lead signs up and gets a group", async () => {
    groupId = await signUp(lead, group);
    expect(groupId).toMatch(/^[0-9a-f-]{36}$/u);
  });

  test("invites an analyst and a reader, who accept by the mailed link", async () => {
    await invite(lead, groupId, analyst, "analyst");
    await invite(lead, groupId, reader, "reader");
    await join(analyst, group);
    await join(reader, group);
    await lead.page.goto(`/groups/${groupId}/people`);
    for (const name of ["Desmond Achebe", "Lotte Brandsma"]) await lead.page.getByRole("listitem").filter({ hasText: name }).waitFor();
  });

  test("the lead makes a page and names it; the analyst sees the name", async () => {
    await lead.page.goto(`/groups/${groupId}`);
    await lead.hand.press(lead.page.getByRole("button", { name: "New page" }));
    await lead.page.waitForURL(/\/pages\//u);
    pageId = new URL(lead.page.url()).pathname.split("/")[2] ?? "";
    await lead.hand.fill(lead.page.getByLabel("Title of the page"), "Where two trends meet", true);
    await saved(lead.page);
    await analyst.page.goto(`/groups/${groupId}`);
    await analyst.page.getByRole("link", { name: "Where two trends meet" }).first().click();
    await expect.poll(() => analyst.page.getByLabel("Title of the page").inputValue(), { timeout: 15_000 }).toBe("Where two trends meet");
  });

  test("the lead uploads a table and maps it; the analyst sees the table", async () => {
    const { page, hand } = lead;
    await hand.press(page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }));
    const chooser = page.waitForEvent("filechooser");
    await hand.press(block(page, "d").getByRole("button", { name: "Upload a file" }));
    await (await chooser).setFiles(analyses);
    const dialog = page.getByRole("dialog");
    await dialog.getByText("28 rows, 8 columns").waitFor();
    await hand.pick(dialog.getByLabel("Role of Kind"), "class");
    await hand.press(dialog.getByRole("button", { name: "Save this table" }));
    await dialog.waitFor({ state: "detached" });
    await bothSee("d", "PN-01");
    await saved(page);
  });

  test("the analyst writes formulas; both see the ratios", async () => {
    const { page, hand } = analyst;
    await hand.choose(block(page, "d").getByRole("button", { name: "Add below" }), /Formula/u);
    await hand.type(page.getByRole("textbox", { name: "Formulas of f" }), "mg_si = Mg / Si");
    // With its list of names open, Enter after a whole name starts the next line.
    await page.getByRole("listbox").getByRole("option").first().waitFor();
    await page.waitForTimeout(150);
    await page.keyboard.press("Enter");
    await page.keyboard.type("al_si = Al / Si");
    await saved(page);
    for (const person of [lead, analyst]) {
      await expect.poll(() => person.page.getByRole("textbox", { name: "Formulas of f" }).innerText(), { timeout: 15_000 }).toContain("al_si = Al / Si");
      await block(person.page, "f").getByText(/28/u).first().waitFor();
    }
  });

  test("the lead draws the ratios", async () => {
    const { page, hand } = lead;
    await hand.choose(block(page, "f").getByRole("button", { name: "Add below" }), /Plot/u);
    await hand.press(
      block(page, "p")
        .getByRole("button", { name: /^Samples of d/u })
        .first(),
    );
    await hand.fill(page.getByLabel("Across"), "mg_si", true);
    await hand.fill(page.getByLabel("Upwards"), "al_si", true);
    await page.keyboard.press("Escape");
    for (const person of [lead, analyst])
      await expect.poll(() => block(person.page, "p").getByRole("img").first().getAttribute("aria-label"), { timeout: 20_000 }).toMatch(/28 drawn/u);
  });

  test("the analyst fits two trends and crosses them", async () => {
    const { page, hand } = analyst;
    for (const [handle, where] of [
      ["t", 'Kind == "chondrite"'],
      ["t2", 'Kind == "mantle rock"'],
    ] as const) {
      await hand.choose(block(page, handle === "t" ? "p" : "t").getByRole("button", { name: "Add below" }), /Trend/u);
      await hand.press(block(page, handle).getByRole("button", { name: "Samples and method" }));
      await hand.fill(page.getByLabel("Across"), "mg_si", true);
      await hand.fill(page.getByLabel("Upwards"), "al_si", true);
      await hand.fill(page.getByLabel("Only where"), where, true);
      if (handle === "t2") await hand.pick(page.getByLabel("Crosses"), "t");
      await page.keyboard.press("Escape");
      await bothSee(handle, /expected of n = 14/u);
    }
    await bothSee("t2", "crosses t");
  });

  test("the lead adds the trends and their crossing to the plot", async () => {
    const { page, hand } = lead;
    for (const item of [/^Trend t$/u, /^Trend t2$/u, /^Crossing of t2/u]) {
      await hand.choose(block(page, "p").getByRole("button", { name: "Draw more" }), item);
      await page.keyboard.press("Escape");
    }
    await expect.poll(() => block(analyst.page, "p").getByRole("listitem").count(), { timeout: 15_000 }).toBeGreaterThanOrEqual(4);
  });

  test("the lead solves a budget for silicon in metal", async () => {
    const { page, hand } = lead;
    await hand.choose(block(page, "t2").getByRole("button", { name: "Add below" }), /Budget/u);
    const budget = block(page, "b");
    await hand.press(budget.getByRole("button", { name: "Change: no target" }));
    await hand.pick(page.getByLabel("Reaches"), "a ratio of a body");
    await hand.fill(page.getByLabel("Of the body"), "CI_PLJ14", true);
    await page.keyboard.press("Escape");
    await hand.choose(budget.getByRole("button", { name: "Add a step" }), /metal/u);
    await hand.fill(page.getByLabel("Metal, % of the whole"), "32.3", true);
    await page.keyboard.press("Escape");
    await hand.press(budget.getByRole("button", { name: "Reported ratios" }));
    await hand.fill(page.getByLabel("Reported, parted by commas"), "Mg / Si, Al / Si", true);
    await page.keyboard.press("Escape");
    await bothSee("b", /Si .*wt%|wt%/u);
  });

  test("a ratio by mass less a ratio by atoms is refused in words", async () => {
    const { page, hand } = analyst;
    await hand.type(page.getByRole("textbox", { name: "Formulas of f" }), "\nwrong = Mg / Si - atoms(Mg) / atoms(Si)");
    for (const person of [lead, analyst]) await expect.poll(() => block(person.page, "f").innerText(), { timeout: 15_000 }).toMatch(/by mass.*by atoms/su);
    for (let i = 0; i < "wrong = Mg / Si - atoms(Mg) / atoms(Si)".length + 1; i++) await page.keyboard.press("Backspace");
    await expect.poll(() => block(lead.page, "f").innerText(), { timeout: 15_000 }).not.toMatch(/wrong/u);
  });

  test("a reader's edit through the raw socket changes nothing", async () => {
    await reader.page.goto(`/pages/${pageId}`);
    await block(reader.page, "d").getByText("PN-01").first().waitFor();
    expect(await reader.page.getByRole("button", { name: "Add below" }).count()).toBe(0);
    const cookies = await reader.context.cookies();
    const ask = {
      port: inject("realtimePort"),
      pageId,
      cookie: cookies.map(({ name, value }) => `${name}=${value}`).join("; "),
      origin: inject("url"),
    };
    const socket = await RawSocket.synced(ask);
    const before = socket.textOf("f");
    const number = socket.type("f", "\nmine = Mg");
    await socket.until(() => socket.refusals.length > 0);
    expect(socket.refusals[0]).toMatchObject({ number, code: 4403 });
    await socket.close();
    const again = await RawSocket.synced(ask);
    expect(again.textOf("f")).toBe(before);
    await again.close();
    expect(await block(lead.page, "f").innerText()).not.toContain("mine");
    expect(await lead.page.getByLabel("Title of the page").inputValue()).toBe("Where two trends meet");
  });

  test("the lead freezes the page and hands out a reading link, which opens signed out", async () => {
    const { page, hand } = lead;
    await saved(page);
    const frozen = await freeze(lead, "As discussed by the two of us");
    const address = await readingLink(lead, frozen);

    const guest = await open(browser, "Guest");
    await guest.page.goto(address);
    await guest.hand.press(guest.page.getByRole("button", { name: "Read it" }));
    await guest.page.getByText("Where two trends meet").first().waitFor();
    await block(guest.page, "t2").getByText("crosses t").waitFor();
    await block(guest.page, "d").getByText("PN-01").first().waitFor();
    expect(await guest.page.getByRole("button", { name: /Freeze|Add below|Add a block/u }).count()).toBe(0);
    expect(guest.complaints).toEqual([]);

    const links = page.getByRole("dialog", { name: "Reading links" });
    await hand.press(links.getByRole("button", { name: /^Withdraw/u }).first());
    await links.getByText("withdrawn").waitFor();
    await guest.page.goto(address);
    await guest.page
      .getByText(/withdrawn|ended|no longer/iu)
      .first()
      .waitFor();
    await guest.context.close();
  });

  test("nobody's browser had anything to complain about", () => {
    expect({ lead: lead.complaints, analyst: analyst.complaints, reader: reader.complaints }).toEqual({ lead: [], analyst: [], reader: [] });
    expect(inject("url")).toMatch(/^http/u);
  });
});
