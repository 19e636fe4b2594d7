import type { Browser, Locator, Page } from "playwright-core";
import { afterAll, afterEach, beforeAll, describe, expect, test } from "vitest";
import { launchBrowser } from "../support/browser";
import { block, invite, join, open, saved, shoot, signUp, type Person } from "./people";

/** Invented analyses, as a spreadsheet puts them on the clipboard: tabs, quotes round a cell that has some, one cell empty. */
const copied = [
  ["Sample", "Lithology", "SiO2 (wt%)", "2s SiO2", "Al2O3 (wt%)", "MgO (wt%)", "Ni"],
  ["SK-01", "lherzolite", "44.9", "0.4", "3.21", "39.8", "2010"],
  ["SK-02", "lherzolite", "45.2", "0.4", "3.64", "38.1", "1930"],
  ["SK-03", "lherzolite", "44.6", "0.4", "2.87", "40.6", "2090"],
  ["SK-04", "harzburgite", "43.9", "0.4", "1.12", "45.1", "2340"],
  ['"SK-05 ""b"""', "harzburgite", "43.4", "0.4", "0.88", "45.9", ""],
  ["SK-06", "harzburgite", "44.1", "0.4", "1.35", "44.4", "2290"],
];
const SILICA = 2;
const ALUMINA = 3;
const MAGNESIA = 4;
/** A stacked table says after the class where each row came from. */
const STACKED = 1;
/** So near by, two places on the screen count as one. */
const DRAG_STEPS = 8;

/** What people do in tables and with blocks, two at once: whatever one of them decides, the other sees with name and reason. */
describe("two people work at tables", () => {
  const group = "Skarvnes Petrology";
  let browser: Browser;
  let lead: Person;
  let analyst: Person;
  let groupId = "";
  let pageId = "";

  beforeAll(async () => {
    browser = await launchBrowser();
    [lead, analyst] = await Promise.all([open(browser, "Maren Oduya"), open(browser, "Tobias Lindqvist")]);
    groupId = await signUp(lead, group);
    await invite(lead, groupId, analyst, "analyst");
    await join(analyst, group);
    await lead.page.goto(`/groups/${groupId}`);
    await lead.page.getByRole("button", { name: "New page" }).click();
    await lead.page.waitForURL(/\/pages\//u);
    pageId = new URL(lead.page.url()).pathname.split("/")[2] ?? "";
    await analyst.page.goto(`/pages/${pageId}`);
  });
  afterEach(async ({ task }) => {
    if (task.result?.state === "fail") await shoot(`table ${task.name}`, [lead, analyst]);
  });
  afterAll(async () => {
    await browser.close();
  });

  const both = () => [lead.page, analyst.page];
  const row = (page: Page, handle: string, sample: string) => block(page, handle).getByRole("row").filter({ hasText: sample });
  const cell = (page: Page, handle: string, sample: string, column: number) => row(page, handle, sample).getByRole("gridcell").nth(column);
  const notes = (page: Page, about: string) => page.getByRole("complementary", { name: `Notes on ${about}` });
  const action = (page: Page, handle: string, name: string) =>
    block(page, handle)
      .getByRole("toolbar", { name: /^Actions on/u })
      .getByRole("button", { name, exact: true });

  /** Waits until both see a text at a place. */
  async function bothRead(place: (page: Page) => Locator, text: RegExp): Promise<void> {
    for (const page of both())
      await expect
        .poll(async () => (await place(page).allInnerTexts()).join("\n"), { timeout: 15_000, message: `at ${page.url()}, ${String(place(page))}` })
        .toMatch(text);
  }
  async function bothSeeNothingOf(place: (page: Page) => Locator): Promise<void> {
    for (const page of both()) await expect.poll(() => place(page).count(), { timeout: 15_000 }).toBe(0);
  }
  /** Handles of the blocks, as they stand on the page. */
  const order = (page: Page) => page.locator("section.block").evaluateAll((blocks) => blocks.map((one) => one.id).join(" "));
  async function bothHaveOrder(handles: string): Promise<void> {
    for (const page of both()) await expect.poll(() => order(page), { timeout: 15_000 }).toBe(handles);
  }
  /** Answers a question that wants a reason. */
  async function giveReason(page: Page, act: string, reason: string): Promise<void> {
    const dialog = page.getByRole("dialog");
    await dialog.getByLabel("Reason").fill(reason);
    await dialog.getByRole("button", { name: act, exact: true }).click();
    await dialog.waitFor({ state: "detached" });
  }
  async function more(page: Page, handle: string, item: string): Promise<void> {
    await block(page, handle)
      .getByRole("button", { name: /^More for/u })
      .click();
    await page.getByRole("menuitem", { name: item }).click();
  }

  test("the lead pastes a table from a spreadsheet and maps it", async () => {
    const { page, context } = lead;
    await context.grantPermissions(["clipboard-read", "clipboard-write"]);
    await page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }).click();
    await page.evaluate((text) => navigator.clipboard.writeText(text), copied.map((cells) => cells.join("\t")).join("\n"));
    await block(page, "d").getByText("This table is empty.").click();
    await page.keyboard.press("Control+V");
    const dialog = page.getByRole("dialog", { name: /^How pasted-.*\.tsv is read/u });
    await dialog.getByText("6 rows, 7 columns").waitFor();
    await dialog.getByLabel("Role of Lithology").selectOption({ label: "class" });
    await dialog.getByLabel("Role of 2s SiO2").selectOption({ label: "uncertainty of" });
    await dialog.getByLabel("2s SiO2 is the uncertainty of").selectOption({ label: "SiO2" });
    await dialog.getByLabel("2s SiO2 is given as").selectOption({ label: "2σ" });
    await dialog.getByLabel("Role of Ni").selectOption({ label: "quantity" });
    await dialog.getByLabel("Unit of Ni").selectOption({ label: "µg/g" });
    await dialog.getByText('SK-05 "b"').first().waitFor();
    await dialog.getByRole("button", { name: "Save this table" }).click();
    await dialog.waitFor({ state: "detached" });
    await bothRead((p) => cell(p, "d", "SK-01", SILICA), /44\.9.*\(2\)/su);
    await bothRead((p) => row(p, "d", "SK-05"), /SK-05 "b"/u);
    await bothRead((p) => cell(p, "d", "SK-05", 5), /–/u);
    await bothRead((p) => block(p, "d"), /source gives 2σ, halved on reading/u);
  });

  test("the analyst types a table by hand", async () => {
    const { page } = analyst;
    await block(page, "d").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Data/u }).click();
    const empty = block(page, "d2");
    await empty.getByRole("button", { name: "Type" }).click();
    await empty.getByLabel("Columns, parted by commas, units in brackets").fill("Sample, Class, SiO2 (wt%), Al2O3 (wt%), MgO (wt%)");
    await empty.getByRole("button", { name: "Start the table" }).click();
    await empty.getByRole("grid").focus();
    await page.keyboard.press("ArrowDown");
    const rows = [
      ["SK-11", "dunite", "45.0 ± 0.4", "<0.05", "48.9(5)"],
      ["SK-12", "dunite", "40,6", "0.21", "49.3"],
    ];
    for (const cells of rows) {
      for (const [c, text] of cells.entries()) {
        await page.keyboard.type(text);
        await page.keyboard.press(c < cells.length - 1 ? "Tab" : "Enter");
      }
      await page.keyboard.press("Home");
    }
    await bothRead((p) => cell(p, "d2", "SK-11", SILICA), /45\.0.*\(4\)/su);
    await bothRead((p) => cell(p, "d2", "SK-11", ALUMINA), /<0\.05/u);
    await bothRead((p) => cell(p, "d2", "SK-11", MAGNESIA), /48\.9.*\(5\)/su);
    await bothRead((p) => cell(p, "d2", "SK-12", SILICA), /40\.6/u);
    await bothRead((p) => block(p, "d2"), /< below detection, never 0/u);
  });

  test("a comma that can be read in two ways is asked about at the cell", async () => {
    const { page } = analyst;
    await cell(page, "d2", "SK-12", MAGNESIA).click();
    await page.keyboard.press("Enter");
    await page.getByLabel("MgO, row 2").fill("1,234");
    await page.keyboard.press("Enter");
    await page.getByRole("alert").filter({ hasText: "can be read in two ways" }).waitFor();
    await page.keyboard.press("Escape");
    await expect.poll(() => cell(page, "d2", "SK-12", MAGNESIA).innerText()).toMatch(/49\.3/u);
  });

  test("rows and columns are added, emptied and deleted", async () => {
    const { page } = analyst;
    const table = block(page, "d2");
    await table.getByRole("button", { name: "Add a column" }).click();
    await page.getByLabel("Name, unit in brackets").fill("CaO (wt%)");
    await page.getByRole("dialog").getByRole("button", { name: "Add it" }).click();
    await page.getByRole("dialog").waitFor({ state: "detached" });
    await table.getByRole("columnheader", { name: /CaO/u }).waitFor();
    // A piece of a spreadsheet, pasted at the first free row.
    await page.context().grantPermissions(["clipboard-read", "clipboard-write"]);
    await page.evaluate(() => navigator.clipboard.writeText("SK-13\tdunite\t40.1\t0.18\t49.9\t0.12\nSK-14\tdunite\t40.4\t0.33\t49.0\t0.19\n"));
    await table.locator('[data-row="2"] [data-column="0"]').click();
    await page.keyboard.press("Control+V");
    await bothRead((p) => cell(p, "d2", "SK-14", 5), /0\.19/u);
    await cell(page, "d2", "SK-14", 5).click();
    await page.keyboard.press("Delete");
    await bothRead((p) => cell(p, "d2", "SK-14", 5), /–/u);
    await action(page, "d2", "Delete the row").click();
    await bothSeeNothingOf((p) => row(p, "d2", "SK-14"));
    await table.getByRole("button", { name: "Column CaO: what can be done" }).click();
    await page.getByRole("menuitem", { name: "Delete the column" }).click();
    await bothSeeNothingOf((p) => block(p, "d2").getByRole("columnheader", { name: /CaO/u }));
    await bothRead((p) => row(p, "d2", "SK-13"), /40\.1/u);
  });

  test("two people type into one table at once, and each keeps the row they are in", async () => {
    await block(analyst.page, "d2").locator('[data-row="3"] [data-column="0"]').click();
    await analyst.page.keyboard.type("SK-2");
    await block(lead.page, "d2").locator('[data-row="3"] [data-column="0"]').click();
    await lead.page.keyboard.type("SK-15");
    await lead.page.keyboard.press("Enter");
    await row(analyst.page, "d2", "SK-15").waitFor();
    await analyst.page.keyboard.type("0");
    await analyst.page.keyboard.press("Tab");
    await bothRead((p) => row(p, "d2", "SK-20"), /SK-20/u);
    await bothRead((p) => row(p, "d2", "SK-15"), /SK-15/u);
    await cell(lead.page, "d2", "SK-15", 0).click();
    await action(lead.page, "d2", "Delete the row").click();
    await bothSeeNothingOf((p) => row(p, "d2", "SK-15"));
    await action(analyst.page, "d2", "Delete the row").click();
    await bothSeeNothingOf((p) => row(p, "d2", "SK-20"));
    await bothRead((p) => block(p, "d2"), /typed by hand, 3 rows/u);
  });

  test("the lead stacks the two tables", async () => {
    const { page } = lead;
    await block(page, "d2").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Data/u }).click();
    await block(page, "d3").getByRole("button", { name: "Stack" }).click();
    const dialog = page.getByRole("dialog", { name: "Stack tables" });
    for (const box of await dialog.getByRole("checkbox").all()) await box.check();
    await dialog.getByRole("button", { name: "Stack d, d2" }).click();
    await bothRead((p) => block(p, "d3"), /stacks d, d2, 9 rows/u);
    await bothRead((p) => row(p, "d3", "SK-11"), /<0\.05/u);
    await cell(page, "d3", "SK-12", SILICA + STACKED).click();
    await action(page, "d3", "Go to its source in d2").click();
    await expect.poll(() => cell(page, "d2", "SK-12", SILICA).getAttribute("class")).toMatch(/grid-cell-active/u);
  });

  test("the lead amends a value with a reason, and takes it back", async () => {
    const { page } = lead;
    await cell(page, "d", "SK-03", ALUMINA).click();
    await action(page, "d", "Amend").click();
    const dialog = page.getByRole("dialog", { name: "Amend Al2O3 of SK-03" });
    await dialog.getByLabel("Value").fill("2.78");
    await dialog.getByRole("button", { name: "Amend", exact: true }).click();
    await dialog.getByText("A reason is needed").waitFor();
    // What is pressed in a dialog is not meant for the block it belongs to.
    await dialog.getByLabel("Value").press("Alt+ArrowDown");
    await giveReason(page, "Amend", "Digits swapped, the laboratory's sheet has 2.78");
    await bothRead((p) => cell(p, "d", "SK-03", ALUMINA), /2\.87.*2\.78/su);
    await bothRead(
      (p) => notes(p, "pasted-"),
      /Amended SK-03, Al2O3, from 2\.87 to 2\.78.*Digits swapped, the laboratory's sheet has 2\.78\. Maren Oduya, \d/su,
    );
    await bothRead((p) => cell(p, "d3", "SK-03", ALUMINA + STACKED), /2\.78/u);
    await cell(page, "d", "SK-03", ALUMINA).click();
    await action(page, "d", "Take the amendment back").click();
    await bothSeeNothingOf((p) => notes(p, "pasted-").getByText("Amended"));
    await bothHaveOrder("d d2 d3");
    await bothRead((p) => cell(p, "d", "SK-03", ALUMINA), /^(?!.*2\.78).*2\.87/su);
  });

  test("a sample and a single value are set aside, each with a reason", async () => {
    await cell(analyst.page, "d", "SK-06", 0).click();
    await action(analyst.page, "d", "Set the sample aside").click();
    await giveReason(analyst.page, "Set aside", "Serpentinised");
    await bothRead((p) => notes(p, "pasted-"), /Set aside SK-06\s+Serpentinised\. Tobias Lindqvist, \d/u);
    await bothRead((p) => block(p, "d").locator(".block-state"), /1 set aside/u);
    await cell(lead.page, "d", "SK-04", MAGNESIA).click();
    await action(lead.page, "d", "Set this value aside").click();
    await giveReason(lead.page, "Set aside", "Drift of the magnesium line");
    await bothRead((p) => cell(p, "d", "SK-04", MAGNESIA), /\[45\.1/u);
    await bothRead((p) => notes(p, "pasted-"), /SK-04, MgO only\s+Drift of the magnesium line\. Maren Oduya, \d/u);
  });

  test("a σ is assumed for a column, with who and why beside it", async () => {
    const { page } = analyst;
    await block(page, "d").getByRole("button", { name: "Column MgO: what can be done" }).click();
    await page.getByRole("menuitem", { name: "Assume a σ" }).click();
    const dialog = page.getByRole("dialog", { name: "Assume a σ for MgO" });
    await dialog.getByLabel("1σ").fill("0");
    await dialog.getByLabel("Reason").fill("XRF, as the laboratory repeats it");
    await dialog.getByRole("button", { name: "Assume it" }).click();
    await dialog.getByText("Write a number above 0").waitFor();
    await dialog.getByLabel("1σ").fill("1");
    await giveReason(page, "Assume it", "XRF, as the laboratory repeats it");
    await bothRead((p) => block(p, "d"), /° MgO: σ assumed 1 %\. XRF, as the laboratory repeats it\. Tobias Lindqvist, \d/u);
    await bothRead((p) => cell(p, "d", "SK-01", MAGNESIA), /39\.8.*\(4\).*°/su);
  });

  test("undo takes back one's own edit and leaves the other's", async () => {
    await cell(lead.page, "d", "SK-01", ALUMINA).click();
    await lead.page.keyboard.press("Enter");
    await lead.page.getByRole("dialog").getByLabel("Value").fill("3.12");
    await giveReason(lead.page, "Amend", "Read again from the sheet");
    await bothRead((p) => notes(p, "pasted-"), /SK-01, Al2O3, from 3\.21 to 3\.12/u);
    await cell(analyst.page, "d", "SK-02", SILICA).click();
    await action(analyst.page, "d", "Set this value aside").click();
    await giveReason(analyst.page, "Set aside", "Bubble in the bead");
    await bothRead((p) => notes(p, "pasted-"), /Bubble in the bead/u);
    await lead.page.keyboard.press("Control+Z");
    await bothSeeNothingOf((p) => notes(p, "pasted-").getByText("SK-01, Al2O3"));
    await bothRead((p) => notes(p, "pasted-"), /(?=.*Drift of the magnesium line)(?=.*Serpentinised).*Bubble in the bead/su);
    await lead.page.keyboard.press("Control+Shift+Z");
    await bothRead((p) => notes(p, "pasted-"), /SK-01, Al2O3, from 3\.21 to 3\.12/u);
    await analyst.page.keyboard.press("Control+Z");
    await bothSeeNothingOf((p) => notes(p, "pasted-").getByText("Bubble in the bead"));
    await bothRead((p) => notes(p, "pasted-"), /SK-01, Al2O3, from 3\.21 to 3\.12/u);
  });

  test("a formula reads a table by its handle, and is rewritten when the handle changes", async () => {
    const { page } = lead;
    await block(page, "d3").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Formula/u }).click();
    const formulas = (p: Page) => p.getByRole("textbox", { name: "Formulas of f" });
    await formulas(page).click();
    await page.keyboard.type("mean_mg = mean(d2.MgO)");
    await page.keyboard.press("Escape");
    await bothRead((p) => block(p, "f"), /mean_mg\s+49\.\d/u);
    await more(page, "d2", "Change its handle");
    await page.keyboard.type("typed");
    await page.keyboard.press("Enter");
    await bothRead(formulas, /mean_mg = mean\(typed\.MgO\)/u);
    await bothRead((p) => block(p, "f"), /mean_mg\s+49\.\d/u);
    await bothRead((p) => block(p, "d3"), /stacks d, typed, 9 rows/u);
    await more(page, "typed", "Change its handle");
    await page.keyboard.type("f");
    await page.keyboard.press("Enter");
    await page.getByRole("alert").filter({ hasText: "Another block is called f already" }).waitFor();
    await bothHaveOrder("d typed d3 f");
  });

  test("a number of a formula line is traced, and the trace closed", async () => {
    const { page } = lead;
    const number = block(page, "f").getByRole("button", { name: /^Trace mean_mg/u });
    await number.click();
    const trace = page.getByRole("region", { name: "Trace of mean_mg" });
    await expect.poll(() => trace.innerText(), { timeout: 15_000 }).toMatch(/typed.*MgO|MgO/su);
    await page.keyboard.press("Escape");
    await trace.waitFor({ state: "detached" });
    expect(await number.evaluate((button) => document.activeElement === button)).toBe(true);
    await number.press("Enter");
    await trace.getByRole("button", { name: "Close" }).click();
    await trace.waitFor({ state: "detached" });
  });

  test("a note quotes live values, and says in words which name it does not know", async () => {
    const { page } = analyst;
    await block(page, "f").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Note/u }).click();
    await block(page, "n").getByText("Write here.").click();
    await page.keyboard.type("The dunites have {{f.mean_mg}} of magnesia, and {{f.mean_fe}} of iron.");
    await page.keyboard.press("Escape");
    await bothRead((p) => block(p, "n"), /The dunites have 49\.\d\S*\swt% of magnesia, and \{\{f\.mean_fe\}\} of iron/u);
    await bothRead((p) => block(p, "n"), /1 value not found/u);
    await bothRead((p) => block(p, "n"), /f has nothing called "mean_fe"\. It has mean_mg\./u);
    const before = await block(page, "n").innerText();
    await cell(lead.page, "typed", "SK-13", MAGNESIA).click();
    await lead.page.keyboard.type("58.9");
    await lead.page.keyboard.press("Enter");
    await bothRead((p) => block(p, "n"), /The dunites have 5\d\.\d/u);
    expect(before).not.toBe(await block(page, "n").innerText());
    await cell(lead.page, "typed", "SK-13", MAGNESIA).click();
    await lead.page.keyboard.press("Control+Z");
    await bothRead((p) => block(p, "n"), /The dunites have 49\.\d/u);
  });

  test("a block is moved by Alt and an arrow, and by dragging", async () => {
    const { page } = lead;
    await bothHaveOrder("d typed d3 f n");
    await block(page, "f")
      .getByRole("button", { name: /^Trace mean_mg/u })
      .focus();
    await page.keyboard.press("Alt+ArrowDown");
    await bothHaveOrder("d typed d3 n f");
    await expect.poll(() => page.evaluate(() => document.activeElement?.closest("section.block")?.id)).toBe("f");
    await page.keyboard.press("Alt+ArrowUp");
    await bothHaveOrder("d typed d3 f n");
    // By pointer, from the last place to before the formula.
    const handle = block(page, "n").getByRole("button", { name: /^Move .*drag/u });
    await block(page, "n").scrollIntoViewIfNeeded();
    await block(page, "n").hover();
    const from = await middle(handle);
    const over = await block(page, "f").boundingBox();
    if (over === null) throw new Error("the formula is not on the screen");
    await page.mouse.move(from.x, from.y);
    await page.mouse.down();
    await page.mouse.move(over.x + 120, over.y + over.height * 0.25, { steps: DRAG_STEPS });
    expect(await block(page, "f").getAttribute("class")).toContain("block-drop-before");
    await page.mouse.up();
    await bothHaveOrder("d typed d3 n f");
  });

  test("a block goes to the bin and comes back whole", async () => {
    await more(lead.page, "n", "Move to the bin");
    await bothHaveOrder("d typed d3 f");
    await analyst.page.getByRole("button", { name: "Bin: 1 block", exact: true }).click();
    const bin = analyst.page.getByRole("dialog", { name: "The page's bin" });
    await bin.getByText(/Maren Oduya/u).waitFor();
    await bin.getByRole("button", { name: "Bring n back" }).click();
    await bin.getByText("The bin is empty.").waitFor();
    await analyst.page.keyboard.press("Escape");
    await bothHaveOrder("d typed d3 n f");
    await bothRead((p) => block(p, "n"), /The dunites have 49\.\d/u);
  });

  test("points of a plot say what they are, and picking them picks rows for both", async () => {
    const { page } = lead;
    await block(page, "d").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Plot/u }).click();
    const plot = block(page, "p");
    await plot
      .getByRole("button", { name: /^Samples of d/u })
      .first()
      .click();
    await page.getByLabel("Across").fill("MgO");
    await page.getByLabel("Across").press("Enter");
    await page.getByLabel("Upwards").fill("SiO2");
    await page.getByLabel("Upwards").press("Enter");
    await page.keyboard.press("Escape");
    // SK-04 has no magnesia in use, SK-06 is set aside.
    await expect.poll(() => plot.getByRole("img").first().getAttribute("aria-label"), { timeout: 20_000 }).toMatch(/4 drawn/u);
    await plot.scrollIntoViewIfNeeded();

    const hover = async (index: number) => {
      const at = await pointOnScreen(page, "p", index);
      await page.mouse.move(at.x - 40, at.y - 40);
      await page.mouse.move(at.x, at.y, { steps: DRAG_STEPS });
      return at;
    };
    await hover(1);
    await expect
      .poll(() => plot.locator('[role="img"]').first().innerText(), { timeout: 10_000 })
      .toMatch(/SK-02.*lherzolite.*MgO, wt%.*38\.1\d?\(\d+\).*SiO2, wt%.*45\.2\d?\(\d+\)/su);
    const at = await hover(0);
    await page.mouse.click(at.x, at.y);
    await expect.poll(() => row(page, "d", "SK-01").getAttribute("aria-selected")).toBe("true");
    await expect.poll(() => row(page, "d3", "SK-01").getAttribute("aria-selected")).toBe("true");
    await row(analyst.page, "d", "SK-01").getByTitle("picked by Maren Oduya").waitFor();
    await page.keyboard.press("Escape");
    await expect.poll(() => row(page, "d", "SK-01").getAttribute("aria-selected")).toBe("false");
    await row(analyst.page, "d", "SK-01").getByTitle("picked by Maren Oduya").waitFor({ state: "detached" });

    // A box round two of them.
    const places = await Promise.all([pointOnScreen(page, "p", 0), pointOnScreen(page, "p", 1)]);
    const [x, y] = [places.map((p) => p.x), places.map((p) => p.y)];
    await page.mouse.move(Math.min(...x) - 12, Math.min(...y) - 12);
    await page.mouse.down();
    await page.mouse.move(Math.max(...x) + 12, Math.max(...y) + 12, { steps: DRAG_STEPS });
    await page.mouse.up();
    for (const sample of ["SK-01", "SK-02"]) await expect.poll(() => row(page, "d", sample).getAttribute("aria-selected")).toBe("true");
    expect(await row(page, "d", "SK-05").getAttribute("aria-selected")).toBe("false");
    await page.getByText(/^Picked SK-01, SK-02/u).waitFor();
    await page.keyboard.press("Escape");
    await expect.poll(() => block(page, "d").locator('[aria-selected="true"]').count()).toBe(0);
  });

  test("at the group's home a page is renamed, duplicated, archived and taken out of the archive", async () => {
    await saved(analyst.page);
    const { page } = lead;
    await saved(page);
    await page.goto(`/groups/${groupId}`);
    await page.getByRole("button", { name: "Actions for Untitled page" }).click();
    await page.getByRole("menuitem", { name: "Rename" }).click();
    await page.getByRole("textbox", { name: "Title" }).fill("Peridotites of Skarvnes");
    await page.getByRole("dialog").getByRole("button", { name: "Rename" }).click();
    await page.getByRole("dialog").waitFor({ state: "detached" });
    await page.getByRole("link", { name: "Peridotites of Skarvnes", exact: true }).first().waitFor();
    await expect.poll(() => analyst.page.getByLabel("Title of the page").inputValue(), { timeout: 15_000 }).toBe("Peridotites of Skarvnes");

    await page.getByRole("button", { name: "Actions for Peridotites of Skarvnes", exact: true }).click();
    await page.getByRole("menuitem", { name: "Duplicate" }).click();
    const copy = page.getByRole("link", { name: "Peridotites of Skarvnes, copy", exact: true });
    await copy.first().waitFor();
    await copy.first().click();
    await page.waitForURL(/\/pages\//u);
    expect(page.url()).not.toContain(pageId);
    await expect.poll(() => order(page), { timeout: 15_000 }).toBe("d p typed d3 n f");
    await expect.poll(() => notes(page, "pasted-").innerText(), { timeout: 15_000 }).toMatch(/Serpentinised\. Tobias Lindqvist/u);

    await page.goto(`/groups/${groupId}`);
    await page.getByRole("button", { name: "Actions for Peridotites of Skarvnes, copy" }).click();
    await page.getByRole("menuitem", { name: "Archive" }).click();
    await page.getByText("1 archived page").click();
    await page.getByRole("button", { name: "Actions for Peridotites of Skarvnes, copy" }).click();
    await page.getByRole("menuitem", { name: "Take out of the archive" }).click();
    await page.getByText("1 archived page").waitFor({ state: "detached" });
    await copy.first().waitFor();
  });

  test("nobody's browser had anything to complain about", () => {
    expect({ lead: lead.complaints, analyst: analyst.complaints }).toEqual({ lead: [], analyst: [] });
  });
});

async function middle(what: Locator): Promise<{ readonly x: number; readonly y: number }> {
  const box = await what.boundingBox();
  if (box === null) throw new Error(`${String(what)} is not on the screen`);
  return { x: box.x + box.width / 2, y: box.y + box.height / 2 };
}

/** Where a sample of the plot's first table lies on the screen, as the drawing itself places it. */
function pointOnScreen(page: Page, handle: string, index: number): Promise<{ readonly x: number; readonly y: number }> {
  return block(page, handle)
    .locator(".js-plotly-plot")
    .evaluate((element, wanted) => {
      // What the page gave the drawing surface: data, and where its axes begin and end.
      const graph = element as unknown as {
        readonly data: readonly { readonly x: readonly number[]; readonly y: readonly number[]; readonly customdata?: readonly unknown[] }[];
        readonly layout: {
          readonly width: number;
          readonly height: number;
          readonly margin: { readonly l: number; readonly r: number; readonly t: number; readonly b: number };
          readonly xaxis: { readonly range: readonly [number, number] };
          readonly yaxis: { readonly range: readonly [number, number] };
        };
      };
      const box = element.getBoundingClientRect();
      const { width, height, margin, xaxis, yaxis } = graph.layout;
      const part = (value: number, [from, to]: readonly [number, number]): number => (value - from) / (to - from);
      for (const trace of graph.data) {
        const at = trace.customdata?.findIndex((custom) => Array.isArray(custom) && custom[1] === wanted) ?? -1;
        if (at < 0) continue;
        return {
          x: box.x + margin.l + part(trace.x[at] ?? NaN, xaxis.range) * (width - margin.l - margin.r),
          y: box.y + height - margin.b - part(trace.y[at] ?? NaN, yaxis.range) * (height - margin.t - margin.b),
        };
      }
      throw new Error(`sample ${wanted} is not drawn`);
    }, index);
}
