import { describe, expect, it } from "vitest";
import { assertOwnOrigin } from "@/app/_server/origin";
import { localPath } from "@/app/_server/localPath";

const ours = "https://cotectic.example.org,http://127.0.0.1:3000";
const from = (headers: Record<string, string>) => () => assertOwnOrigin(new Headers(headers), ours);

describe("a state-changing request", () => {
  it("is taken from our own pages", () => {
    expect(from({ origin: "https://cotectic.example.org" })).not.toThrow();
    expect(from({ origin: "http://127.0.0.1:3000" })).not.toThrow();
    expect(from({ origin: "null", "sec-fetch-site": "same-origin" })).not.toThrow();
    expect(from({ "sec-fetch-site": "same-origin" })).not.toThrow();
  });
  it.each([
    {},
    { origin: "null" },
    { origin: "https://elsewhere.example" },
    { origin: "https://cotectic.example.org.elsewhere.example" },
    { origin: "http://cotectic.example.org" },
    { origin: "https://cotectic.example.org:444" },
    { origin: "https://elsewhere.example", "sec-fetch-site": "same-origin" },
    { "sec-fetch-site": "same-site" },
    { "sec-fetch-site": "cross-site" },
    { "sec-fetch-site": "none" },
    { origin: "https://elsewhere.example", host: "elsewhere.example", "x-forwarded-host": "cotectic.example.org" },
  ])("is refused in words from anywhere else: %j", (headers) => {
    expect(from(headers)).toThrow(/not from a page of this server/);
  });
});

describe("where to go after signing in", () => {
  it.each([
    ["/pages/1?x=2", "/pages/1?x=2"],
    ["//elsewhere.example", "/"],
    ["/\\elsewhere.example", "/"],
    ["https://elsewhere.example", "/"],
    ["javascript:alert(1)", "/"],
    [undefined, "/"],
    [["/a", "/b"], "/"],
  ])("is on this server: %j", (path, expected) => expect(localPath(path)).toBe(expected));
});
