import { createHash, generateKeyPairSync, randomUUID, sign } from "node:crypto";
import { createServer, type IncomingMessage } from "node:http";
import type { AddressInfo } from "node:net";

/** An OpenID Connect issuer on loopback, as small as one can be: it signs in one person, and checks PKCE as a real one does. */
export async function startIssuer(person: { sub: string; given_name: string; family_name: string }) {
  const { privateKey, publicKey } = generateKeyPairSync("rsa", { modulusLength: 2048 });
  const codes = new Map<string, { nonce: string; challenge: string }>();
  let url = "";
  const server = createServer((request, response) => {
    void (async () => {
      const reply = (body: object, status = 200) => response.writeHead(status, { "content-type": "application/json" }).end(JSON.stringify(body));
      const path = new URL(request.url ?? "/", url).pathname;
      if (path === "/.well-known/openid-configuration")
        return reply({
          issuer: url,
          authorization_endpoint: `${url}/authorize`,
          token_endpoint: `${url}/token`,
          jwks_uri: `${url}/jwks`,
          response_types_supported: ["code"],
          subject_types_supported: ["public"],
          id_token_signing_alg_values_supported: ["RS256"],
        });
      if (path === "/jwks") return reply({ keys: [{ ...publicKey.export({ format: "jwk" }), kid: "1", alg: "RS256", use: "sig" }] });
      if (path !== "/token") return reply({ error: "not_found" }, 404);
      const sent = new URLSearchParams(await bodyOf(request));
      const code = codes.get(sent.get("code") ?? "");
      const challenge = createHash("sha256")
        .update(sent.get("code_verifier") ?? "")
        .digest("base64url");
      if (!code || code.challenge !== challenge) return reply({ error: "invalid_grant" }, 400);
      const now = Math.floor(Date.now() / 1000);
      const part = (json: object) => Buffer.from(JSON.stringify(json)).toString("base64url");
      const unsigned = `${part({ alg: "RS256", kid: "1" })}.${part({ ...person, iss: url, aud: "client", iat: now, exp: now + 600, nonce: code.nonce })}`;
      return reply({
        access_token: "a",
        token_type: "Bearer",
        id_token: `${unsigned}.${sign("RSA-SHA256", Buffer.from(unsigned), privateKey).toString("base64url")}`,
      });
    })();
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  return {
    url,
    /** The person agrees: gives the code the browser carries back. */
    agree(asked: URLSearchParams): string {
      const code = randomUUID();
      codes.set(code, { nonce: asked.get("nonce") ?? "", challenge: asked.get("code_challenge") ?? "" });
      return code;
    },
    stop: () => server.close(),
  };
}

async function bodyOf(request: IncomingMessage): Promise<string> {
  let body = "";
  for await (const chunk of request) body += String(chunk);
  return body;
}
