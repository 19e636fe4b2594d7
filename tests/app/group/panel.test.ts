import { describe, expect, it } from "vitest";
import { COLUMN, layOut, orderBySources, PITCH } from "@/app/(group)/groups/[groupId]/_panel/layOut";

const block = (key: string, kind: string, source?: string, width = 12) => ({ key, kind, name: key, width, ...(source ? { source } : {}) });
const page = (id: string, ...outline: ReturnType<typeof block>[]) => ({ id, outline });

describe("the correlation panel", () => {
  it("puts pages that share sources beside each other", () => {
    const pages = [
      page("a", block("1", "data", "x")),
      page("b", block("2", "data", "y")),
      page("c", block("3", "data", "x")),
      page("d", block("4", "data", "y"), block("5", "data", "x")),
    ];
    expect(orderBySources(pages).map((p) => p.id)).toEqual(["a", "c", "d", "b"]);
    expect(orderBySources([])).toEqual([]);
  });

  it("stacks beds and parts one among blocks that stand side by side", () => {
    const { columns } = layOut([page("a", block("1", "note"), block("2", "formula", undefined, 8), block("3", "plot", undefined, 4), block("4", "data"))], []);
    const layers = columns[0]?.layers ?? [];
    expect(layers.map((l) => l.y)).toEqual([0, 28, 28, 28 + 88]);
    expect(layers.map((l) => l.last)).toEqual([true, false, true, true]);
    expect((layers[1]?.w ?? 0) + (layers[2]?.w ?? 0)).toBeCloseTo(COLUMN);
    expect(layers[1]?.h).toBe(layers[2]?.h);
    expect(columns[0]?.height).toBe(28 + 88 + 80);
  });

  it("joins neighbours that use one source, and dashes another version of it", () => {
    const sources = [
      { sha256: "x", name: "finds.csv" },
      { sha256: "x2", name: "finds.csv" },
      { sha256: "y", name: "else.csv" },
    ];
    const { bands } = layOut(
      [
        page("a", block("1", "data", "x")),
        page("b", block("2", "note"), block("3", "data", "x")),
        page("c", block("4", "data", "x2")),
        page("d", block("5", "data", "y")),
      ],
      sources,
    );
    expect(bands.map((b) => [b.label, b.older])).toEqual([
      ["finds", false],
      ["finds, another version", true],
    ]);
    expect(bands[0]?.left).toEqual({ x: COLUMN, top: 0, bottom: 80 });
    expect(bands[0]?.right).toEqual({ x: PITCH, top: 28, bottom: 108 });
  });

  it("draws no block of a kind it does not know", () => {
    expect(layOut([page("a", block("1", "hologram"))], []).columns[0]).toMatchObject({ height: 0, layers: [] });
  });
});
