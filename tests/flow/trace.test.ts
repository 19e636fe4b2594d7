import type { Browser, Locator, Page } from "playwright-core";
import { afterAll, afterEach, beforeAll, describe, expect, test } from "vitest";
import { demoPassword, demoPeople } from "@/db/seed/people";
import { launchBrowser } from "../support/browser";
import { faults } from "./faults";
import { keyboard } from "./hands";
import { block, open, shoot, signIn, type Person } from "./people";

/** From a number to the measurement that dominates its σ, and on to the cell it was typed in. */
describe("a number leads to its measurement", () => {
  let browser: Browser;
  let lead: Person;
  let byPointer: Person;

  beforeAll(async () => {
    browser = await launchBrowser();
    [lead, byPointer] = await Promise.all([open(browser, "Demo lead", keyboard), open(browser, "Demo lead again")]);
    for (const person of [lead, byPointer]) await signIn(person, demoPeople.find(({ role }) => role === "lead")?.email ?? "", demoPassword);
    await pageNamed(lead, "Where chondrites and mantle meet", "line_rocks");
    await pageNamed(byPointer, "Three explanations for Earth’s magnesium", "refractory");
  });
  afterEach(async ({ task }) => {
    if (task.result?.state === "fail") await shoot(task.name, [lead, byPointer]);
  });
  afterAll(async () => {
    await browser.close();
  });

  async function pageNamed({ page }: Person, title: string, calculated: string): Promise<void> {
    await page.getByRole("link", { name: title }).first().click();
    await page.waitForURL(/\/pages\//u);
    await block(page, calculated)
      .getByRole("button", { name: /^Trace /u })
      .first()
      .waitFor();
  }

  function traceOf(page: Page, name: RegExp): Locator {
    return page.getByRole("region", { name });
  }

  /** The cell that is active in a table, as it is read out, and whether the table has the focus. */
  async function activeCell(page: Page, handle: string): Promise<{ text: string; row: string | null; isFocused: boolean; isSeen: boolean }> {
    const grid = block(page, handle).getByRole("grid");
    await grid.waitFor();
    await expect.poll(() => grid.getAttribute("aria-activedescendant")).not.toBeNull();
    const cell = page.locator(`[id="${(await grid.getAttribute("aria-activedescendant")) ?? ""}"]`);
    await expect.poll(() => cell.evaluate((element) => element.classList.contains("grid-cell-active"))).toBe(true);
    await page.waitForTimeout(600);
    return {
      text: await cell.innerText(),
      row: await cell.locator("xpath=..").getAttribute("aria-rowindex"),
      isFocused: await grid.evaluate((element) => document.activeElement === element),
      isSeen: await cell.evaluate((element) => {
        const box = element.getBoundingClientRect();
        return box.top >= 0 && box.bottom <= window.innerHeight;
      }),
    };
  }

  test("by keyboard: from a crossing to the measurement that brings most, into its folded table", async () => {
    const { page, hand } = lead;
    await hand.press(block(page, "rocks").getByRole("button", { name: "Fold to its heads" }));
    await block(page, "rocks").getByRole("button", { name: "Unfold the table" }).waitFor();
    await hand.press(block(page, "line_rocks").getByRole("button", { name: /^Trace the crossing across/u }));
    const trace = traceOf(page, /^Trace of crossing, across/u);
    await expect
      .poll(() => trace.innerText(), { timeout: 15_000 })
      .toMatch(/\d+ % of the variance comes from scatter of the samples of line_\w+ beyond their errors/u);
    const said = /Of the measurements, (?<column>\w+) of (?<sample>[\w-]+), 1σ [\d.]+\swt% brings most/u.exec(await trace.innerText())?.groups;
    expect(said).toMatchObject({ sample: expect.stringMatching(/^VR-\d+$/u) as string });
    await hand.press(trace.getByRole("button", { name: `Go to the cell ${said?.["column"] ?? ""} of ${said?.["sample"] ?? ""}` }));
    const cell = await activeCell(page, "rocks");
    expect(cell).toMatchObject({ isFocused: true, isSeen: true });
    expect(cell.row).toBe(String(Number(said?.["sample"]?.slice(3)) + 1));
    await expect
      .poll(() => block(page, "rocks").getByRole("toolbar").innerText())
      .toMatch(new RegExp(`${said?.["sample"] ?? ""}, ${said?.["column"] ?? ""}`, "u"));
  });

  test("by keyboard: from the cell on to the numbers it goes into, and their trace", async () => {
    const { page, hand } = lead;
    await hand.press(block(page, "all").getByRole("button", { name: "Unfold the table" }));
    await hand.press(block(page, "all").getByRole("grid"));
    await hand.choose(block(page, "all").getByRole("button", { name: "Where it is used" }), /^mg_si /u);
    const trace = traceOf(page, /^Trace of mg_si, SK-01/u);
    await expect.poll(() => trace.innerText(), { timeout: 15_000 }).toMatch(/\d+ % of the variance comes from \w+ of SK-01, 1σ/u);
    await page.keyboard.press("Escape");
    await trace.waitFor({ state: "detached" });
  });

  test("the samples of a fit are folded, the small ones summed in a line that opens", async () => {
    const { page, hand } = lead;
    await hand.press(block(page, "line_ch").getByRole("button", { name: /^Trace the slope/u }));
    const trace = traceOf(page, /^Trace of slope/u);
    const rest = trace.getByRole("button", { name: /^\d+ more, (?:\d+|under 1) % together$/u });
    await rest.waitFor();
    const shown = await trace.getByRole("listitem").count();
    expect(shown).toBeLessThan(24);
    await hand.press(rest);
    await expect.poll(() => trace.getByRole("listitem").count()).toBeGreaterThan(shown + 5);
    const cells = trace.getByRole("button", { name: /^Go to row \d+/u });
    const before = await cells.count();
    await hand.press(trace.getByRole("button", { name: /^SK-\d+$/u, expanded: false }).first());
    await expect.poll(() => cells.count()).toBeGreaterThan(before);
    await page.keyboard.press("Escape");
  });

  test("by pointer: from a budget's amount to the cell of an inclusion", async () => {
    const { page } = byPointer;
    await block(page, "refractory")
      .getByRole("button", { name: /^Trace the solved amount/u })
      .click();
    const trace = traceOf(page, /^Trace of solved amount/u);
    await expect.poll(() => trace.innerText(), { timeout: 15_000 }).toMatch(/% of the variance comes from Al2O3 of BSE_\w+, 1σ [\d.]+\swt%/u);
    await trace.getByRole("button", { name: "Go to the cell Al2O3 of Type B" }).click();
    const cell = await activeCell(page, "inclusions");
    expect(cell).toMatchObject({ isFocused: true, isSeen: true, row: "2" });
    await expect.poll(() => block(page, "inclusions").getByRole("toolbar").innerText()).toMatch(/Type B, Al2O3/u);
  });

  test("by pointer: every side of a report, and what was left behind", async () => {
    const { page } = byPointer;
    const budget = block(page, "core");
    await budget.getByRole("button", { name: /^Trace the miss of Al \/ Si/u }).click();
    await expect.poll(() => traceOf(page, /^Trace of Al\/Si, miss/u).innerText(), { timeout: 15_000 }).toMatch(/over the σ of this difference/u);
    await budget.getByText("Left behind:").click();
    await budget.getByRole("button", { name: /^Trace the mass left behind/u }).click();
    await expect.poll(() => traceOf(page, /^Trace of mass left behind/u).innerText(), { timeout: 15_000 }).toMatch(/variance comes from/u);
  });

  for (const light of ["light", "dark"] as const)
    for (const width of [1440, 390])
      test(`axe finds nothing serious in an open trace, ${light}, ${width} px wide`, async () => {
        const { page } = lead;
        await page.setViewportSize({ width, height: 1000 });
        await page.emulateMedia({ colorScheme: light });
        await block(page, "line_rocks")
          .getByRole("button", { name: /^Trace the crossing across/u })
          .click();
        await traceOf(page, /^Trace of crossing, across/u)
          .getByText(/brings most/u)
          .first()
          .waitFor();
        expect(await faults(page)).toEqual([]);
      });

  test("nobody's browser complained", () => {
    expect([...lead.complaints, ...byPointer.complaints]).toEqual([]);
  });
});
