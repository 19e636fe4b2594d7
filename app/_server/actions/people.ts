"use server";

import { redirect } from "next/navigation";
import { refresh } from "next/cache";
import { z } from "zod";
import { notifyAccess } from "@/db/queries/accessEvents";
import { addGroup, changeRole as changeRoleOf, findGroup, removeMember, renameGroup as setGroupName, type MemberChange } from "@/db/queries/groups";
import { acceptInvitation, addInvitation, findInvitation, INVITATION_DAYS, withdrawInvitation as withdraw } from "@/db/queries/invitations";
import { formAction } from "../action";
import { allow } from "../authorise";
import { database } from "../database";
import { emailField, groupNameField, idField, roleField } from "../fields";
import { countTry } from "../limits";
import { address, sendMail } from "../mail";
import { Refusal } from "../problem";
import { currentUser } from "../session";

/** Makes another group with oneself as lead. */
export const makeGroup = formAction(z.object({ name: groupNameField }), async ({ name }) => {
  const user = await currentUser();
  if (!user) throw new Refusal(401, "Not signed in", "Sign in first.");
  redirect(`/groups/${await addGroup(database(), name, user.id)}`);
});

export const renameGroup = formAction(z.object({ groupId: idField, name: groupNameField }), async ({ groupId, name }) => {
  await allow("group", groupId, "rename");
  await setGroupName(database(), groupId, name);
  refresh();
  return { done: "Renamed." };
});

/** Invites somebody by mail. When the mail cannot be sent, there is no invitation either. */
export const invite = formAction(z.object({ groupId: idField, email: emailField, role: roleField }), async ({ groupId, email, role }) => {
  await allow("group", groupId, "invite");
  const user = await currentUser();
  const group = await findGroup(database(), groupId);
  if (!user || !group) throw new Refusal(404, "No such group", "There is no such group.");
  await countTry("invite", groupId);
  const { id, token } = await addInvitation(database(), { groupId, email, role, invitedBy: user.id });
  try {
    await sendMail({ to: email, subject: `${user.name} invites you to ${group.name}`, text: letter(user.name, group.name, role, address(`/invite/${token}`)) });
  } catch (error) {
    await withdraw(database(), groupId, id);
    throw error;
  }
  refresh();
  return { done: `Invited ${email}.` };
});

function letter(by: string, group: string, role: string, link: string): string {
  return [
    `${by} invites you to work in the group ${group} on Cotectic, as ${role}.`,
    "",
    "Open this page and press its button:",
    link,
    "",
    `The invitation is good for ${INVITATION_DAYS} days. If you did not expect it, do nothing: without the button nothing happens.`,
    "",
  ].join("\n");
}

export const withdrawInvitation = formAction(z.object({ groupId: idField, invitationId: idField }), async ({ groupId, invitationId }) => {
  await allow("group", groupId, "invite");
  await withdraw(database(), groupId, invitationId);
  refresh();
});

/** Joins a group by an invitation, as the person signed in. */
export const accept = formAction(z.object({ token: z.string().max(100) }), async ({ token }) => {
  const user = await currentUser();
  if (!user) throw new Refusal(401, "Not signed in", "You are not signed in any more. Sign in and open the invitation again.");
  const invitation = await findInvitation(database(), token);
  if (!invitation || !(await acceptInvitation(database(), invitation.id, user.id)))
    throw new Refusal(410, "Not open", "This invitation is not open any more. Ask for a new one.");
  await notifyAccess(database(), { groupId: invitation.groupId, userId: user.id });
  redirect(`/groups/${invitation.groupId}`);
});

export const changeRole = formAction(z.object({ groupId: idField, userId: idField, role: roleField }), async ({ groupId, userId, role }) => {
  await allow("group", groupId, "change role");
  refuseUnlessChanged(await changeRoleOf(database(), groupId, userId, role));
  await notifyAccess(database(), { groupId, userId });
  refresh();
  return { done: "Changed." };
});

export const removePerson = formAction(z.object({ groupId: idField, userId: idField }), async ({ groupId, userId }) => {
  await allow("group", groupId, "remove person");
  refuseUnlessChanged(await removeMember(database(), groupId, userId));
  await notifyAccess(database(), { groupId, userId });
  refresh();
});

function refuseUnlessChanged(change: MemberChange): void {
  if (change === "last lead") throw new Refusal(409, "The last lead", "A group always has a lead. Make somebody else a lead first.");
  if (change === "not in the group") throw new Refusal(404, "Not in the group", "This person is not in the group any more. Reload the page.");
}
