import { vi } from "vitest";
import { cookieNames } from "@/db/credentials";
import { createSession } from "@/db/queries/sessions";
import { testDatabase, type TestDatabase } from "../../support/database";

/**
 * What a request brings along, for route handlers called directly: cookies are kept here, as a browser would.
 * The test file must mock `next/headers` with {@link nextHeaders} before it imports a route.
 */
export const browser = { cookies: new Map<string, string>() };

export function nextHeaders() {
  return {
    cookies: async () => ({
      get: (name: string) => (browser.cookies.has(name) ? { name, value: browser.cookies.get(name) ?? "" } : undefined),
      set: (name: string, value: string) => void browser.cookies.set(name, value),
      delete: (name: string) => void browser.cookies.delete(name),
    }),
    headers: async () => new Headers({ origin: OURS, host: "test.example" }),
  };
}

export const OURS = "http://test.example";

/** A database that the application's own connection uses, and an address for it to live at. */
export async function useDatabase(): Promise<TestDatabase> {
  const db = await testDatabase();
  vi.stubEnv("DATABASE_URL", db.url);
  vi.stubEnv("NEXTAUTH_URL", OURS);
  vi.stubEnv("APP_ORIGIN", undefined);
  return db;
}

/** Makes the browser somebody's, or nobody's. */
export async function signInAs(db: TestDatabase, userId: string | null): Promise<void> {
  browser.cookies.clear();
  if (userId) browser.cookies.set(cookieNames(false).session, (await createSession(db.db, userId)).token);
}

export function request(method: string, body?: BodyInit | object, headers: Record<string, string> = {}): Request {
  const plain = typeof body === "object" && body.constructor === Object;
  return new Request(`${OURS}/somewhere`, {
    method,
    headers: { origin: OURS, ...(plain ? { "content-type": "application/json" } : {}), ...headers },
    ...(body === undefined ? {} : { body: plain ? JSON.stringify(body) : (body as BodyInit) }),
  });
}

export const params = <P>(given: P): { params: Promise<P> } => ({ params: Promise.resolve(given) });
