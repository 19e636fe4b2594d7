"use server";

import { headers } from "next/headers";
import { redirect } from "next/navigation";
import { z } from "zod";
import { hashPassword } from "@/db/passwords";
import { addGroup } from "@/db/queries/groups";
import { acceptInvitation, findInvitation } from "@/db/queries/invitations";
import { addUser } from "@/db/queries/users";
import { formAction } from "../action";

import { database } from "../database";
import { emailField, groupNameField, nameField, newPasswordField } from "../fields";
import { countTry, placeOf } from "../limits";
import { Refusal } from "../problem";
import { startSession } from "../session";

/** Makes an account and a group with oneself as lead, and signs in. */
export const signUp = formAction(
  z.object({ name: nameField, email: emailField, password: newPasswordField, group: groupNameField }),
  async ({ name, email, password, group }) => {
    const user = await newUser(name, email, password);
    const groupId = await addGroup(database(), group, user);
    await startSession(user);
    redirect(`/groups/${groupId}`);
  },
);

/** Makes an account by an invitation, joins its group, and signs in. The mailed link has shown that the address is theirs. */
export const signUpInvited = formAction(
  z.object({ name: nameField, password: newPasswordField, token: z.string().max(100) }),
  async ({ name, password, token }) => {
    const invitation = await findInvitation(database(), token);
    if (invitation?.state !== "open") throw new Refusal(410, "Not open", "This invitation is not open any more. Ask for a new one.");
    const user = await newUser(name, invitation.email, password, new Date());
    await acceptInvitation(database(), invitation.id, user);
    await startSession(user);
    redirect(`/groups/${invitation.groupId}`);
  },
);

async function newUser(name: string, email: string, password: string, emailVerified?: Date): Promise<string> {
  await countTry("sign-up from", placeOf(await headers()));
  const user = await addUser(database(), { name, email, passwordHash: await hashPassword(password), ...(emailVerified ? { emailVerified } : {}) });
  if (!user) throw new Refusal(409, "There is an account", "There is an account with this e-mail already. Sign in with it instead.");
  return user.id;
}
