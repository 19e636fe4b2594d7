import { z } from "zod";

/** Fields that several forms have, with the sentence each refusal shows. */
export const nameField = z.string().trim().min(1, "Say what you are called").max(120, "That name is longer than 120 characters");
export const emailField = z.string().trim().toLowerCase().max(254, "That address is too long").pipe(z.email("That is not an e-mail address"));
export const newPasswordField = z.string().min(10, "A password has at least 10 characters").max(200, "A password has at most 200 characters");
export const groupNameField = z.string().trim().min(1, "Give the group a name").max(120, "A group's name has at most 120 characters");
export const idField = z.uuid("That is not an address of ours");
export const roleField = z.enum(["lead", "analyst", "reader"], "Choose lead, analyst or reader");
