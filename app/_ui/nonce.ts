"use client";

import { setNonce } from "get-nonce";

/** The nonce of this page's content security policy, for styles that libraries put in at run time; "" on the server. */
export function pageNonce(): string {
  if (typeof document === "undefined") return "";
  return document.querySelector<HTMLMetaElement>('meta[name="csp-nonce"]')?.content ?? "";
}

/** Hands the nonce to the scroll lock that dialogs use. Called once, before the first dialog opens. */
export function allowLibraryStyles(): void {
  const nonce = pageNonce();
  if (nonce !== "") setNonce(nonce);
}
