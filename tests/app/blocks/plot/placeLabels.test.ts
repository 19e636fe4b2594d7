import { describe, expect, it } from "vitest";
import { placeLabels, type LabelRequest } from "@/app/_blocks/plot/placeLabels";

const frame = { left: 0, top: 0, right: 400, bottom: 300 };
const label = (x: number, y: number): LabelRequest => ({ x, y, width: 60, height: 16, gap: 10 });

describe("labels", () => {
  it("stand at the right of a point where nothing is in the way", () => {
    const [place] = placeLabels([label(100, 100)], [], frame);
    expect(place?.left).toBeGreaterThan(100);
  });

  it("stay inside the frame", () => {
    const [place] = placeLabels([label(395, 5)], [], frame);
    expect(place?.left).toBeLessThan(340);
    expect(place?.top).toBeGreaterThanOrEqual(0);
  });

  it("do not cover each other", () => {
    const [a, b] = placeLabels([label(100, 100), label(104, 102)], [], frame);
    if (a === undefined || b === undefined) throw new Error("expected two places");
    const apart = a.left + 60 <= b.left || b.left + 60 <= a.left || a.top + 16 <= b.top || b.top + 16 <= a.top;
    expect(apart).toBe(true);
  });

  it("keep off points", () => {
    const crowd = Array.from({ length: 20 }, (_, i) => ({ x: 112 + i * 3, y: 92 }));
    const [place] = placeLabels([label(100, 100)], crowd, frame);
    const covered = crowd.filter((o) => place !== undefined && o.x > place.left && o.x < place.left + 60 && o.y > place.top && o.y < place.top + 16);
    expect(covered).toHaveLength(0);
  });
});
