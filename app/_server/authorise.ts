import "server-only";
import { may, type Action, type ObjectKind, type ObjectOf, type Objects, type Subject } from "@/db/access";
import { standingOnGroup, standingOnPage, standingOnSnapshot, type Standing, type Who } from "@/db/queries/subjects";
import { database } from "./database";
import { Refusal } from "./problem";
import { who } from "./session";

const find: { readonly [K in ObjectKind]: (who: Who, id: string) => Promise<Standing<K> | null> } = {
  group: (asks, id) => standingOnGroup(database(), asks, id),
  page: (asks, id) => standingOnPage(database(), asks, id),
  snapshot: (asks, id) => standingOnSnapshot(database(), asks, id),
};

/** Somebody who may do what they asked for. */
export interface Allowed<K extends ObjectKind> {
  readonly subject: Exclude<Subject, { role: "nobody" }>;
  readonly object: ObjectOf<K>;
  /** The person's id; null for guests. */
  readonly userId: string | null;
}

/**
 * Looks up where the one who asks stands, and asks the rules. Every page, action and route handler begins here.
 *
 * Whoever may not even know of a thing is told that it does not exist.
 *
 * @throws Refusal 401 when signing in could help, 404 when there is no such thing for this person, 403 when their role is not enough
 */
export async function allow<K extends ObjectKind>(kind: K, id: string, action: Action<K>): Promise<Allowed<K>> {
  const asks = await who();
  const standing = await find[kind](asks, id);
  const subject = standing?.subject ?? { role: "nobody" };
  if (!standing || subject.role === "nobody") {
    if (asks.userId === null) throw new Refusal(401, "Not signed in", `Sign in to see this ${kind}, or open it by a reading link.`);
    throw new Refusal(
      404,
      `No such ${kind}`,
      `There is no ${kind} at this address that you may see. Ask the person who sent you here whether you are in their group.`,
    );
  }
  if (!may(subject, action, standing.object))
    throw new Refusal(
      403,
      "Not yours to do",
      forbidden(kind, action, subject.role, standing.object.kind === "page" && may<K>(subject, action, unarchived(standing.object))),
    );
  return { subject, object: standing.object, userId: subject.role === "guest" ? null : subject.userId };
}

function forbidden(kind: ObjectKind, action: string, role: string, archivedAlone: boolean): string {
  if (archivedAlone) return "This page is archived. Take it out of the archive first.";
  const by = role === "guest" ? "A reading link lets you read" : `Your role in this group is ${role}`;
  return `${by}; to ${action} on this ${kind} asks for more. A lead of the group can change that.`;
}

/** The same object, were it not archived. */
function unarchived<O extends Objects[ObjectKind]>(object: O): O {
  return "archived" in object ? { ...object, archived: false } : object;
}
