"use client";

import { setNonce } from "get-nonce";

/** The nonce of this page's content security policy, for styles that libraries put in at run time; "" on the server. */
export function pageNonce(): string {
  if (typeof document === "undefined") return "";
  return document.querySelector<HTMLMetaElement>('meta[name="csp-nonce"]')?.content ?? "";
}

// The scroll lock of dialogs asks for the nonce when it mounts, before any effect of ours could hand it over.
const nonce = pageNonce();
if (nonce !== "") setNonce(nonce);
