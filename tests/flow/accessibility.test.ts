import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { demoPassword, demoPeople } from "@/db/seed/people";
import { launchBrowser } from "../support/browser";
import { faults } from "./faults";
import { analyses, freeze, open, readingLink, signIn, type Person } from "./people";

describe("axe finds nothing serious or critical", () => {
  let browser: Browser;
  let lead: Person;
  let pagePath = "";
  let groupPath = "";

  beforeAll(async () => {
    browser = await launchBrowser();
    lead = await open(browser, "Demo lead");
  });
  afterAll(async () => {
    await browser.close();
  });

  for (const path of ["/sign-in", "/sign-up", "/mail", "/read/no-such-link", "/nowhere-at-all"]) {
    test(`signed out, ${path}`, async () => {
      await lead.page.goto(path);
      await lead.page.getByRole("heading", { level: 1 }).waitFor();
      expect(await faults(lead.page)).toEqual([]);
    });
  }

  test("signed in, the group's home", async () => {
    const noor = demoPeople.find(({ role }) => role === "lead");
    await signIn(lead, noor?.email ?? "", demoPassword);
    await lead.page.getByRole("heading", { level: 1 }).waitFor();
    groupPath = new URL(lead.page.url()).pathname;
    expect(await faults(lead.page)).toEqual([]);
  });

  for (const path of ["/start", "/account", "people"]) {
    test(`signed in, ${path}`, async () => {
      await lead.page.goto(path.startsWith("/") ? path : `${groupPath}/${path}`);
      await lead.page.getByRole("heading", { level: 1 }).waitFor();
      expect(await faults(lead.page)).toEqual([]);
    });
  }

  for (const light of ["light", "dark"] as const) {
    for (const width of [1440, 1024, 390]) {
      test(`a live page, ${light}, ${width} px wide`, async () => {
        const { page } = lead;
        await page.setViewportSize({ width, height: 1000 });
        await page.emulateMedia({ colorScheme: light });
        if (pagePath === "") {
          await page.goto(groupPath);
          await page.locator('a[href^="/pages/"]').first().click();
          await page.waitForURL(/\/pages\//u);
          pagePath = new URL(page.url()).pathname;
        } else await page.goto(pagePath);
        await page.locator(".js-plotly-plot").first().waitFor();
        await page
          .getByText(/^Saved/u)
          .first()
          .waitFor();
        expect(await faults(page)).toEqual([]);
        const overflow = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
        expect(overflow, "the page scrolls sideways").toBeLessThanOrEqual(0);
      });
    }
  }

  for (const [name, opens] of [
    ["Freeze", "Freeze this page"],
    ["Reading link", "Reading links"],
    ["Change bodies", "Bodies"],
    [/^Bin/u, "Bin"],
    ["Keyboard shortcuts", "Keyboard shortcuts"],
  ] as const) {
    test(`the dialog ${opens}`, async () => {
      const { page } = lead;
      await page.setViewportSize({ width: 1440, height: 1000 });
      await page.goto(pagePath);
      await page
        .getByText(/^Saved/u)
        .first()
        .waitFor();
      await page
        .getByRole("button", { name, exact: typeof name === "string" })
        .first()
        .click();
      await page.getByRole("dialog").waitFor();
      expect(await faults(page)).toEqual([]);
      await page.keyboard.press("Escape");
      await page.getByRole("dialog").waitFor({ state: "detached" });
    });
  }

  test("an import dialog", async () => {
    const { page } = lead;
    await page.goto(groupPath);
    await page.getByRole("button", { name: "New page" }).click();
    await page.waitForURL(/\/pages\//u);
    await page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }).click();
    await page.getByLabel("Choose a table to upload").setInputFiles(analyses);
    await page.getByRole("dialog").getByText("28 rows, 8 columns").waitFor();
    expect(await faults(page)).toEqual([]);
  });

  test("a snapshot, a reading link's door, and what is read behind it", async () => {
    const { page } = lead;
    await page.goto(pagePath);
    await page
      .getByText(/^Saved/u)
      .first()
      .waitFor();
    const frozen = await freeze(lead, "To be looked at");
    const snapshot = (await frozen.getByRole("link", { name: /^Open snapshot/u }).getAttribute("href")) ?? "";
    const address = await readingLink(lead, frozen);
    const guest = await open(browser, "Guest");
    const found: Record<string, string[]> = {};
    for (const [who, path] of [
      [lead, snapshot],
      [guest, address],
    ] as const) {
      await who.page.goto(path);
      if (who === guest) {
        found["door"] = await faults(guest.page);
        await guest.page.getByRole("button", { name: "Read it" }).click();
      }
      for (const width of [1440, 390]) {
        await who.page.setViewportSize({ width, height: 1000 });
        await who.page.locator(".js-plotly-plot").first().waitFor();
        found[`${who.name} ${width}`] = await faults(who.page);
      }
    }
    expect(Object.values(found).flat(), JSON.stringify(found)).toEqual([]);
    await guest.context.close();
  });
});
