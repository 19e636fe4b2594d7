import "server-only";
import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { connection } from "./database";
import { Refusal } from "./problem";

const limits = {
  /** Wrong passwords for one address. */
  "sign-in": { points: 10, duration: 15 * 60 },
  /** Wrong passwords from one place, whatever the address. */
  "sign-in from": { points: 60, duration: 15 * 60 },
  "sign-up from": { points: 20, duration: 3600 },
  /** Invitations a group sends. */
  invite: { points: 60, duration: 24 * 3600 },
  upload: { points: 120, duration: 3600 },
  freeze: { points: 60, duration: 3600 },
  "reading link from": { points: 120, duration: 3600 },
} as const;

export type Limit = keyof typeof limits;

const made = new Map<Limit, RateLimiterPostgres>();

function limiter(limit: Limit): RateLimiterPostgres {
  let found = made.get(limit);
  if (!found) {
    found = new RateLimiterPostgres({
      storeClient: connection().pool,
      storeType: "pool",
      tableName: "rate_limits",
      tableCreated: true,
      keyPrefix: limit,
      ...limits[limit],
    });
    made.set(limit, found);
  }
  return found;
}

/** Counts one try. @throws Refusal 429 that says how long to wait */
export async function countTry(limit: Limit, key: string): Promise<void> {
  try {
    await limiter(limit).consume(key);
  } catch (error) {
    throw tooMany(error);
  }
}

/** Refuses when the tries are used up, without counting one. @throws Refusal 429 */
export async function refuseIfUsedUp(limit: Limit, key: string): Promise<void> {
  const found = await limiter(limit).get(key);
  if (found && found.consumedPoints >= limits[limit].points) throw tooMany(found);
}

/** Forgets the tries, after one that succeeded. */
export async function forgetTries(limit: Limit, key: string): Promise<void> {
  await limiter(limit).delete(key);
}

function tooMany(error: unknown): unknown {
  if (!(error instanceof RateLimiterRes)) return error;
  const seconds = Math.max(1, Math.ceil(error.msBeforeNext / 1000));
  const wait = seconds > 90 ? `${Math.ceil(seconds / 60)} minutes` : `${seconds} seconds`;
  return new Refusal(429, "Too many tries", `That was tried too often. Wait ${wait} and try again.`, {}, { "retry-after": String(seconds) });
}

/**
 * Where a request came from, for counting. Next writes the socket's address into `X-Forwarded-For` where no proxy did; a
 * list's last entry is the one the nearest proxy wrote.
 */
export function placeOf(headers: Pick<Headers, "get">): string {
  return headers.get("x-forwarded-for")?.split(",").at(-1)?.trim() || "unknown";
}
