import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, describe, expect, test } from "vitest";
import { launchBrowser } from "../support/browser";
import { faults } from "./faults";
import { keyboard } from "./hands";
import { block, freeze, invite, join, open, saved, shoot, signUp, type Person } from "./people";

/** A group's own body, from its pasted table to a number on a page and into a snapshot, by keyboard alone. */
describe("a body of the group's own", () => {
  let browser: Browser;
  let ana: Person;
  let reader: Person;
  let groupId = "";
  let failed = "";

  beforeAll(async () => {
    browser = await launchBrowser();
    ana = await open(browser, "Ana Whitcombe", keyboard);
    reader = await open(browser, "Rui Marsh");
    groupId = await signUp(ana, "Tarn Petrology");
    await invite(ana, groupId, reader, "reader");
    await join(reader, "Tarn Petrology");
  });
  afterEach(async ({ task }) => {
    if (task.result?.state === "fail") await shoot((failed = task.name), [ana, reader]);
  });
  afterAll(async () => {
    await browser.close();
  });

  const form = () => ana.page.getByRole("form", { name: /Add a body|A new version of/u });

  test("is pasted, what is wrong listed by row, and added with its source", async () => {
    const { page, hand } = ana;
    await page.goto(`/groups/${groupId}`);
    await hand.press(page.getByRole("navigation", { name: "Here" }).getByRole("link", { name: "Bodies" }));
    await page.getByRole("heading", { level: 1, name: "Bodies of Tarn Petrology" }).waitFor();
    await hand.fill(form().getByLabel("Short name"), "Mantle");
    await hand.fill(form().getByLabel("What it is"), "a mantle");
    await hand.fill(form().getByLabel("Source", { exact: true }), "10.1000/xyz");
    await hand.fill(form().getByLabel("Composition", { exact: true }), "MgO 36 0.5\nXx 1\nSiO2 45");
    await form().getByText("Row 2, Xx: this is no element or oxide.").waitFor();
    await hand.press(form().getByRole("button", { name: "Add this body" }));
    await form().getByRole("alert").filter({ hasText: "Row 2, Xx" }).waitFor();
    // What was typed is still there, and is mended in place.
    expect(await form().getByLabel("Short name").inputValue()).toBe("Mantle");
    await hand.fill(form().getByLabel("Composition", { exact: true }), "MgO 36 0.5\nSiO2 45");
    await hand.press(form().getByRole("button", { name: "Add this body" }));
    const entry = page.getByRole("region", { name: "The group’s own" }).getByRole("listitem");
    await entry.filter({ hasText: "OWN_Mantle_1" }).waitFor();
    expect(await entry.innerText()).toMatch(/10\.1000\/xyz[\s\S]*entered by Ana Whitcombe/u);
  });

  for (const light of ["light", "dark"] as const)
    for (const width of [1440, 390])
      test(`is listed beside the built-in ones: axe and width, ${light}, ${width} px`, async () => {
        const { page } = ana;
        await page.setViewportSize({ width, height: 1000 });
        await page.emulateMedia({ colorScheme: light });
        await page.goto(`/groups/${groupId}/bodies?edit=Mantle`);
        await page.getByRole("listitem").filter({ hasText: "CI_PLJ14" }).waitFor();
        expect(await faults(page)).toEqual([]);
        const overflow = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
        expect(overflow, "the page scrolls sideways").toBeLessThanOrEqual(0);
        await page.screenshot({ path: `.data/logs/bodies-${light}-${width}.png`, fullPage: true });
      });

  test("is seen by a reader, who is offered no form", async () => {
    const { page } = reader;
    await page.goto(`/groups/${groupId}/bodies`);
    await page.getByRole("listitem").filter({ hasText: "OWN_Mantle_1" }).waitFor();
    expect(await page.getByRole("form", { name: "Add a body" }).count()).toBe(0);
    expect(await page.getByRole("link", { name: /new version/u }).count()).toBe(0);
    expect(await page.getByText(/\d+ of \d+ from memory/u).count()).toBeGreaterThan(0);
  });

  test("is chosen on a page, where what is from memory is marked, and calculates", async () => {
    const { page, hand } = ana;
    await page.setViewportSize({ width: 1440, height: 1000 });
    await page.emulateMedia({ colorScheme: "light" });
    await page.goto(`/groups/${groupId}`);
    await hand.press(page.getByRole("button", { name: "New page" }));
    await page.waitForURL(/\/pages\//u);
    await saved(page);
    await hand.press(page.getByRole("button", { name: "Change bodies" }));
    const dialog = page.getByRole("dialog", { name: "Bodies of this page" });
    const choice = dialog.getByRole("combobox").nth(1);
    await choice.locator("option", { hasText: "OWN_Mantle_1" }).waitFor({ state: "attached" });
    await choice.selectOption("CI_MS95");
    await dialog.getByText(/Its Si was written down from memory/u).waitFor();
    expect(await faults(page)).toEqual([]);
    await page.screenshot({ path: ".data/logs/bodies-dialog-memory.png" });
    await page.setViewportSize({ width: 390, height: 1000 });
    await page.screenshot({ path: ".data/logs/bodies-dialog-390.png" });
    await page.setViewportSize({ width: 1440, height: 1000 });
    await choice.selectOption("OWN_Mantle_1");
    await dialog.getByText("10.1000/xyz").waitFor();
    await hand.press(dialog.getByRole("button", { name: "Use these" }));
    await page.getByText("OWN_Mantle_1").first().waitFor();
    await hand.press(page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Formula/u }));
    await hand.type(page.getByRole("textbox", { name: "Formulas of f" }), "ratio = at(MgO / SiO2, BSE)");
    // 36/45, and the σ of SiO2 is not known.
    await block(page, "f").getByText("0.8", { exact: false }).first().waitFor();
    await saved(page);
  });

  test("stays what it was on the page after the group has made a new version", async () => {
    const { page, hand } = ana;
    const live = page.url();
    const frozen = await freeze(ana, "with our mantle");
    const snapshot = await frozen.getByRole("link", { name: /Open snapshot/u }).getAttribute("href");
    await page.goto(`/groups/${groupId}/bodies?edit=Mantle`);
    await hand.fill(form().getByLabel("Composition", { exact: true }), "MgO 18\nSiO2 45");
    await hand.press(form().getByRole("button", { name: "Save as OWN_Mantle_2" }));
    await page.getByRole("listitem").filter({ hasText: "OWN_Mantle_2" }).first().waitFor();
    await page.goto(live);
    await block(page, "f").getByText("0.8", { exact: false }).first().waitFor();
    await page.goto(snapshot ?? "");
    await page.getByText("OWN_Mantle_1").first().waitFor();
    await block(page, "f").getByText("0.8", { exact: false }).first().waitFor();
    await page.goto(live);
    await saved(page);
    await hand.press(page.getByRole("button", { name: "Change bodies" }));
    const dialog = page.getByRole("dialog", { name: "Bodies of this page" });
    await dialog.getByText("Your group has a newer version, OWN_Mantle_2.").waitFor();
    await dialog.getByRole("combobox").nth(1).selectOption("OWN_Mantle_2");
    await hand.press(dialog.getByRole("button", { name: "Use these" }));
    await block(page, "f").getByText("0.4", { exact: false }).first().waitFor();
    expect(failed).toBe("");
    expect([...ana.complaints, ...reader.complaints]).toEqual([]);
  });
});
