import { describe, expect, it } from "vitest";
import { readNumber, readUncertain } from "@/app/_blocks/shared/readNumber";

describe("readNumber", () => {
  it.each([
    ["32.3", 32.3],
    [" −0.5 ", -0.5],
    ["1e-3", 1e-3],
    [".25", 0.25],
  ])("reads %s", (text, value) => {
    expect(readNumber(text)).toEqual({ value });
  });

  it("refuses what can be read two ways", () => {
    expect(readNumber("1,234")).toMatchObject({ problem: expect.stringContaining("decimal sign") as string });
  });

  it("tells nothing from no number", () => {
    expect(readNumber("  ")).toEqual({ empty: true });
    expect(readNumber("12 kg")).toMatchObject({ problem: expect.stringContaining("no number") as string });
  });
});

describe("readUncertain", () => {
  it.each([
    ["32.3 ± 0.5", { value: 32.3, sigma: 0.5 }],
    ["32.3 +- 0.5", { value: 32.3, sigma: 0.5 }],
    ["32.3(5)", { value: 32.3, sigma: 0.5 }],
    ["1.086(12)", { value: 1.086, sigma: 0.012 }],
    ["12.3(1.4)", { value: 12.3, sigma: 1.4 }],
    ["−0.066(5)", { value: -0.066, sigma: 0.005 }],
    ["7", { value: 7 }],
  ])("reads %s", (text, wanted) => {
    expect(readUncertain(text)).toEqual(wanted);
  });

  it("refuses a negative σ", () => {
    expect(readUncertain("3 ± -1")).toMatchObject({ problem: expect.stringContaining("never negative") as string });
  });
});
