import { describe, expect, it } from "vitest";
import { credentialsFromCookies, READING_TOKENS, readingTokens, withReadingToken } from "@/db/credentials";
import { hashToken, newToken } from "@/db/tokens";

describe("cookies", () => {
  it("give hashes, never the secrets", () => {
    const [session, reading] = [newToken(), newToken()];
    const read = credentialsFromCookies(`a=1; cotectic-session=${session}; cotectic-reading=${reading}`, false);
    expect(read).toEqual({ sessionHash: hashToken(session), readingHashes: [hashToken(reading)] });
  });
  it("have another name over https, and the one does not stand for the other", () => {
    expect(credentialsFromCookies(`cotectic-session=${newToken()}`, true).sessionHash).toBeNull();
    expect(credentialsFromCookies(`__Secure-cotectic-session=${newToken()}`, true).sessionHash).not.toBeNull();
  });
  it("that are nonsense give nothing", () => {
    for (const header of [undefined, "", ";;;", "cotectic-session", "cotectic-reading=a.b.c", "=x"])
      expect(credentialsFromCookies(header, false)).toEqual({ sessionHash: null, readingHashes: [] });
  });
  it("keep the newest reading links and each once", () => {
    let cookie: string | undefined;
    const tokens = Array.from({ length: READING_TOKENS + 2 }, newToken);
    for (const token of [...tokens, tokens.at(-2) ?? ""]) cookie = withReadingToken(cookie, token);
    expect(readingTokens(cookie)).toEqual([tokens.at(-2), tokens.at(-1), ...tokens.slice(2, -2).reverse()]);
  });
});
