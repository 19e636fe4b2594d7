import { describe, expect, it } from "vitest";
import { withQuotes } from "@/app/_blocks/note/noteMarkdown";
import type { NoteValue } from "@/cells";

const value = (span: readonly [number, number], name: string): NoteValue => ({ span, name, shown: "1", unit: "", value: 1, sigma: null });

describe("live values of a note", () => {
  const text = "cross at {{t.x}}, near {{CI}}.";
  const values = [value([9, 16], "t.x"), value([23, 29], "CI")];

  it("become links to their place in the results", () => {
    expect(withQuotes(text, values)).toBe("cross at [value](#value-0), near [value](#value-1).");
  });

  it("stay as written where the text has moved on since", () => {
    expect(withQuotes("then they cross at {{t.x}}.", values)).toBe("then they cross at {{t.x}}.");
  });
});
