"use client";

import { setNonce } from "get-nonce";

declare global {
  interface Window {
    /** Kept by the first script of the document. */
    cotecticNonce?: string;
  }
}

/** The nonce of this page's content security policy, for styles that libraries put in at run time; "" on the server. */
export function pageNonce(): string {
  return typeof window === "undefined" ? "" : (window.cotecticNonce ?? "");
}

// The scroll lock of dialogs asks for the nonce when it mounts, before any effect of ours could hand it over.
const nonce = pageNonce();
if (nonce !== "") setNonce(nonce);
