import { describe, expect, it } from "vitest";
import { saveInWords } from "@/app/_page/connectLive";

describe("what the head says of one's edits", () => {
  const at = new Date(2026, 10, 21, 14, 3);
  it("names the minute at which they reached the disk", () => {
    expect(saveInWords({ kind: "saved", text: "Saved", waiting: 0 }, at).text).toBe("Saved 14:03");
  });
  it("names none before one has edited, and none while edits wait", () => {
    expect(saveInWords({ kind: "saved", text: "Saved", waiting: 0 }, null).text).toBe("Saved");
    expect(saveInWords({ kind: "offline", text: "Offline, 3 edits waiting", waiting: 3 }, at).text).toBe("Offline, 3 edits waiting");
  });
});
