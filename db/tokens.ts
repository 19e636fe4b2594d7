import { createHash, randomBytes } from "node:crypto";

/** A new secret for a session, an invitation or a reading link: 256 random bits, safe in a URL and a cookie. */
export function newToken(): string {
  return randomBytes(32).toString("base64url");
}

/** What is stored in place of a secret, so that reading the database lets nobody in: SHA-256, hexadecimal. */
export function hashToken(token: string): string {
  return createHash("sha256").update(token, "utf8").digest("hex");
}
