import "server-only";
import type { z } from "zod";
import { assertOwnOrigin } from "./origin";
import { problemResponse, Refusal, unforeseen } from "./problem";

type Params = Record<string, string | string[]>;
interface Context<P extends Params> {
  readonly params: Promise<P>;
}
export type Handler<P extends Params> = (request: Request, params: P) => Promise<Response>;

/**
 * A route handler whose errors are problem documents, and which, for anything but GET and HEAD, takes requests from our own
 * pages only.
 */
export function route<P extends Params>(handle: Handler<P>): (request: Request, context: Context<P>) => Promise<Response> {
  return async (request, context) => {
    try {
      if (request.method !== "GET" && request.method !== "HEAD") assertOwnOrigin(request.headers);
      return await handle(request, await context.params);
    } catch (error) {
      return problemResponse(error instanceof Refusal ? error : unforeseen(error));
    }
  };
}

/** The JSON body of a request, checked. @throws Refusal 400 that names the field */
export async function readJson<T>(request: Request, schema: z.ZodType<T>): Promise<T> {
  let body: unknown;
  try {
    body = await request.json();
  } catch {
    throw new Refusal(400, "No JSON", "The body of this request is not JSON.");
  }
  const read = schema.safeParse(body);
  if (read.success) return read.data;
  const issue = read.error.issues[0];
  throw new Refusal(400, "A field is wrong", `${issue?.path.join(".") || "The body"}: ${issue?.message ?? "not as expected"}.`);
}

/** JSON as an answer that nobody keeps. */
export function json(body: unknown, status = 200): Response {
  return Response.json(body, { status, headers: { "cache-control": "no-store" } });
}
