import { deflateSync, crc32 } from "node:zlib";
import { describe, expect, it } from "vitest";
import { captionOf } from "@/app/_blocks/plot/export/caption";
import { coversAny, typeUsed } from "@/app/_blocks/plot/export/embeddedFonts";
import { pixelsOf, sizeProblem } from "@/app/_blocks/plot/export/exportSize";
import { finishSvg } from "@/app/_blocks/plot/export/finishSvg";
import { printKey } from "@/app/_blocks/plot/export/printKey";
import { planeLight } from "@/app/_blocks/shared/usePalette";
import { withDensity } from "@/app/_blocks/plot/export/pngDensity";
import type { PlotBlock } from "@/cells";
import { data, evaluate, ratios, resultOf, trend } from "../../../cells/page/pages";

describe("the size of a figure", () => {
  it("is mm ÷ 25.4 × dpi pixels, to the nearest", () => {
    expect(pixelsOf(25.4, 300)).toBe(300);
    expect(pixelsOf(90, 300)).toBe(1063); // 1062.99
    expect(pixelsOf(85, 400)).toBe(1339); // 1338.58
  });

  it("is refused in words where no page has it", () => {
    expect(sizeProblem({ widthMm: 90, heightMm: 70, dpi: 300 }, "png")).toBeNull();
    expect(sizeProblem({ widthMm: 39, heightMm: 70, dpi: 300 }, "svg")).toContain("width between 40 and 500");
    expect(sizeProblem({ widthMm: 90, heightMm: NaN, dpi: 300 }, "svg")).toContain("height");
    expect(sizeProblem({ widthMm: 90, heightMm: 70, dpi: 20 }, "png")).toContain("dots per inch");
    expect(sizeProblem({ widthMm: 90, heightMm: 70, dpi: 20 }, "svg")).toBeNull();
    expect(sizeProblem({ widthMm: 500, heightMm: 500, dpi: 1200 }, "png")).toContain("40 million");
  });
});

describe("an SVG for print", () => {
  const size = { widthMm: 90, heightMm: 70, dpi: 300 };
  const parts = { size, width: 340.1575, height: 264.5669, title: "A & B", caption: "x < y", fonts: "@font-face{}" };

  it("has millimetres, a viewBox of its own pixels, title, caption and type", () => {
    const svg = finishSvg('<svg class="main-svg" width="340" height="264" style="background: #fff"><g/></svg>', parts);
    expect(svg).toContain('width="90mm" height="70mm" viewBox="0 0 340.1575 264.5669"');
    expect(svg).toContain(
      '<title id="figure-title">A &amp; B</title><desc id="figure-caption">x &lt; y</desc><style>@font-face{}</style><rect width="340.1575" height="264.5669" fill="#ffffff"/><g/></svg>',
    );
    expect(svg.match(/<svg/gu)).toHaveLength(1);
  });

  it("is not made of something else", () => {
    expect(() => finishSvg("data:image/png", parts)).toThrow("expected an SVG");
  });

  it("asks only for the type it uses", () => {
    const used = typeUsed('<text style="font-weight: 600;">1σ</text><text style="font-style: italic; font-weight: normal">a</text>');
    expect([...used.faces].sort()).toEqual(["400 italic", "400 normal", "600 italic", "600 normal"]);
    expect(used.characters.has(0x3c3)).toBe(true);
    expect(coversAny("U+0370-0377,U+037A-037F,U+0384-03FF", used.characters)).toBe(true);
    expect(coversAny("U+0400-045F", used.characters)).toBe(false);
    expect(coversAny("U+3??", used.characters)).toBe(true);
    expect(coversAny("", used.characters)).toBe(true);
  });
});

describe("a PNG for print", () => {
  const chunk = (type: string, content: Buffer): Buffer => {
    const body = Buffer.concat([Buffer.from(type, "latin1"), content]);
    const [length, check] = [Buffer.alloc(4), Buffer.alloc(4)];
    length.writeUInt32BE(content.length);
    check.writeUInt32BE(crc32(body));
    return Buffer.concat([length, body, check]);
  };
  const header = Buffer.from([0, 0, 0, 1, 0, 0, 0, 1, 8, 2, 0, 0, 0]);
  const signature = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
  const old = chunk("pHYs", Buffer.from([0, 0, 0, 1, 0, 0, 0, 1, 1]));
  const png = Buffer.concat([
    signature,
    chunk("IHDR", header),
    old,
    chunk("IDAT", deflateSync(Buffer.from([0, 255, 255, 255]))),
    chunk("IEND", Buffer.alloc(0)),
  ]);

  /** Chunks in order, each with its check made again by zlib's own CRC. */
  function chunksOf(bytes: Buffer): { readonly type: string; readonly content: Buffer }[] {
    const found = [];
    for (let at = 8; at < bytes.length;) {
      const length = bytes.readUInt32BE(at);
      const body = bytes.subarray(at + 4, at + 8 + length);
      expect(bytes.readUInt32BE(at + 8 + length)).toBe(crc32(body));
      found.push({ type: body.subarray(0, 4).toString("latin1"), content: body.subarray(4) });
      at += length + 12;
    }
    return found;
  }

  it("gets its density once, in pixels a metre, and its texts", () => {
    const made = chunksOf(Buffer.from(withDensity(png, 300, { Description: "1σ" })));
    expect(made.map(({ type }) => type)).toEqual(["IHDR", "pHYs", "iTXt", "IDAT", "IEND"]);
    // 300 ÷ 0.0254 = 11811.02.
    expect(made[1]?.content.readUInt32BE(0)).toBe(11811);
    expect(made[1]?.content.readUInt32BE(4)).toBe(11811);
    expect(made[1]?.content[8]).toBe(1);
    expect(made[2]?.content.toString("utf8")).toBe("Description\0\0\0\0\x001σ");
  });

  it("is not made of other bytes", () => {
    expect(() => withDensity(Buffer.from("no picture"), 300)).toThrow("expected a PNG");
  });
});

describe("a key in print", () => {
  it("names every class with its count, in rows that stay inside the figure", () => {
    const block = { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "ch", x: "mg_si", y: "al_si" }] };
    const result = resultOf(evaluate(data(), ratios, block), "p", "plot");
    const place = (name: string): number => ["CV", "CO", "XX"].indexOf(name);
    const wide = printKey(result, 400, planeLight, place);
    const slim = printKey(result, 120, planeLight, place);
    expect([...(wide?.svg(0) ?? "").matchAll(/>([^<]+)<\/text>/gu)].map((found) => found[1])).toEqual(["CV (4)", "CO (4)", "XX (1)"]);
    expect(slim?.height).toBeGreaterThan(wide?.height ?? Infinity);
    const xs = [...(slim?.svg(0) ?? "").matchAll(/<text x="([\d.]+)"/gu)].map((found) => Number(found[1]));
    for (const x of xs) expect(x).toBeLessThan(120 - 12);
  });

  it("is left off where nothing is to be told apart", () => {
    const result = resultOf(evaluate({ id: "p", kind: "plot", plot: "scatter", x: "Mg / Si", y: "Al / Si", drawn: [{ bodies: ["CI"] }] }), "p", "plot");
    expect(printKey(result, 400, planeLight, () => 0)).toBeNull();
  });
});

describe("a caption", () => {
  const captionFor = (block: object, ...others: object[]): string => {
    const results = evaluate(data({ setAside: [{ row: 9, sample: "S9", reason: "weathered" }] }), ratios, ...others, block);
    return captionOf({
      block: block as PlotBlock,
      result: resultOf(results, "p", "plot"),
      results,
      ownBodies: {},
      nameOf: (handle) => (handle === "ch" ? "Chondrites" : handle),
    });
  };

  it("says tables, counts by state, ellipses, trend, bodies with source, and the engine", () => {
    const caption = captionFor({
      id: "p",
      kind: "plot",
      name: "One line",
      plot: "scatter",
      drawn: [{ data: "ch", x: "mg_si", y: "Ca / Si", ellipses: "2 sigma" }, { bodies: ["CI"] }],
    });
    expect(caption).toMatch(
      /^One line\. Ca\/Si by mass against mg_si by mass\. 7 samples of Chondrites \(ch\); not drawn: 1 below detection and 1 set aside\./u,
    );
    expect(caption).toContain("Ellipses of samples are 2σ in two dimensions and hold 86 %");
    expect(caption).toMatch(/CI is CI_PLJ14 \(Palme[^)]*2014/u);
    expect(caption).toMatch(/Calculated with Cotectic, engine \d+\.\d+\.\d+\.$/u);
  });

  it("names the source of a body of the group's own", () => {
    const block: PlotBlock = { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "ch", x: "mg_si", y: "al_si" }] };
    const results = evaluate(data(), ratios, block);
    const result = { ...resultOf(results, "p", "plot"), bodiesUsed: { DM: "OWN_MANTLE_1" } };
    const ownBodies = { OWN_MANTLE_1: { name: "our mantle", source: "Halvorsen et al. 2025", fromMemory: false, values: [] } };
    expect(captionOf({ block, result, results, ownBodies, nameOf: (handle) => handle })).toContain("DM is OWN_MANTLE_1 (Halvorsen et al. 2025)");
  });

  it("says how a line was fitted and what its band is", () => {
    const caption = captionFor({ id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "ch", x: "mg_si", y: "al_si" }, { trend: "t" }] }, trend("t", "CV"));
    expect(caption).toMatch(/Line t: York fit \(York et al\. 2004, errors on both axes with their correlation\) through 4 samples, slope .*, MSWD /u);
    expect(caption).toContain("band 95 %, by the errors alone; dashed where carried past its samples.");
  });

  it("says what a ternary's shares are of, and where a pattern's temperatures are from", () => {
    expect(captionFor({ id: "p", kind: "plot", plot: "ternary", drawn: [{ data: "ch", x: "MgO", y: "SiO2", z: "Al2O3" }] })).toContain(
      "Ternary of MgO, SiO2 and Al2O3: % by mass, normalised to MgO + SiO2 + Al2O3 = 100.",
    );
    const pattern = captionFor({ id: "p", kind: "plot", plot: "pattern", normalise: "CI", drawn: [{ data: "ch", values: ["Al", "Ca"], join: "class" }] });
    expect(pattern).toContain("Pattern normalised to CI (CI_PLJ14), against 50 % condensation temperature, K.");
    expect(pattern).toContain("Lodders 2003");
    expect(pattern).toContain("of a class mean that of the mean");
  });
});
