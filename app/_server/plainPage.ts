import "server-only";

/**
 * A whole small page without the framework, for the answers whose status it cannot give (410 Gone). It has the product's
 * look and needs no script.
 */
export function plainPage(request: Request, status: number, title: string, detail: string): Response {
  const nonce = request.headers.get("x-nonce") ?? "";
  const body = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="robots" content="noindex">
<meta name="referrer" content="no-referrer">
<title>${escape(title)} · Cotectic</title>
<style nonce="${escape(nonce)}">${style}</style>
</head>
<body>
<header><a href="/"><svg width="36" height="28" viewBox="0 0 36 28" aria-hidden="true"><path d="M2 3C5 13 10 17 18 18M34 3C31 13 26 17 18 18M18 18V27" fill="none" stroke="currentColor" stroke-width="1.6"/><circle cx="18" cy="18" r="2" fill="currentColor"/></svg><span>Cotectic</span></a></header>
<main><h1>${escape(title)}</h1><p>${escape(detail)}</p></main>
</body>
</html>`;
  return new Response(body, { status, headers: { "content-type": "text/html; charset=utf-8", "cache-control": "no-store", "referrer-policy": "no-referrer" } });
}

const style = `
:root{color-scheme:light dark;--paper:#f6f5f1;--ink:#1d2226;--second:#525b61}
@media (prefers-color-scheme:dark){:root{--paper:#0e1013;--ink:#e9e7e1;--second:#a3a9ae}}
body{margin:0;background:var(--paper);color:var(--ink);font:400 13px/20px "IBM Plex Sans","Helvetica Neue",Arial,sans-serif}
header{border-bottom:1px solid;padding:9px 48px}
header a{display:inline-flex;align-items:center;gap:16px;color:inherit;text-decoration:none;font:500 18px/24px "STIX Two Text",STIXGeneral,"Times New Roman",serif}
main{max-width:520px;margin:0 auto;padding:64px 16px}
h1{margin:0;font:500 30px/34px "STIX Two Text",STIXGeneral,"Times New Roman",serif}
p{margin:12px 0 0;color:var(--second)}
@media (max-width:719px){header{padding:9px 16px}main{padding-top:32px}}
`;

function escape(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;");
}
