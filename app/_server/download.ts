import "server-only";

export interface Download {
  /** File name to save it under. */
  readonly name: string;
  readonly mediaType: string;
  /** True for what never changes under its address. It is still for this browser alone. */
  readonly immutable: boolean;
}

/** Bytes to be saved, never to be shown: an uploaded file must not run as a page of ours. */
export function bytesResponse(bytes: Uint8Array, { name, mediaType, immutable }: Download): Response {
  const ascii = name.replaceAll(/[^\x20-\x7e]|["\\%]/g, "_");
  return new Response(bytes.slice(), {
    headers: {
      "content-type": mediaType,
      "content-length": String(bytes.length),
      "content-disposition": `attachment; filename="${ascii}"; filename*=UTF-8''${encodeURIComponent(name)}`,
      "cache-control": immutable ? "private, max-age=31536000, immutable" : "no-store",
      "x-content-type-options": "nosniff",
      "content-security-policy": "default-src 'none'; sandbox",
    },
  });
}
