import NextAuth from "next-auth";
import { authOptions } from "@/app/_server/auth/options";

export interface Answer {
  status: number;
  body: unknown;
  /** Where it leads, for an answer that redirects. */
  location: string;
  cookies: Map<string, string>;
}

/** Asks next-auth, as its handler is asked by Next. */
export async function ask(
  path: string[],
  method: string,
  body: Record<string, string>,
  cookies: Map<string, string>,
  place: string,
  query: Record<string, string> = {},
): Promise<Answer> {
  const answer: Answer = { status: 200, body: undefined, location: "", cookies: new Map() };
  const headers = new Map<string, string[]>();
  const response = {
    status: (status: number) => ((answer.status = status), response),
    getHeader: (name: string) => headers.get(name),
    setHeader: (name: string, value: string | string[]) => (headers.set(name, [value].flat()), response),
    json: (json: unknown) => void (answer.body = json),
    send: (sent: unknown) => void (answer.body = sent),
    end: () => undefined,
  };
  const asked = { query: { nextauth: path, ...query }, method, body, cookies: Object.fromEntries(cookies), headers: { "x-forwarded-for": place } };
  await (NextAuth as (request: unknown, response: unknown, options: unknown) => Promise<unknown>)(asked, response, authOptions());
  answer.location = headers.get("Location")?.[0] ?? "";
  for (const cookie of headers.get("Set-Cookie") ?? []) {
    const [, name = "", value = ""] = /^([^=]+)=([^;]*)/.exec(cookie) ?? [];
    answer.cookies.set(name, decodeURIComponent(value));
  }
  return answer;
}
