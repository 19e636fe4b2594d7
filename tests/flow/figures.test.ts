import { readFileSync } from "node:fs";
import type { Browser, Download } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { ENGINE_VERSION } from "@/cells";
import { demoPassword, demoPeople } from "@/db/seed/people";
import { launchBrowser } from "../support/browser";
import { block, open, saved, shoot, signIn, type Person } from "./people";

/** A figure leaves the page as it will stand in print: exact size, white ground, type and caption inside. */
describe("figures are saved for print", () => {
  let browser: Browser;
  let lead: Person;

  beforeAll(async () => {
    browser = await launchBrowser();
    lead = await open(browser, "Demo lead");
    await signIn(lead, demoPeople.find(({ role }) => role === "lead")?.email ?? "", demoPassword);
    await lead.page.getByRole("link", { name: "Where chondrites and mantle meet" }).first().click();
    await lead.page.waitForURL(/\/pages\//u);
    await block(lead.page, "crossing").locator(".js-plotly-plot").waitFor();
  });
  afterAll(async () => {
    await browser.close();
  });

  async function dialogOf(handle: string, width: string, height: string) {
    const { page } = lead;
    await block(page, handle).getByRole("button", { name: "Save the figure" }).click();
    const dialog = page.getByRole("dialog", { name: "Save the figure" });
    await dialog.getByLabel("Width, mm").fill(width);
    await dialog.getByLabel("Height, mm").fill(height);
    await dialog.getByRole("img").waitFor();
    return dialog;
  }
  async function bytesOf(download: Promise<Download>): Promise<{ readonly name: string; readonly bytes: Buffer }> {
    const done = await download;
    return { name: done.suggestedFilename(), bytes: readFileSync(await done.path()) };
  }

  test("an SVG has its size in millimetres, its caption, its type, and no dark ground", async () => {
    const { page } = lead;
    await page.emulateMedia({ colorScheme: "dark" });
    const dialog = await dialogOf("crossing", "90", "72.5");
    const caption = await dialog.getByRole("region", { name: "Caption" }).getByText("Al/Si by mass against Mg/Si by mass").innerText();
    const download = page.waitForEvent("download");
    await dialog.getByRole("button", { name: "Save as SVG" }).click();
    const { name, bytes } = await bytesOf(download);
    const svg = bytes.toString("utf8");
    expect(name).toBe("two-lines-one-crossing.svg");
    const root = /<svg[^>]*>/u.exec(svg)?.[0] ?? "";
    expect(root).toContain('width="90mm"');
    expect(root).toContain('height="72.5mm"');
    // A CSS pixel is 25.4/96 mm.
    const [, , w = 0, h = 0] = (/viewBox="(?<box>[^"]+)"/u.exec(root)?.groups?.["box"] ?? "").split(" ").map(Number);
    expect(w * (25.4 / 96)).toBeCloseTo(90, 3);
    expect(h * (25.4 / 96)).toBeCloseTo(72.5, 3);
    const plain = (text: string | undefined): string => (text ?? "").replaceAll("&lt;", "<").replaceAll("&gt;", ">").replaceAll("&amp;", "&");
    expect(/<title[^>]*>(?<text>[^<]*)<\/title>/u.exec(svg)?.groups?.["text"]).toBe("Two lines, one crossing");
    expect(plain(/<desc[^>]*>(?<text>[^<]*)<\/desc>/u.exec(svg)?.groups?.["text"])).toBe(caption);
    // The axes fill the figure, and the key of classes stands under them.
    const plotted = /class="plotclip"[^>]*>\s*<rect[^>]*width="(?<width>[\d.]+)"/u.exec(svg)?.groups?.["width"];
    expect(Number(plotted) / w).toBeGreaterThan(0.75);
    expect(/<g class="key">(?<key>.*?)<\/g>/su.exec(svg)?.groups?.["key"]).toMatch(/EL \(3\).*harzburgite \(11\)/su);
    expect(svg).toContain('@font-face{font-family:"IBM Plex Sans"');
    expect(svg).toMatch(/rgb\(255, 255, 255\)/u);
    // Ground and ink of crossed polars.
    expect(svg).not.toMatch(/#0e1013|#e9e7e1|rgb\(233, 231, 225\)/iu);
    for (const part of [
      "67 samples of Everything measured (all) and Published group means (means)",
      "2 set aside",
      "1σ in two dimensions and hold 39 %",
      "York fit",
      "band 95 %",
      "the ellipse there holds 95 %",
      "CI is CI_PLJ14 (Palme",
      "BSE is BSE_MS95 (McDonough",
      `engine ${ENGINE_VERSION}`,
    ])
      expect(caption, part).toContain(part);
    await page.keyboard.press("Escape");
    await page.emulateMedia({ colorScheme: "light" });
  });

  test("a PNG has the pixels and the density that were asked for, and its caption", async () => {
    const { page } = lead;
    const dialog = await dialogOf("pattern", "85", "60");
    await dialog.getByLabel("Format").selectOption({ label: "PNG, in pixels" });
    await dialog.getByLabel("Dots per inch").fill("400");
    await dialog.getByText("1339 × 945 pixels").waitFor();
    const download = page.waitForEvent("download");
    await dialog.getByRole("button", { name: "Save as PNG" }).click();
    const { bytes } = await bytesOf(download);
    // 85 mm ÷ 25.4 × 400 = 1338.6, 60 mm ÷ 25.4 × 400 = 944.9; 400 ÷ 0.0254 = 15748.03 pixels a metre.
    expect([bytes.readUInt32BE(16), bytes.readUInt32BE(20)]).toEqual([1339, 945]);
    const at = bytes.indexOf("pHYs", 0, "latin1");
    expect([bytes.readUInt32BE(at + 4), bytes.readUInt32BE(at + 8), bytes[at + 12]]).toEqual([15748, 15748, 1]);
    const text = bytes.toString("utf8");
    expect(text).toContain("relative to Si, normalised to CI (CI_PLJ14)");
    expect(text).toContain("Lodders 2003");
    // The browser itself reads it, and not all of it is white.
    const ink = await page.evaluate(async (data) => {
      const image = new Image();
      image.src = `data:image/png;base64,${data}`;
      await image.decode();
      const canvas = document.createElement("canvas");
      canvas.width = image.width;
      canvas.height = image.height;
      const context = canvas.getContext("2d");
      context?.drawImage(image, 0, 0);
      const pixels = context?.getImageData(0, 0, image.width, image.height).data ?? new Uint8ClampedArray();
      let dark = 0;
      for (let i = 0; i < pixels.length; i += 4) if ((pixels[i] ?? 255) < 128) dark++;
      return { corner: pixels[0], share: dark / (pixels.length / 4) };
    }, bytes.toString("base64"));
    expect(ink.corner).toBe(255);
    expect(ink.share).toBeGreaterThan(0.005);
    expect(ink.share).toBeLessThan(0.2);
    await page.keyboard.press("Escape");
  });

  test("a size that no figure can have is refused in words", async () => {
    const dialog = await dialogOf("crossing", "90", "70");
    await dialog.getByLabel("Width, mm").fill("12");
    await dialog.getByText("Give a width between 40 and 500 mm.").waitFor();
    expect(await dialog.getByRole("button", { name: "Save as SVG" }).isDisabled()).toBe(true);
    await lead.page.keyboard.press("Escape");
  });

  test("an annotation is put, and moved by arrow keys and by dragging", async () => {
    const { page } = lead;
    const plot = block(page, "crossing");
    await plot.getByRole("button", { name: "Draw more" }).click();
    await page.getByRole("menuitem", { name: "Annotation" }).click();
    await page.getByLabel("Text", { exact: true }).fill("residues");
    await page.keyboard.press("Enter");
    await page.keyboard.press("Escape");
    const handle = plot.getByRole("button", { name: "Move “residues”" });
    const before = await handle.boundingBox();
    await handle.focus();
    await page.keyboard.press("Shift+ArrowRight");
    await expect.poll(async () => Math.round(((await handle.boundingBox())?.x ?? 0) - (before?.x ?? 0)), { timeout: 15_000 }).toBe(20);
    const box = await handle.boundingBox();
    if (box === null) throw new Error("the handle is on the screen");
    await page.mouse.move(box.x + 10, box.y + 8);
    await page.mouse.down();
    await page.mouse.move(box.x + 70, box.y - 32, { steps: 4 });
    await page.mouse.up();
    await expect
      .poll(async () => [Math.round(((await handle.boundingBox())?.x ?? 0) - box.x), Math.round(((await handle.boundingBox())?.y ?? 0) - box.y)], {
        timeout: 15_000,
      })
      .toEqual([60, -40]);
    await saved(page);
  });

  test("nobody's browser had anything to complain about", async ({ onTestFailed }) => {
    onTestFailed(() => void shoot("figures", [lead]));
    expect(lead.complaints).toEqual([]);
  });
});
