/**
 * How a table of 100,000 samples × 30 columns feels in Chromium: from the chosen file to the first plot, from a changed formula
 * to the changed plot, and how long typing is ever held up. Works on a running product: `npm start`, then
 * `npm run bench:page -- http://localhost:3000`. Times are of this machine and say little alone; they are printed beside the
 * time that the same browser takes for a fixed loop of arithmetic.
 */
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import type { Page } from "playwright-core";
import { demoPassword, demoPeople } from "@/db/seed/people";
import { launchBrowser } from "@/tests/support/browser";

const ROWS = Number(process.env.ROWS ?? 100_000);
const EDITS = 20;
const address = process.argv[2] ?? "http://localhost:3000";

/** Thirty columns: sample, class, ten oxides with their 2σ, and eight trace elements. Invented, the same every time. */
const COLUMNS = 30;

function table(): string {
  let state = 20_261_201;
  const next = (): number => (state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0) / 4_294_967_296;
  const oxides: readonly [string, number][] = [
    ["SiO2", 45],
    ["Al2O3", 4.2],
    ["FeOt", 8.1],
    ["MgO", 37],
    ["CaO", 3.4],
    ["TiO2", 0.2],
    ["Na2O", 0.3],
    ["K2O", 0.03],
    ["MnO", 0.13],
    ["P2O5", 0.02],
  ];
  const traces: readonly [string, number][] = [
    ["Ni", 1900],
    ["Cr", 2600],
    ["Co", 105],
    ["Sc", 16],
    ["V", 80],
    ["Zn", 55],
    ["Cu", 30],
    ["Ga", 4.4],
  ];
  const head = ["Sample", "Class", ...oxides.flatMap(([o]) => [`${o} (wt%)`, `2s ${o}`]), ...traces.map(([e]) => `${e} (ppm)`)];
  const lines = [head.join(",")];
  for (let row = 1; row <= ROWS; row++) {
    const cells = [`S-${row}`, `group ${row % 6}`];
    for (const [, mean] of oxides) {
      const value = mean * (0.9 + 0.2 * next());
      cells.push(value.toFixed(3), (value * 0.01).toFixed(4));
    }
    for (const [, mean] of traces) cells.push((mean * (0.8 + 0.4 * next())).toFixed(1));
    lines.push(cells.join(","));
  }
  return `${lines.join("\n")}\n`;
}

/** Time of a fixed loop in this browser, ms: the reference. */
function reference(page: Page): Promise<number> {
  return page.evaluate(() => {
    const started = performance.now();
    let x = 0;
    for (let i = 0; i < 100_000_000; i++) x = (x * 31 + i) | 0;
    return performance.now() - started + (x === 1 ? 1 : 0);
  });
}

/** Waits, frame by frame, until another part of the data is painted than before, and gives it. */
async function plotChanges(page: Page, before: string | null): Promise<string> {
  const changed = await page.waitForFunction((old) => {
    const painted = document.querySelector<HTMLCanvasElement>("canvas[data-view]")?.dataset.view;
    return painted !== undefined && painted !== old ? { painted } : null;
  }, before);
  return (await changed.evaluate((found) => found?.painted)) ?? "";
}

const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;
const ms = (value: number): string => `${value.toFixed(0)} ms`;

const folder = mkdtempSync(path.join(tmpdir(), "cotectic-bench-"));
const file = path.join(folder, "large.csv");
writeFileSync(file, table());
const browser = await launchBrowser();
try {
  const page = await (await browser.newContext({ viewport: { width: 1440, height: 1000 }, baseURL: address })).newPage();
  page.setDefaultTimeout(120_000);
  const [lead] = demoPeople;
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(lead?.email ?? "");
  await page.getByLabel("Password").fill(demoPassword);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.getByRole("button", { name: "New page" }).click();
  await page.waitForURL(/\/pages\//u);
  const block = (handle: string) => page.locator(`section.block[id="${handle}"]`);
  await page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }).click();
  await block("d").getByRole("button", { name: "Add below" }).click();
  await page.getByRole("menuitem", { name: /Formula/u }).click();
  const editor = page.getByRole("textbox", { name: "Formulas of f" });
  await editor.click();
  await page.keyboard.insertText("mg_si = Mg / Si\nal_si = Al / Si");
  await block("f").getByRole("button", { name: "Add below" }).click();
  await page.getByRole("menuitem", { name: /Plot/u }).click();
  await block("p").getByRole("listitem").first().getByRole("button").nth(1).click();
  await page.getByLabel("Across").fill("mg_si");
  await page.getByLabel("Across").press("Enter");
  await page.getByLabel("Upwards").fill("al_si");
  await page.getByLabel("Upwards").press("Enter");
  await page.keyboard.press("Escape");

  const unit = await reference(page);
  const chosen = performance.now();
  await page.getByLabel("Choose a table to upload").setInputFiles(file);
  const save = page.getByRole("button", { name: "Save this table" });
  await page
    .getByRole("dialog")
    .getByText(new RegExp(`rows, ${COLUMNS} columns`, "u"))
    .waitFor();
  const proposed = performance.now();
  await page.getByRole("dialog").getByLabel("Role of Class").selectOption({ label: "class" });
  const saving = performance.now();
  await save.click();
  let first = await plotChanges(page, null);
  const drawn = performance.now();
  console.log(`${ROWS} samples × ${COLUMNS} columns; a loop of 10⁸ steps takes ${ms(unit)} here`);
  console.log(`file chosen → mapping proposed: ${ms(proposed - chosen)}; table saved → first plot: ${ms(drawn - saving)}`);
  console.log(`upload to first plot: ${ms(proposed - chosen + drawn - saving)}, ${((proposed - chosen + drawn - saving) / unit).toFixed(1)} × the loop`);

  await page.evaluate(() => {
    const held: number[] = [];
    (window as unknown as { held: number[] }).held = held;
    new PerformanceObserver((list) => held.push(...list.getEntries().map((entry) => entry.duration))).observe({ type: "longtask" });
  });
  const edits: number[] = [];
  for (let n = 0; n < EDITS; n++) {
    await editor.click();
    await page.keyboard.press("Control+Home");
    await page.keyboard.press("End");
    await page.evaluate(() => ((window as unknown as { held: number[] }).held.length = 0));
    const typed = performance.now();
    await page.keyboard.insertText(n % 2 === 0 ? " * 2" : " / 2");
    first = await plotChanges(page, first);
    edits.push(performance.now() - typed);
    await page.waitForTimeout(300);
  }
  console.log(
    `formula edited → plot changed: median of ${EDITS} ${ms(median(edits))}, ${(median(edits) / unit).toFixed(2)} × the loop; worst ${ms(Math.max(...edits))}`,
  );

  await page.evaluate(() => ((window as unknown as { held: number[] }).held.length = 0));
  await editor.click();
  await page.keyboard.press("Control+End");
  await page.keyboard.type("\nfe_mg = (Fe_total + Ca) / Mg # typed while everything is calculated", { delay: 40 });
  await page.waitForTimeout(1500);
  const held = await page.evaluate(() => (window as unknown as { held: number[] }).held);
  console.log(`typing: ${held.length} tasks over 50 ms on the main thread, the longest ${ms(Math.max(0, ...held))}`);
} finally {
  await browser.close();
  rmSync(folder, { recursive: true });
}
