import { problemSentence } from "../upload";

/** An answer of the server that is no success, with its sentence and whatever else it said. */
export class RequestError extends Error {
  override readonly name = "RequestError";
  constructor(
    readonly status: number,
    message: string,
    readonly body: unknown,
  ) {
    super(message);
  }
}

/** Asks the server for JSON. @throws RequestError with a sentence for the person */
export async function request<T>(method: "GET" | "POST" | "DELETE", path: string, body?: unknown): Promise<T> {
  let answer: Response;
  try {
    answer = await fetch(path, {
      method,
      credentials: "same-origin",
      ...(body === undefined ? {} : { headers: { "content-type": "application/json" }, body: JSON.stringify(body) }),
    });
  } catch {
    throw new RequestError(0, "The server could not be reached. Try again when you are online.", null);
  }
  const said: unknown = await answer.json().catch(() => null);
  if (!answer.ok) throw new RequestError(answer.status, problemSentence(answer.status, said), said);
  return said as T;
}
