import { eq } from "drizzle-orm";
import type { Database } from "../client";
import { users } from "../schema";

export type User = typeof users.$inferSelect;

export async function findUserByEmail(db: Database, email: string): Promise<User | null> {
  const [user] = await db.select().from(users).where(eq(users.email, email.toLowerCase()));
  return user ?? null;
}

export async function findUser(db: Database, id: string): Promise<User | null> {
  const [user] = await db.select().from(users).where(eq(users.id, id));
  return user ?? null;
}

/** Adds a person; null when the address already has an account. */
export async function addUser(db: Database, person: { name: string; email: string; passwordHash: string; emailVerified?: Date }): Promise<User | null> {
  const [user] = await db
    .insert(users)
    .values({ ...person, email: person.email.toLowerCase() })
    .onConflictDoNothing({ target: users.email })
    .returning();
  return user ?? null;
}

export async function setName(db: Database, id: string, name: string): Promise<void> {
  await db.update(users).set({ name }).where(eq(users.id, id));
}

export async function setPasswordHash(db: Database, id: string, passwordHash: string): Promise<void> {
  await db.update(users).set({ passwordHash }).where(eq(users.id, id));
}
