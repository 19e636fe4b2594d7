import { describe, expect, it } from "vitest";
import { inWords } from "@/app/_site/When";

const now = new Date("2026-11-24T15:00:00Z");
const said = (iso: string, as: "day" | "moment" = "moment", zone = "UTC") => inWords(new Date(iso), now, as, zone);

describe("a moment in words", () => {
  it("is a time today, then yesterday, then a day, then a day with its year", () => {
    expect(said("2026-11-24T14:32:10Z")).toBe("14:32 today");
    expect(said("2026-11-23T23:59:00Z")).toBe("yesterday");
    expect(said("2026-11-18T00:00:00Z")).toBe("18 November");
    expect(said("2025-03-03T00:00:00Z")).toBe("3 March 2025");
  });
  it("is the reader's own day", () => {
    expect(said("2026-11-23T23:30:00Z", "moment", "Europe/Helsinki")).toBe("01:30 today");
    expect(said("2026-12-31T23:30:00Z", "day", "Europe/Helsinki")).toBe("1 January 2027");
  });
  it("is a whole date where a day is asked for", () => expect(said("2026-11-24T14:32:10Z", "day")).toBe("24 November 2026"));
});
