import { and, asc, desc, eq, max } from "drizzle-orm";
import type { OwnBody } from "@/cells";
import type { Database } from "../client";
import { groupBodies, groups, users } from "../schema";

/** One version of a body of a group's own. */
export interface BodyOfGroup {
  readonly code: string;
  readonly version: number;
  readonly body: OwnBody;
  /** Name of the person who entered it; null where they are not known any more. */
  readonly madeBy: string | null;
  readonly madeAt: Date;
}

/** More versions of bodies than this, a group does not hold. */
export const MOST_VERSIONS = 500;

/** All versions of all bodies of a group: by short name, the newest version of each first. */
export async function bodiesOfGroup(db: Database, groupId: string): Promise<BodyOfGroup[]> {
  const rows = await db
    .select({ row: groupBodies, madeBy: users.name })
    .from(groupBodies)
    .leftJoin(users, eq(users.id, groupBodies.madeBy))
    .where(eq(groupBodies.groupId, groupId))
    .orderBy(asc(groupBodies.code), desc(groupBodies.version));
  return rows.map(({ row, madeBy }) => ({
    code: row.code,
    version: row.version,
    body: {
      name: row.name,
      ...(row.description === null ? {} : { description: row.description }),
      source: row.source,
      fromMemory: row.fromMemory,
      values: row.values,
    },
    madeBy,
    madeAt: row.madeAt,
  }));
}

export interface NewBody {
  readonly groupId: string;
  readonly code: string;
  readonly body: OwnBody;
  /** The version that the person saw and corrects; 0 for a body that is new. */
  readonly after: number;
  readonly by: string;
}

/** Why a version was not added: somebody added one meanwhile (or the short name is taken), or the group holds too many. */
export type BodyRefused = { readonly present: number } | "too many";

/**
 * Adds the next version of a body, or the first.
 *
 * @returns its version, or why it was not added
 */
export async function addBody(db: Database, { groupId, code, body, after, by }: NewBody): Promise<number | BodyRefused> {
  return db.transaction(async (tx) => {
    // Two people who correct one body at once must not both make the same version: the group's row is the lock.
    await tx.select({ id: groups.id }).from(groups).where(eq(groups.id, groupId)).for("update");
    const [last] = await tx
      .select({ version: max(groupBodies.version) })
      .from(groupBodies)
      .where(and(eq(groupBodies.groupId, groupId), eq(groupBodies.code, code)));
    const present = last?.version ?? 0;
    if (present !== after) return { present };
    if ((await tx.$count(groupBodies, eq(groupBodies.groupId, groupId))) >= MOST_VERSIONS) return "too many";
    const { name, description, source, fromMemory, values } = body;
    const version = present + 1;
    await tx
      .insert(groupBodies)
      .values({ groupId, code, version, name, description: description ?? null, source, fromMemory, values: [...values], madeBy: by });
    return version;
  });
}
