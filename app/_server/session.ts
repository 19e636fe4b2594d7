import "server-only";
import { cookies } from "next/headers";
import { cache } from "react";
import { cookieNames, credentialsFrom, isSecure, type Credentials } from "@/db/credentials";
import { createSession, endSession, userBySession, type SignedIn } from "@/db/queries/sessions";
import type { Who } from "@/db/queries/subjects";
import { database } from "./database";

/** How our cookies are set: out of reach of scripts, never sent along from other sites' requests, for the whole host. */
export function cookieOptions(expires: Date) {
  return { httpOnly: true, sameSite: "lax", secure: isSecure(), path: "/", expires } as const;
}

async function credentials(): Promise<Credentials> {
  const jar = await cookies();
  const names = cookieNames(isSecure());
  return credentialsFrom(jar.get(names.session)?.value, jar.get(names.reading)?.value);
}

/** The person who asks, looked up in the database once a request; null when nobody is signed in. */
export const currentUser = cache(async (): Promise<SignedIn | null> => userBySession(database(), (await credentials()).sessionHash));

/** Who asks, as the access rules want it: the person signed in and the reading links the browser has opened. */
export const who = cache(async (): Promise<Who> => {
  const [user, given] = await Promise.all([currentUser(), credentials()]);
  return { userId: user?.id ?? null, readingHashes: given.readingHashes };
});

/** Signs somebody in on this browser. */
export async function startSession(userId: string): Promise<void> {
  const { token, expires } = await createSession(database(), userId);
  (await cookies()).set(cookieNames(isSecure()).session, token, cookieOptions(expires));
}

/** Ends this browser's session, in the database and in its cookie. */
export async function stopSession(): Promise<void> {
  const { sessionHash } = await credentials();
  if (sessionHash) await endSession(database(), sessionHash);
  (await cookies()).delete(cookieNames(isSecure()).session);
}
