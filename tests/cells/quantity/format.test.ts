import { describe, expect, it } from "vitest";
import { formatNumber, formatUncertain } from "@/cells";

// Rounding rule: Particle Data Group, Workman et al. 2022, Prog. Theor. Exp. Phys., section 5.3.
describe("numbers as people read them", () => {
  it.each([
    [1.0857, 0.0121, "1.086(12)", "1.086 ± 0.012"],
    [0.0919, 0.00312, "0.0919(31)", "0.0919 ± 0.0031"],
    [9.58, 0.88, "9.6(9)", "9.6 ± 0.9"],
    [9.58, 0.96, "9.6(1.0)", "9.6 ± 1.0"],
    [450.2, 12.3, "450(12)", "450 ± 12"],
    [123.4, 55, "120(60)", "120 ± 60"],
    [5, 0.0999, "5.00(10)", "5.00 ± 0.10"],
    [-0.066, 0.005, "−0.066(5)", "−0.066 ± 0.005"],
    [-3.4e-5, 1e-6, "−3.40(10) × 10⁻⁵", "(−3.40 ± 0.10) × 10⁻⁵"],
  ])("writes %d ± %d", (value, sigma, concise, plusMinus) => {
    expect(formatUncertain(value, sigma)).toBe(concise);
    expect(formatUncertain(value, sigma, "plus-minus")).toBe(plusMinus);
  });

  it("gives an unknown σ no digits of its own", () => {
    expect(formatUncertain(24.1, null)).toBe("24.10");
    expect(formatUncertain(24.1, Number.NaN)).toBe("24.10");
  });

  it("never writes a minus before a zero", () => {
    expect(formatUncertain(-0.0001, 0.5)).toBe("0.0(5)");
    expect(formatNumber(-0)).toBe("0");
  });
});
