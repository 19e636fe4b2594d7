import { describe, expect, it } from "vitest";
import { readPresence } from "@/app/_page/presence";

describe("who is on the page", () => {
  const me = { id: "u1", name: "Ines Okafor" };
  it("is read from what others send without trusting it", () => {
    const states = new Map<number, Record<string, unknown>>([
      [1, {}],
      [2, { user: { id: "u2", name: "Tomás", color: "#2A7152" }, block: "k1", picked: [{ table: "th", row: 3 }, { table: 4 }, null] }],
      [3, { user: { id: "u3", name: "X", color: "url(javascript:1)" }, block: 7, picked: "all" }],
      [4, { user: "nobody" }],
    ]);
    const found = readPresence(states, 1, me);
    expect(found.map((p) => [p.name, p.block, p.isMe, p.picked.length])).toEqual([
      ["Ines Okafor", null, true, 0],
      ["Tomás", "k1", false, 1],
      ["X", null, false, 0],
    ]);
    expect(found[1]?.color).toBe("#2A7152");
    expect(found[2]?.color).toMatch(/^var\(--/);
  });
});
