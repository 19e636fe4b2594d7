import { describe, expect, it } from "vitest";
import { oneAtATime } from "@/app/_server/calculation/oneAtATime";
import { canonicalJson } from "@/app/_server/freeze/canonicalJson";
import { zip } from "@/app/_server/freeze/zip";

describe("long calculations", () => {
  it("of one group follow each other, of two groups do not wait, and a failed one holds up nobody", async () => {
    const log: string[] = [];
    let open: () => void = () => undefined;
    const held = new Promise<void>((resolve) => (open = resolve));
    const first = oneAtATime("a", async () => {
      log.push("a1");
      await held;
      throw new Error("failed");
    });
    const second = oneAtATime("a", async () => void log.push("a2"));
    await oneAtATime("b", async () => void log.push("b1"));
    expect(log).toEqual(["a1", "b1"]);
    open();
    await expect(first).rejects.toThrow("failed");
    await second;
    expect(log).toEqual(["a1", "b1", "a2"]);
  });
});

describe("canonical JSON", () => {
  const text = (value: unknown) => new TextDecoder().decode(canonicalJson(value));
  it("has one spelling: keys in order, shortest numbers, no space (RFC 8785, section 3.2.4)", () => {
    expect(text({ numbers: [333333333.33333329, 1e30, 4.5, 2e-3, 1e-27], string: '€$\u000f\nA\'B"\\\\"/', literals: [null, true, false] })).toBe(
      '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}',
    );
    expect(text({ "\u20ac": 1, "\r": 2, "1": 3, "\u0080": 4 })).toBe('{"\\r":2,"1":3,"\u0080":4,"\u20ac":1}');
  });
  it("writes −0 as 0", () => expect(text([-0])).toBe("[0]"));
  it.each([[["\ud800"]], [{ "a\udc00": 1 }], [{ x: [{ y: Number.NaN }] }], [[Number.POSITIVE_INFINITY]]])(
    "refuses what has no canonical spelling: %j",
    (value) => expect(() => canonicalJson(value)).toThrow(RangeError),
  );
  it("names the place", () => expect(() => canonicalJson({ x: [{ y: Number.NaN }] })).toThrow(/^x\[0\]\.y/));
});

describe("a zip", () => {
  it("has the same bytes in every time zone", () => {
    const files = [{ path: "a.txt", bytes: new TextEncoder().encode("a".repeat(1000)) }];
    const zone = process.env.TZ;
    const made = ["UTC", "Pacific/Kiritimati", "America/St_Johns"].map((tz) => {
      process.env.TZ = tz;
      return Buffer.from(zip(files, "folder")).toString("base64");
    });
    if (zone === undefined) delete process.env.TZ;
    else process.env.TZ = zone;
    expect(new Set(made).size).toBe(1);
  });
});
