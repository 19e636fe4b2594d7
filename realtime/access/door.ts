import { may, type Role } from "@/db/access";
import type { Database } from "@/db/client";
import type { Credentials } from "@/db/credentials";
import { findPage } from "@/db/queries/pages";
import { userBySession } from "@/db/queries/sessions";
import { standingOnPage } from "@/db/queries/subjects";
import { Close, closeSentences, type CloseCode } from "../protocol";

/** Somebody let in to a page, and for how long at most. */
export interface Admission {
  readonly is: "admitted";
  /** `null` for a guest by link. */
  readonly userId: string | null;
  readonly name: string;
  readonly role: Role;
  readonly mayEdit: boolean;
  readonly groupId: string;
  readonly linkId: string | null;
  readonly epoch: number;
  readonly until: Date;
}

export interface Turned {
  readonly is: "turned away";
  readonly code: CloseCode;
  readonly reason: string;
}

const turned = (code: CloseCode, reason: string = closeSentences[code]): Turned => ({ is: "turned away", code, reason });

/**
 * Who stands before a page, by what their browser brought (rules A1, A2). Asked at the upgrade and again whenever something
 * about access may have changed. The decision itself is `may` in db/access.ts.
 */
export async function admit(db: Database, credentials: Credentials, pageId: string): Promise<Admission | Turned> {
  const user = await userBySession(db, credentials.sessionHash);
  const standing = await standingOnPage(db, { userId: user?.id ?? null, readingHashes: credentials.readingHashes }, pageId);
  if (standing === null) return turned(Close.notFound);
  const { subject, object } = standing;
  if (subject.role === "nobody" || !may(subject, "read", object)) {
    if (user !== null) return turned(Close.forbidden);
    return credentials.readingHashes.length > 0 && credentials.sessionHash === null
      ? turned(Close.forbidden, "The link you read this page with is no longer open. Ask whoever gave it to you for another.")
      : turned(Close.signedOut);
  }
  const page = await findPage(db, pageId);
  if (page === null) return turned(Close.notFound);
  const isGuest = subject.role === "guest";
  return {
    is: "admitted",
    userId: isGuest ? null : (user?.id ?? null),
    name: isGuest ? "" : (user?.name ?? ""),
    role: subject.role,
    mayEdit: may(subject, "edit", object),
    groupId: object.groupId,
    linkId: isGuest ? subject.linkId : null,
    epoch: page.epoch,
    until: isGuest ? subject.until : (user?.expires ?? new Date()),
  };
}
