import "server-only";
import type { AuthOptions } from "next-auth";
import { decode, encode } from "next-auth/jwt";
import CredentialsProvider from "next-auth/providers/credentials";
import type { OAuthConfig } from "next-auth/providers/oauth";
import { z } from "zod";
import { cookieNames, isSecure } from "@/db/credentials";
import { checkPassword } from "@/db/passwords";
import { findUserByEmail } from "@/db/queries/users";
import { createSession, SESSION_SECONDS } from "@/db/queries/sessions";
import { countTry, forgetTries, placeOf, refuseIfUsedUp } from "../limits";
import { database } from "../database";
import { hashingAdapter } from "./adapter";

const fields = z.object({ email: z.string().trim().toLowerCase().max(254), password: z.string().max(200) });

/**
 * next-auth, with sessions in the database so that they can be revoked.
 *
 * Version 4 makes a database session for identity providers but not for passwords; for those `callbacks.jwt` makes the row
 * and `jwt.encode` returns its secret, which next-auth then sets as the session cookie. (It refuses the combination only
 * when `session.strategy` is spelled out; with an adapter, "database" is its own default.)
 */
export function authOptions(): AuthOptions {
  const secure = isSecure();
  return {
    adapter: hashingAdapter(database()),
    session: { maxAge: SESSION_SECONDS, updateAge: 24 * 3600 },
    pages: { signIn: "/sign-in", signOut: "/sign-in", error: "/sign-in" },
    cookies: { sessionToken: { name: cookieNames(secure).session, options: { httpOnly: true, sameSite: "lax", path: "/", secure } } },
    providers: [byPassword(), ...orcid()],
    callbacks: {
      jwt: async ({ token, user, account }) => {
        if (account?.type !== "credentials" || !user) return token;
        return { ...token, sessionToken: (await createSession(database(), user.id)).token };
      },
      session: ({ session, user }) => ({ ...session, user: { ...session.user, id: user.id } }),
      redirect: ({ url, baseUrl }) =>
        url.startsWith("/") && !url.startsWith("//")
          ? `${baseUrl}${url}`
          : URL.canParse(url) && new URL(url).origin === new URL(baseUrl).origin
            ? url
            : baseUrl,
    },
    jwt: {
      encode: async (given) => (typeof given.token?.sessionToken === "string" ? given.token.sessionToken : encode(given)),
      decode,
    },
  };
}

function byPassword() {
  return CredentialsProvider({
    id: "credentials",
    name: "e-mail and password",
    credentials: { email: { label: "E-mail", type: "email" }, password: { label: "Password", type: "password" } },
    authorize: async (given, request) => {
      const { email, password } = fields.parse(given);
      const place = placeOf(new Headers(request.headers as Record<string, string> | undefined));
      await refuseIfUsedUp("sign-in", email);
      await refuseIfUsedUp("sign-in from", place);
      const user = await findUserByEmail(database(), email);
      if (await checkPassword(user?.passwordHash ?? null, password)) {
        await forgetTries("sign-in", email);
        return user ? { id: user.id, name: user.name, email: user.email } : null;
      }
      await countTry("sign-in", email);
      await countTry("sign-in from", place);
      return null;
    },
  });
}

/** Whether people may sign in with their ORCID iD here. */
export function hasOrcid(): boolean {
  return Boolean(process.env.ORCID_CLIENT_ID && process.env.ORCID_CLIENT_SECRET);
}

/** ORCID, or any OpenID Connect issuer in its place. It gives no e-mail, and accounts are never joined by one. */
function orcid(): OAuthConfig<{ sub: string; name?: string; given_name?: string; family_name?: string }>[] {
  const { ORCID_CLIENT_ID: clientId, ORCID_CLIENT_SECRET: clientSecret, ORCID_ISSUER: issuer = "https://orcid.org" } = process.env;
  if (!clientId || !clientSecret) return [];
  return [
    {
      id: "orcid",
      name: "ORCID",
      type: "oauth",
      wellKnown: `${issuer}/.well-known/openid-configuration`,
      idToken: true,
      checks: ["pkce", "state", "nonce"],
      authorization: { params: { scope: "openid" } },
      clientId,
      clientSecret,
      profile: (profile) => ({
        id: profile.sub,
        name: profile.name ?? [profile.given_name, profile.family_name].filter(Boolean).join(" ") ?? profile.sub,
        email: null,
        image: null,
      }),
    },
  ];
}
