"use server";

import { redirect } from "next/navigation";
import { z } from "zod";
import { checkPassword, hashPassword } from "@/db/passwords";
import { notifyAccess } from "@/db/queries/accessEvents";
import { endAllSessions } from "@/db/queries/sessions";
import { findUser, setName, setPasswordHash } from "@/db/queries/users";
import { formAction } from "../action";

import { database } from "../database";
import { nameField, newPasswordField } from "../fields";
import { countTry, forgetTries } from "../limits";
import { Refusal } from "../problem";
import { currentUser, startSession, stopSession } from "../session";

/** Ends this browser's session. */
export const signOut = formAction(z.object({}), async () => {
  const user = await currentUser();
  await stopSession();
  if (user) await notifyAccess(database(), { userId: user.id });
  redirect("/sign-in");
});

/** Ends every session of this person, on every device. */
export const signOutEverywhere = formAction(z.object({}), async () => {
  const user = await me();
  await endAllSessions(database(), user.id);
  await stopSession();
  await notifyAccess(database(), { userId: user.id });
  redirect("/sign-in?signedOut=everywhere");
});

export const changeName = formAction(z.object({ name: nameField }), async ({ name }) => {
  await setName(database(), (await me()).id, name);
  return { done: "Saved." };
});

/** Sets another password. All other sessions end: whoever else knew the old one is out. */
export const changePassword = formAction(
  z.object({ present: z.string().max(200).optional(), password: newPasswordField }),
  async ({ present = "", password }) => {
    const { id } = await me();
    const user = await findUser(database(), id);
    await countTry("sign-in", `change ${id}`);
    if (user?.passwordHash && !(await checkPassword(user.passwordHash, present)))
      throw new Refusal(403, "Wrong password", "The present password is not that. Nothing was changed.");
    await forgetTries("sign-in", `change ${id}`);
    await setPasswordHash(database(), id, await hashPassword(password));
    await endAllSessions(database(), id);
    await startSession(id);
    await notifyAccess(database(), { userId: id });
    return { done: "Changed. Every other device is signed out." };
  },
);

async function me() {
  const user = await currentUser();
  if (!user) throw new Refusal(401, "Not signed in", "You are not signed in any more. Sign in and try again.");
  return user;
}
