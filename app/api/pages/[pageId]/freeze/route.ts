import { z } from "zod";
import { allow } from "@/app/_server/authorise";
import { freeze } from "@/app/_server/freeze/freeze";
import { countTry } from "@/app/_server/limits";
import { Refusal } from "@/app/_server/problem";
import { json, readJson, route } from "@/app/_server/route";

const body = z.strictObject({
  stateVector: z.base64().max(1_000_000),
  note: z.string().trim().max(2000).optional(),
  acceptFromMemory: z.boolean().optional(),
  /** True for a person who can be shown a list and asked: values from memory are then an answer, and no refusal. */
  asks: z.boolean().optional(),
});

/** Freezes the page as the person sees it. */
export const POST = route<{ pageId: string }>(async (request, { pageId }) => {
  const { object, userId } = await allow("page", pageId, "freeze");
  if (userId === null) throw new Refusal(403, "Not yours to do", "A guest cannot freeze a page.");
  const { stateVector, note, acceptFromMemory, asks } = await readJson(request, body);
  await countTry("freeze", object.groupId);
  const frozen = freeze({
    pageId,
    groupId: object.groupId,
    by: userId,
    stateVector: new Uint8Array(Buffer.from(stateVector, "base64")),
    note: note || null,
    acceptFromMemory: acceptFromMemory ?? false,
  });
  try {
    return json(await frozen, 201);
  } catch (error) {
    if (asks && error instanceof Refusal && error.more.fromMemory !== undefined) return json({ detail: error.detail, fromMemory: error.more.fromMemory });
    throw error;
  }
});
