const SIGNATURE = [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a];
const METRES_PER_INCH = 0.0254;

const table = Uint32Array.from({ length: 256 }, (_, n) => {
  let c = n;
  for (let k = 0; k < 8; k++) c = (c & 1) === 1 ? 0xedb88320 ^ (c >>> 1) : c >>> 1;
  return c;
});

/** CRC-32 of ISO 3309, as PNG has it (RFC 2083, appendix 15). */
function crc(bytes: Uint8Array): number {
  let c = 0xffffffff;
  for (const byte of bytes) c = (table[(c ^ byte) & 0xff] ?? 0) ^ (c >>> 8);
  return (c ^ 0xffffffff) >>> 0;
}

function chunk(type: string, content: Uint8Array): Uint8Array {
  const made = new Uint8Array(content.length + 12);
  const view = new DataView(made.buffer);
  view.setUint32(0, content.length);
  made.set(new TextEncoder().encode(type), 4);
  made.set(content, 8);
  view.setUint32(8 + content.length, crc(made.subarray(4, 8 + content.length)));
  return made;
}

/** The texts of a PNG: keywords as the standard has them (Title, Description, Software), in UTF-8 (iTXt). */
function textChunk(keyword: string, text: string): Uint8Array {
  const head = [...new TextEncoder().encode(keyword), 0, 0, 0, 0, 0];
  const body = new TextEncoder().encode(text);
  const content = new Uint8Array(head.length + body.length);
  content.set(head);
  content.set(body, head.length);
  return chunk("iTXt", content);
}

/**
 * A PNG with its density (pHYs, pixels a metre) and texts, right after its header; a density it had before is replaced.
 *
 * @throws Error where the bytes are no PNG
 */
export function withDensity(png: Uint8Array, dpi: number, texts: Readonly<Record<string, string>> = {}): Uint8Array<ArrayBuffer> {
  if (SIGNATURE.some((byte, i) => png[i] !== byte)) throw new Error("expected a PNG, got other bytes");
  const view = new DataView(png.buffer, png.byteOffset, png.byteLength);
  const parts: Uint8Array[] = [png.subarray(0, 8)];
  const perMetre = Math.round(dpi / METRES_PER_INCH);
  const physical = new Uint8Array(9);
  new DataView(physical.buffer).setUint32(0, perMetre);
  new DataView(physical.buffer).setUint32(4, perMetre);
  physical[8] = 1;
  for (let at = 8; at < png.length;) {
    const end = at + 12 + view.getUint32(at);
    const type = new TextDecoder().decode(png.subarray(at + 4, at + 8));
    if (type !== "pHYs") parts.push(png.subarray(at, end));
    if (type === "IHDR") parts.push(chunk("pHYs", physical), ...Object.entries(texts).map(([keyword, text]) => textChunk(keyword, text)));
    at = end;
  }
  const made = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    made.set(part, at);
    at += part.length;
  }
  return made;
}
