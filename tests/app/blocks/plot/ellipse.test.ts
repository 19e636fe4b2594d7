import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ellipseInWords, heldBy, traceEllipse } from "@/app/_blocks/plot/ellipse";
import { seed } from "../../../support/seed";

describe("error ellipse", () => {
  it("holds 39 % at 1σ and 95 % at 2.4477σ in two dimensions", () => {
    // χ² with two degrees of freedom: 1 − exp(−r²/2); the 0.95 quantile is 5.991465 (Abramowitz & Stegun, table 26.8).
    expect(heldBy(1)).toBeCloseTo(0.3934693, 6);
    expect(heldBy(Math.sqrt(5.991465))).toBeCloseTo(0.95, 6);
  });

  it("states its size in words", () => {
    expect(ellipseInWords(1)).toBe("ellipses 1σ, hold 39 %");
    expect(ellipseInWords(2)).toBe("ellipses 2σ, hold 86 %");
    expect(ellipseInWords(Math.sqrt(5.991465))).toBe("ellipses 95 %");
    expect(ellipseInWords(0)).toBe("no ellipses");
  });

  it("keeps every point at its Mahalanobis distance and closes", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 10, noNaN: true }),
        fc.double({ min: 0.01, max: 10, noNaN: true }),
        fc.double({ min: -0.99, max: 0.99, noNaN: true }),
        fc.double({ min: 0.5, max: 3, noNaN: true }),
        (sx, sy, rho, radius) => {
          const points: [number, number][] = [];
          traceEllipse(1, -2, sx, sy, rho, radius, (x, y) => points.push([x, y]));
          expect(points.at(0)).toEqual(points.at(-1));
          for (const [x, y] of points) {
            const u = (x - 1) / sx;
            const v = (y + 2) / sy;
            const squared = (u * u - 2 * rho * u * v + v * v) / (1 - rho * rho);
            expect(Math.sqrt(squared)).toBeCloseTo(radius, 6);
          }
        },
      ),
      { seed },
    );
  });
});
