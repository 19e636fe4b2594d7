import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { classStyle } from "@/app/_ui/classStyle";

function channel(value: number): number {
  const c = value / 255;
  return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
}

/** Relative luminance and contrast as WCAG 2.2 defines them. */
function contrast(a: string, b: string): number {
  const luminance = (hex: string): number => {
    const [r = 0, g = 0, b2 = 0] = [1, 3, 5].map((i) => channel(parseInt(hex.slice(i, i + 2), 16)));
    return 0.2126 * r + 0.7152 * g + 0.0722 * b2;
  };
  const [light = 0, dark = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (light + 0.05) / (dark + 0.05);
}

describe("the look of a class", () => {
  it("is one pair of colour and shape for each of 64 classes", () => {
    const pairs = new Set(Array.from({ length: 64 }, (_, i) => `${classStyle(i).shape} ${classStyle(i).color}`));
    expect(pairs.size).toBe(64);
  });

  it("has an outline of 3 : 1 on the ground of its light", () => {
    for (let i = 0; i < 8; i++) {
      expect(contrast(classStyle(i).plane.line, "#F6F5F1"), `class ${i} in plane light`).toBeGreaterThanOrEqual(3);
      expect(contrast(classStyle(i).polars.line, "#0E1013"), `class ${i} in crossed polars`).toBeGreaterThanOrEqual(3);
    }
  });

  it("is the same in the style sheet and in the table that plots use", () => {
    const css = readFileSync("app/globals.css", "utf8").toUpperCase();
    const plane = css.slice(css.indexOf(":ROOT {"), css.indexOf(":ROOT.POLARS {"));
    const polars = css.slice(css.indexOf(":ROOT.POLARS {"));
    for (let i = 0; i < 8; i++) {
      for (const [part, colors] of [[plane, classStyle(i).plane] as const, [polars, classStyle(i).polars] as const]) {
        expect(part).toContain(`--CLASS-${i}: ${colors.fill};`);
        expect(part).toContain(`--CLASS-${i}-LINE: ${colors.line};`);
      }
    }
  });
});
