/** An answer that is no success: a status, what is wrong in a few words, and a sentence that says what to do. */
export class Refusal extends Error {
  override readonly name = "Refusal";
  constructor(
    readonly status: number,
    readonly title: string,
    readonly detail: string,
    /** More for a program to read, beside the sentence. */
    readonly more: Readonly<Record<string, unknown>> = {},
    readonly headers: Readonly<Record<string, string>> = {},
  ) {
    super(detail);
  }
}

/** A refusal as a problem document (RFC 9457). */
export function problemResponse(refusal: Refusal): Response {
  return new Response(JSON.stringify({ title: refusal.title, status: refusal.status, detail: refusal.detail, ...refusal.more }), {
    status: refusal.status,
    headers: { "content-type": "application/problem+json; charset=utf-8", "cache-control": "no-store", ...refusal.headers },
  });
}

/** What anybody gets for an error that nobody foresaw; what it was stands in the server's log. */
export function unforeseen(error: unknown): Refusal {
  console.error(error);
  const code = error instanceof Error && "code" in error ? String(error.code) : "";
  if (/^(ECONN|57P|08)/.test(code))
    return new Refusal(503, "The database does not answer", "Nothing was changed. Wait a moment and try again.", {}, { "retry-after": "5" });
  return new Refusal(
    500,
    "Something went wrong here",
    "Nothing was changed. Try again; if it happens again, tell whoever runs this server what you were doing and when.",
  );
}
