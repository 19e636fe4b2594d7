"use server";

import { refresh } from "next/cache";
import { z } from "zod";
import { ownBodyCodeSchema, ownBodyId, ownBodySchema, ownSigmaKinds, readOwnTable, saysFromMemory } from "@/cells";
import { addBody as addBodyOf, MOST_VERSIONS } from "@/db/queries/bodies";
import { formAction } from "../action";
import { allow } from "../authorise";
import { database } from "../database";
import { idField } from "../fields";
import { Refusal } from "../problem";

const fields = z.object({
  groupId: idField,
  code: z.string().trim().pipe(ownBodyCodeSchema),
  /** The version that is corrected; 0 for a new body. */
  after: z.coerce.number().int().min(0).max(10_000),
  name: z.string().trim().min(1, "Say what the body is"),
  description: z.string().trim(),
  source: z.string().trim().min(1, 'Give the source: a citation or a DOI, or the words "from memory"'),
  memory: z.literal("on").optional(),
  unit: z.string().max(40),
  sigma: z.enum(ownSigmaKinds, "Choose what the uncertainties are"),
  table: z.string().max(40_000, "A composition has at most 40,000 characters"),
});

/** More sentences than this are counted only. */
const MOST_SAID = 8;

/** Adds a body of the group's own, or the next version of one; every earlier version stays what it is. */
export const addBody = formAction(fields, async ({ groupId, code, after, name, description, source, memory, unit, sigma, table }) => {
  const { userId } = await allow("group", groupId, "add body");
  if (userId === null) throw new Refusal(403, "Not yours to do", "A guest cannot add bodies.");
  const { values, problems } = readOwnTable(table, unit, sigma);
  if (problems.length > 0) {
    const more = problems.length - MOST_SAID;
    throw new Refusal(
      422,
      "Not a composition",
      [...problems.slice(0, MOST_SAID).map(({ text }) => text), ...(more > 0 ? [`${more} more like this.`] : [])].join("\n"),
    );
  }
  if (values.length === 0) throw new Refusal(422, "Not a composition", "Paste the composition: in each line a species, its value and, where known, its σ.");
  const fromMemory = memory === "on" || saysFromMemory(source);
  const read = ownBodySchema.safeParse({ name, ...(description === "" ? {} : { description }), source, fromMemory, values });
  if (!read.success) throw new Refusal(422, "Not a body", `${read.error.issues[0]?.message ?? "Something is missing"}.`);
  const added = await addBodyOf(database(), { groupId, code, body: read.data, after, by: userId });
  if (added === "too many")
    throw new Refusal(409, "Too many bodies", `This group holds ${MOST_VERSIONS} versions of bodies, and no more fit. Whoever runs this server can help.`);
  if (typeof added !== "number") {
    if (after === 0)
      throw new Refusal(409, "Taken", `${code} is the short name of a body of this group already. Make a new version of it, or choose another short name.`);
    throw new Refusal(
      409,
      "Changed meanwhile",
      `Somebody added version ${added.present} of ${code} meanwhile. Look at it, and start from it if yours still differs.`,
    );
  }
  refresh();
  return { done: `Added as ${ownBodyId(code, added)}.` };
});
