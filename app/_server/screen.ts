import "server-only";
import { notFound, redirect } from "next/navigation";
import type { Action, ObjectKind } from "@/db/access";
import type { SignedIn } from "@/db/queries/sessions";
import { allow, type Allowed } from "./authorise";
import { Refusal } from "./problem";
import { currentUser, who } from "./session";

/** The person signed in; whoever is not is sent to sign in and comes back to `path` afterwards. */
export async function signedIn(path: string): Promise<SignedIn> {
  const user = await currentUser();
  if (!user) redirect(signInPath(path));
  return user;
}

export function signInPath(path: string): string {
  return `/sign-in?callbackUrl=${encodeURIComponent(path)}`;
}

/**
 * {@link allow} for a screen: who is not signed in is sent to sign in, what does not exist for this person, or is not theirs
 * to see, is "not found".
 */
export async function allowOnScreen<K extends ObjectKind>(kind: K, id: string, action: Action<K>, path: string): Promise<Allowed<K>> {
  try {
    return await allow(kind, id, action);
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    if (error.status !== 401) notFound();
    // Whoever came by a reading link has no account to sign in with; their link is over.
    if (kind !== "group" && (await who()).readingHashes.length > 0) redirect("/read/none/ended");
    redirect(signInPath(path));
  }
}
