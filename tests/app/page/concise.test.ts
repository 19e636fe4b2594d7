import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { counted, decimalsOf, formatNumber, formatP, formatRange, formatValue, speakValue, withUnit, writeValue } from "@/app/_ui/concise";
import { seed } from "@/tests/support/seed";

describe("a value with its σ", () => {
  it.each([
    [1.0864, 0.0123, "1.086(12)"],
    [0.8464, 0.009, "0.846(9)"],
    [9.58, 0.93, "9.6(9)"],
    [0.111, 0.0018, "0.1110(18)"],
    [-0.0661, 0.0052, "−0.066(5)"],
    [806, 40, "806(40)"],
    [24.1, 0.15, "24.10(15)"],
    [12.34, 1.4, "12.3(1.4)"],
    [0.99, 0.0098, "0.990(10)"],
    [0, 0.02, "0.000(20)"],
  ])("writes %f ± %f as %s", (value, sigma, text) => {
    expect(formatValue(value, sigma)).toBe(text);
  });

  it("writes ± with thin spaces", () => {
    expect(formatValue(1.0864, 0.0123, { form: "plus-minus" })).toBe("1.086\u2009±\u20090.012");
    expect(formatValue(3.414e-6, 1.2e-7, { form: "plus-minus" })).toBe("(3.41\u2009±\u20090.12)\u2009×\u200910⁻⁶");
  });

  it("says that a σ is not known and never takes it for 0", () => {
    expect(formatValue(1.5, null)).toBe("1.500(?)");
    expect(formatValue(1.5, NaN)).toBe("1.500(?)");
    expect(formatValue(1.5, null, { unknown: "" })).toBe("1.500");
    expect(formatValue(1.5, 0)).toBe("1.500");
    expect(speakValue(1.5, null)).toBe("1.500, uncertainty unknown");
  });

  it("keeps a column's own decimals unless the σ would vanish in them", () => {
    expect(formatValue(39.71, 0.357, { decimals: 2 })).toBe("39.71(36)");
    expect(formatValue(34.9, 0.2, { decimals: 1 })).toBe("34.9(2)");
    expect(formatValue(45, 0.21, { decimals: 0 })).toBe("45.00(21)");
  });

  it("writes no value as a dash", () => {
    expect(formatValue(null, null)).toBe("–");
    expect(formatValue(NaN, 1)).toBe("–");
  });

  it("writes a number whose text reads back within half a unit of its last place", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-3, max: 1e5, noNaN: true }), fc.double({ min: 1e-3, max: 0.5, noNaN: true }), (value, relative) => {
        const sigma = value * relative;
        const written = writeValue(value, sigma);
        const shown = Number(written.value);
        // The σ keeps at least one digit, so the value is never rounded by more than half a σ of one digit.
        expect(Math.abs(shown - value)).toBeLessThanOrEqual(Math.max(sigma, 0.5) * 0.51);
        expect(written.sigma).toMatch(/^\(\d+(\.\d+)?\)$/);
        expect(written.sigma).not.toBe("(0)");
      }),
      { seed },
    );
  });
});

describe("numbers", () => {
  it("shows what is far from one with a power of ten", () => {
    expect(formatNumber(3.4e-6)).toBe("3.400\u2009×\u200910⁻⁶");
    expect(formatNumber(-12345678)).toBe("−1.235\u2009×\u200910⁷");
    expect(formatNumber(0)).toBe("0");
    expect(formatNumber(-0.00001, 1)).toBe("−1\u2009×\u200910⁻⁵");
  });

  it("writes both ends of a range to the same decimals", () => {
    expect(formatRange(0.67, 1.352)).toBe("0.670 – 1.352");
    expect(formatRange(-0.5, 12.25)).toBe("−0.50 – 12.25");
    expect(formatRange(2, 2)).toBe("2.000");
  });

  it("reads the decimals a source writes", () => {
    expect(decimalsOf("24.10")).toBe(2);
    expect(decimalsOf("<0.05")).toBe(2);
    expect(decimalsOf("36,58")).toBe(2);
    expect(decimalsOf("806")).toBe(0);
    expect(decimalsOf("n.d.")).toBe(0);
  });

  it("writes p, units and counts", () => {
    expect(formatP(0.281)).toBe("0.28");
    expect(formatP(0.0031)).toBe("0.003");
    expect(formatP(1e-9)).toBe("<\u20090.001");
    expect(withUnit("9.6(9)", "wt%")).toBe("9.6(9)\u2009wt%");
    expect(withUnit("1.09", "1")).toBe("1.09");
    expect(counted(1, "sample")).toBe("1 sample");
    expect(counted(3, "problem")).toBe("3 problems");
  });
});
