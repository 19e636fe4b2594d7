import { NextResponse, type NextRequest } from "next/server";
import { realtimeAddress } from "@/app/_server/realtimeAddress";

/**
 * Headers for every page: the content security policy with a nonce of this request. Nothing is authorised here; every page,
 * action and route does that itself.
 */
export function proxy(request: NextRequest): NextResponse {
  const nonce = btoa(String.fromCharCode(...crypto.getRandomValues(new Uint8Array(16))));
  const policy = contentSecurityPolicy(nonce, request);
  const headers = new Headers(request.headers);
  headers.set("x-nonce", nonce);
  headers.set("content-security-policy", policy);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set("content-security-policy", policy);
  response.headers.set("x-content-type-options", "nosniff");
  // Nothing is said to other sites. Within ours, forms that are sent before their script has loaded must name their origin.
  response.headers.set("referrer-policy", "same-origin");
  response.headers.set("x-frame-options", "DENY");
  response.headers.set("permissions-policy", "camera=(), microphone=(), geolocation=(), payment=()");
  response.headers.set("cross-origin-opener-policy", "same-origin");
  return response;
}

export const config = { matcher: ["/((?!_next/static|_next/image|mark.svg).*)"] };

function contentSecurityPolicy(nonce: string, request: NextRequest): string {
  const development = process.env.NODE_ENV === "development";
  const realtime = realtimeAddress(request.headers.get("host"));
  const issuers = (process.env.SIGN_IN_ISSUERS ?? "").split(",").filter(Boolean).join(" ");
  return [
    "default-src 'self'",
    // The engine generates WebAssembly; nothing here generates JavaScript.
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic' 'wasm-unsafe-eval'${development ? " 'unsafe-eval'" : ""}`,
    `style-src 'self' ${development ? "'unsafe-inline'" : `'nonce-${nonce}'`}`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self' data:",
    `connect-src 'self' ${realtime}`,
    "worker-src 'self' blob:",
    "object-src 'none'",
    "base-uri 'none'",
    `form-action 'self' ${issuers}`.trim(),
    "frame-ancestors 'none'",
  ].join("; ");
}
