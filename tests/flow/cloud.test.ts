import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, describe, expect, test } from "vitest";
import { launchBrowser } from "../support/browser";
import { faults } from "./faults";
import { block, open, shoot, signUp, type Person } from "./people";

/** Invented: 5,000 samples on a lattice, 100 across and 50 upwards, so that how many lie in a box is known beforehand. */
const ACROSS = 100;
const UPWARDS = 50;
const magnesia = (column: number): number => 20 + 0.25 * column;
const silica = (row: number): number => 35 + 0.4 * row;
const table = [
  "Sample,Kind,SiO2 (wt%),Al2O3 (wt%),MgO (wt%),CaO (wt%),Na2O (wt%),TiO2 (wt%)",
  ...Array.from({ length: ACROSS * UPWARDS }, (_, i) => {
    const [column, row] = [i % ACROSS, Math.floor(i / ACROSS)];
    return `LT-${i + 1},${row < UPWARDS / 2 ? "lower" : "upper"},${silica(row).toFixed(1)},2.0,${magnesia(column).toFixed(2)},1.5,0.2,0.1`;
  }),
].join("\n");
/** So many steps, a drag is seen as one. */
const DRAG_STEPS = 6;

/** A plot of more samples than are drawn one by one: painted, and yet each can be pointed at and picked. */
describe("a cloud of 5,000 samples", () => {
  let browser: Browser;
  let ana: Person;

  beforeAll(async () => {
    browser = await launchBrowser();
    ana = await open(browser, "Cleo Ntuli");
  });
  afterEach(async ({ task }) => {
    if (task.result?.state === "fail") await shoot(`cloud ${task.name}`, [ana]);
  });
  afterAll(async () => {
    await browser.close();
  });

  const plot = () => block(ana.page, "p");
  const drag = (name: string) => plot().getByRole("button", { name, exact: true });
  const picked = () => ana.page.getByText(/^Picked/u).locator("..");

  /** Waits until the canvas holds the view that the axes show. */
  async function painted(): Promise<void> {
    await expect
      .poll(
        () =>
          plot().evaluate((element) => {
            const view = element.querySelector("canvas")?.dataset["view"];
            const graph = element.querySelector(".js-plotly-plot") as unknown as Graph | null;
            if (view === undefined || graph === null) return false;
            const { x, y } = JSON.parse(view) as { x: number[]; y: number[] };
            const { xaxis, yaxis } = graph.layout;
            return [x, y].every((ends, i) => ends.every((end, k) => Math.abs(end - ((i === 0 ? xaxis : yaxis).range[k] ?? NaN)) < 1e-9));
          }),
        { timeout: 15_000 },
      )
      .toBe(true);
  }

  /** Where numbers lie on the screen. */
  function onScreen(x: number, y: number): Promise<{ readonly x: number; readonly y: number }> {
    return plot()
      .locator(".js-plotly-plot")
      .evaluate(
        (element, [atX, atY]) => {
          const box = element.getBoundingClientRect();
          const { width, height, margin, xaxis, yaxis } = (element as unknown as Graph).layout;
          const part = (value: number, [from, to]: readonly [number, number]): number => (value - from) / (to - from);
          return {
            x: box.x + margin.l + part(atX, xaxis.range) * (width - margin.l - margin.r),
            y: box.y + height - margin.b - part(atY, yaxis.range) * (height - margin.t - margin.b),
          };
        },
        [x, y] as const,
      );
  }

  async function dragOver(corners: readonly (readonly [number, number])[]): Promise<void> {
    const { mouse } = ana.page;
    const places = await Promise.all(corners.map(([x, y]) => onScreen(x, y)));
    for (const [n, at] of places.entries()) {
      await mouse.move(at.x, at.y, { steps: n === 0 ? 1 : DRAG_STEPS });
      if (n === 0) await mouse.down();
    }
    await mouse.up();
  }

  test("is uploaded, mapped and drawn", async () => {
    const { page } = ana;
    const groupId = await signUp(ana, "Lattice Petrology");
    await page.goto(`/groups/${groupId}`);
    await page.getByRole("button", { name: "New page" }).click();
    await page.waitForURL(/\/pages\//u);
    await page.getByRole("region", { name: "The first block" }).getByRole("button", { name: /Data/u }).click();
    await page.getByLabel("Choose a table to upload").setInputFiles({ name: "lattice.csv", mimeType: "text/csv", buffer: Buffer.from(table) });
    const dialog = page.getByRole("dialog");
    await dialog.getByText(/^5,?000 rows, 8 columns/u).waitFor();
    await dialog.getByLabel("Role of Kind").selectOption({ label: "class" });
    await dialog.getByRole("button", { name: "Save this table" }).click();
    await dialog.waitFor({ state: "detached" });
    await block(page, "d").getByRole("button", { name: "Add below" }).click();
    await page.getByRole("menuitem", { name: /^Plot/u }).click();
    await block(page, "p")
      .getByRole("button", { name: /^Samples of d/u })
      .first()
      .click();
    await ana.hand.fill(page.getByLabel("Across"), "MgO", true);
    await ana.hand.fill(page.getByLabel("Upwards"), "SiO2", true);
    await page.keyboard.press("Escape");
    await expect.poll(() => plot().getByRole("img").first().getAttribute("aria-label"), { timeout: 20_000 }).toMatch(/5,?000 drawn/u);
    await plot().scrollIntoViewIfNeeded();
    await painted();
  });

  test("is painted in its classes' colours, under the axes", async () => {
    const at = await onScreen(magnesia(50), silica(10));
    const between = await onScreen(magnesia(50) + 0.125, silica(10) + 0.2);
    const colors = await plot()
      .locator("canvas")
      .evaluate(
        (element, places) => {
          const canvas = element as HTMLCanvasElement;
          const box = canvas.getBoundingClientRect();
          const ratio = canvas.width / box.width;
          const context = canvas.getContext("2d");
          return places.map((p) => Array.from(context?.getImageData(Math.round((p.x - box.x) * ratio), Math.round((p.y - box.y) * ratio), 1, 1).data ?? []));
        },
        [at, between],
      );
    // The first class's blue over the paper, and the paper itself.
    const [[red = 0, , blue = 0] = [], paper] = colors;
    expect(blue - red).toBeGreaterThan(60);
    expect(paper).toEqual([0xf6, 0xf5, 0xf1, 255]);
    const order = await plot()
      .locator("canvas")
      .evaluate((canvas) => canvas.compareDocumentPosition(document.querySelector(".js-plotly-plot") as Node) & Node.DOCUMENT_POSITION_FOLLOWING);
    expect(order).toBeGreaterThan(0);
    expect(await faults(ana.page)).toEqual([]);
  });

  test("says what is under the pointer, and a click picks it", async () => {
    const { page } = ana;
    const [column, row] = [30, 40];
    const at = await onScreen(magnesia(column), silica(row));
    await page.mouse.move(at.x - 30, at.y - 30);
    await page.mouse.move(at.x, at.y, { steps: DRAG_STEPS });
    const name = `LT-${row * ACROSS + column + 1}`;
    await expect.poll(() => plot().locator('[role="img"]').first().innerText()).toMatch(new RegExp(`${name}\\s*upper[\\s\\S]*27\\.5[\\s\\S]*51\\.0`, "u"));
    await page.mouse.click(at.x, at.y);
    await expect.poll(() => picked().innerText()).toMatch(new RegExp(`^Picked ${name}\\s`, "u"));
    await page.keyboard.press("Escape");
    await picked().waitFor({ state: "detached" });
  });

  test("a box picks what lies in it, and only that", async () => {
    const { page } = ana;
    // Edges halfway between columns 9 and 10, 39 and 40, rows 4 and 5, 24 and 25: 30 × 20 samples.
    const [left, right, low, high] = [magnesia(9.5), magnesia(39.5), silica(4.5), silica(24.5)];
    await dragOver([
      [left, low],
      [right, high],
    ]);
    await expect.poll(() => picked().innerText(), { timeout: 15_000 }).toMatch(/^Picked LT-511, LT-512, LT-513 and 597 more/u);
    // What the pointer was on when the drag began does not stay over it.
    expect(await plot().locator('[role="img"]').first().innerText()).not.toContain("LT-");
    await page.keyboard.press("Escape");
    await picked().waitFor({ state: "detached" });
  });

  test("freehand picks what lies inside of the outline", async () => {
    const { page } = ana;
    await drag("Pick freehand").click();
    // Round columns 60 to 63 and rows 30 to 32.
    const [left, right, low, high] = [magnesia(59.5), magnesia(63.5), silica(29.5), silica(32.5)];
    await dragOver([
      [left, low],
      [right, low],
      [right, high],
      [left, high],
      [left, low],
    ]);
    await expect.poll(() => picked().innerText(), { timeout: 15_000 }).toMatch(/^Picked LT-3061, LT-3062, LT-3063 and 9 more/u);
    await page.keyboard.press("Escape");
    await picked().waitFor({ state: "detached" });
  });

  test("moves and is enlarged with its axes, and comes back whole", async () => {
    const { page } = ana;
    const view = () => plot().locator("canvas").getAttribute("data-view");
    const whole = await view();
    await drag("Move").click();
    await dragOver([
      [magnesia(50), silica(25)],
      [magnesia(60), silica(30)],
    ]);
    await expect.poll(view, { timeout: 15_000 }).not.toBe(whole);
    await painted();
    await drag("Enlarge").click();
    await dragOver([
      [magnesia(20), silica(10)],
      [magnesia(40), silica(30)],
    ]);
    await expect
      .poll(async () => (JSON.parse((await view()) ?? "{}") as { x: [number, number] }).x.map((end) => Math.round(end * 10) / 10), { timeout: 15_000 })
      .toEqual([magnesia(20), magnesia(40)]);
    await painted();
    // Where it is enlarged, samples are still found.
    const at = await onScreen(magnesia(30), silica(20));
    await page.mouse.move(at.x - 20, at.y - 20);
    await page.mouse.move(at.x, at.y, { steps: DRAG_STEPS });
    await expect.poll(() => plot().locator('[role="img"]').first().innerText()).toMatch(/LT-2031\s*lower/u);
    await plot().getByRole("button", { name: "Whole view" }).click();
    await expect.poll(view, { timeout: 15_000 }).toBe(whole);
  });

  test("fits a phone in the dark", async () => {
    const { page } = ana;
    await page.emulateMedia({ colorScheme: "dark" });
    await page.setViewportSize({ width: 390, height: 1000 });
    await painted();
    expect(await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBeLessThanOrEqual(0);
    expect(await faults(page)).toEqual([]);
    expect(ana.complaints).toEqual([]);
  });
});

/** What the page gave the drawing surface: its size, and where its axes begin and end. */
interface Graph {
  readonly layout: {
    readonly width: number;
    readonly height: number;
    readonly margin: { readonly l: number; readonly r: number; readonly t: number; readonly b: number };
    readonly xaxis: { readonly range: readonly [number, number] };
    readonly yaxis: { readonly range: readonly [number, number] };
  };
}
