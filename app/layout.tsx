import type { Metadata, Viewport } from "next";
import { headers } from "next/headers";
import type { ReactNode } from "react";
import "./fonts";
import "./globals.css";

// Nonces differ by request, so nothing may be rendered ahead of one.
export const dynamic = "force-dynamic";

export const metadata: Metadata = {
  title: { default: "Cotectic", template: "%s · Cotectic" },
  description: "Bulk compositions on one live page: ratios with honest uncertainties, trends, crossings and mass balances.",
  referrer: "same-origin",
  icons: { icon: "/mark.svg" },
};

export const viewport: Viewport = {
  width: "device-width",
  initialScale: 1,
  themeColor: [
    { media: "(prefers-color-scheme: light)", color: "#F6F5F1" },
    { media: "(prefers-color-scheme: dark)", color: "#0E1013" },
  ],
};

/**
 * Keeps the nonce that this document's policy was sent with. A later answer of the server renders this layout anew with a nonce
 * of its own, which the browser does not take.
 */
const keepNonce = "window.cotecticNonce=document.currentScript.nonce;";

/** Chooses the light before the first paint, so that nobody in a dark room sees a white flash. */
const chooseLight = `try{var l=localStorage.getItem("cotectic-light")||"system";if(l==="polars"||(l==="system"&&matchMedia("(prefers-color-scheme: dark)").matches))document.documentElement.classList.add("polars")}catch(e){}`;

export default async function RootLayout({ children }: { children: ReactNode }) {
  const nonce = (await headers()).get("x-nonce") ?? "";
  return (
    <html lang="en" suppressHydrationWarning>
      <head>
        <script nonce={nonce} suppressHydrationWarning dangerouslySetInnerHTML={{ __html: keepNonce + chooseLight }} />
      </head>
      <body>{children}</body>
    </html>
  );
}
