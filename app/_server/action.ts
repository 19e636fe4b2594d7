import "server-only";
import { headers } from "next/headers";
import { unstable_rethrow } from "next/navigation";
import type { z } from "zod";
import { assertOwnOrigin } from "./origin";
import { Refusal, unforeseen } from "./problem";

/** What a form shows after it was sent: a sentence of what is wrong or what was done, and what was typed. */
export interface FormState {
  readonly problem?: string;
  readonly done?: string;
  /** The sent values, so that nothing must be typed twice; never passwords. */
  readonly values?: Readonly<Record<string, string>>;
}

/**
 * A server action for a form: takes requests from our own pages only, checks the fields, and gives every refusal back as a
 * sentence beside the form.
 */
export function formAction<S extends z.ZodType>(
  schema: S,
  run: (fields: z.output<S>) => Promise<FormState | void>,
): (before: FormState, form: FormData) => Promise<FormState> {
  return async (_before, form) => {
    const values: Record<string, string> = {};
    for (const [name, value] of form) if (typeof value === "string" && !name.startsWith("$") && !/password/i.test(name)) values[name] = value;
    try {
      assertOwnOrigin(await headers());
      const read = schema.safeParse(Object.fromEntries([...form].filter(([name]) => !name.startsWith("$"))));
      if (!read.success) return { problem: `${read.error.issues[0]?.message ?? "Something is missing"}.`, values };
      return (await run(read.data)) ?? {};
    } catch (error) {
      // A redirect is thrown too, and is no error.
      unstable_rethrow(error);
      const refusal = error instanceof Refusal ? error : unforeseen(error);
      return { problem: refusal.detail, values };
    }
  };
}
