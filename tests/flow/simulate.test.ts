import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, describe, expect, test } from "vitest";
import { launchBrowser } from "../support/browser";
import { faults } from "./faults";
import { block, open, saved, shoot, signUp, type Person } from "./people";

/** Invented: 400 samples that are all alike, magnesium all but exact and silicon with a σ of 30 %. */
const SAMPLES = 400;
const table = [
  "Sample,Mg (wt%),1s Mg,Si (wt%),1s Si",
  ...Array.from({ length: SAMPLES }, (_, i) => `TH-${String(i + 1).padStart(3, "0")},20.00,0.01,10.00,3.00`),
].join("\n");

/** A ratio with a weak denominator and a mass balance, to first order and simulated, side by side. */
describe("a block is simulated", () => {
  let browser: Browser;
  let ana: Person;

  beforeAll(async () => {
    browser = await launchBrowser();
    ana = await open(browser, "Ines Vastergaard");
    const groupId = await signUp(ana, "Thin Denominators");
    const { page } = ana;
    await page.goto(`/groups/${groupId}`);
    await page.getByRole("button", { name: "New page" }).click();
    await page.waitForURL(/\/pages\//u);
    await page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }).click();
    await page.getByLabel("Choose a table to upload").setInputFiles({ name: "thin.csv", mimeType: "text/csv", buffer: Buffer.from(table) });
    const dialog = page.getByRole("dialog");
    await dialog.getByRole("button", { name: "Save this table" }).click();
    await dialog.waitFor({ state: "detached" });
    await block(page, "d").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Formula/u }).click();
    await ana.hand.type(page.getByRole("textbox", { name: "Formulas of f" }), "mg_si = Mg / Si");
    await block(page, "f").getByText("median σ 0.6").waitFor();
  });
  afterEach(async ({ task }) => {
    if (task.result?.state === "fail") await shoot(`simulate ${task.name}`, [ana]);
  });
  afterAll(async () => {
    await browser.close();
  });

  const simulated = (handle: string) => block(ana.page, handle).getByText(/^simulated: /u);

  test("a line with a denominator of 30 % has what is simulated under what is of first order", async () => {
    const { page } = ana;
    const lines = block(page, "f");
    await lines.getByRole("button", { name: "Simulate", exact: true }).click();
    await simulated("f").waitFor();
    // First order: 20/10 × 0.3 = 0.6. The reciprocal of a normal number falls from one side of its middle to the other, so that its quantiles
    // are those of the denominator at ± 1σ: half of 20/7 − 20/13 is 0.659.
    expect(await simulated("f").innerText()).toMatch(/^simulated: median half-width 0\.6[56] \(68 %\)$/u);
    // Of 400 samples, each drawn apart, the warning shows the one that is farthest from that.
    await lines.getByText(/first order says 2\.0 ± 0\.6; simulation \(2,000 draws, seed 1\) says 68 % within 1\.[3-7] to [23]\.\d/u).waitFor();
    expect(await lines.getByLabel("draws").inputValue()).toBe("2000");
    expect(await faults(page)).toEqual([]);
  });

  test("draws that nobody can have are refused in words", async () => {
    const lines = block(ana.page, "f");
    await ana.hand.fill(lines.getByLabel("draws"), "10", true);
    await lines.getByRole("alert").filter({ hasText: /200/u }).waitFor();
    await ana.hand.fill(lines.getByLabel("draws"), "many", true);
    await lines.getByText("Write a whole number.").waitFor();
    expect(await lines.getByLabel("draws").inputValue()).toBe("2000");
  });

  test("a long one shows how far it is, is stopped, goes on, and gives way to a shorter one", async () => {
    const { page } = ana;
    const lines = block(page, "f");
    await ana.hand.fill(lines.getByLabel("draws"), "50000", true);
    const bar = lines.getByRole("progressbar");
    await expect.poll(async () => Number(await bar.getAttribute("aria-valuenow")), { timeout: 15_000 }).toBeGreaterThan(0);
    expect(await faults(page)).toEqual([]);
    await lines.getByRole("button", { name: "Stop", exact: true }).click();
    const stopped = lines.getByText(/The simulation was stopped at \d+ %/u);
    await stopped.waitFor();
    // What stands there is of first order, and stays so.
    expect(await simulated("f").count()).toBe(0);
    await lines.getByText("median σ 0.6").waitFor();
    const said = await stopped.innerText();
    await page.waitForTimeout(400);
    expect(await stopped.innerText()).toBe(said);
    await lines.getByRole("button", { name: "Go on", exact: true }).click();
    await bar.waitFor();
    await ana.hand.fill(lines.getByLabel("draws"), "500", true);
    await lines.getByText(/simulation \(500 draws, seed 1\) says/u).waitFor();
    await bar.waitFor({ state: "detached" });
    await ana.hand.fill(lines.getByLabel("seed"), "7", true);
    await lines.getByText(/simulation \(500 draws, seed 7\) says/u).waitFor();
  });

  test("a budget has the range of its amount, and of each ratio that it reports", async () => {
    const { page, hand } = ana;
    await hand.choose(block(page, "f").getByRole("button", { name: "Add below" }), /Budget/u);
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
    await budget.getByText(/wt% Si in the metal, 1σ/u).waitFor();
    await budget.getByRole("button", { name: "Simulate", exact: true }).click();
    await expect.poll(() => simulated("b").count(), { timeout: 15_000 }).toBe(3);
    for (const text of await simulated("b").allInnerTexts())
      expect(text).toMatch(/68 % within [\d.]+ to [\d.]+, 95 % within [\d.]+ to [\d.]+.*, median [\d.]+$/u);
    // The amount of first order lies within the simulated range, which the edge at 0 makes uneven.
    const first = Number(/\d+(?:\.\d+)?/u.exec(await budget.getByRole("button", { name: /^Trace the solved amount/u }).innerText())?.[0]);
    const [, from = "", to = ""] = /within ([\d.]+) to ([\d.]+)/u.exec(await simulated("b").first().innerText()) ?? [];
    expect(first).toBeGreaterThan(Number(from));
    expect(first).toBeLessThan(Number(to));
    expect(await faults(page)).toEqual([]);
    await budget.getByRole("button", { name: "Do not simulate" }).click();
    await budget.getByRole("button", { name: "Simulate", exact: true }).waitFor();
    await saved(page);
  });

  test("fits a phone", async () => {
    const { page } = ana;
    await page.setViewportSize({ width: 390, height: 1000 });
    await page.emulateMedia({ colorScheme: "dark" });
    await simulated("f").waitFor();
    expect(await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBeLessThanOrEqual(0);
    expect(await faults(page)).toEqual([]);
    expect(ana.complaints).toEqual([]);
  });
});
