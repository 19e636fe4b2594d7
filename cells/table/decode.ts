import { CellError } from "../errors";
import { quotas } from "./raw";

export interface Decoded {
  readonly text: string;
  readonly encoding: "UTF-8" | "UTF-16 LE" | "UTF-16 BE" | "Latin-1";
}

/** First bytes of files that people drop here by mistake, and what to say. */
const notTables: readonly (readonly [begins: readonly number[], what: string])[] = [
  [[0x25, 0x50, 0x44, 0x46], "a PDF. Copy the table out of it, or ask its authors for the data file"],
  [[0x89, 0x50, 0x4e, 0x47], "a PNG image. A table must be text"],
  [[0xff, 0xd8, 0xff], "a JPEG image. A table must be text"],
  [[0x47, 0x49, 0x46, 0x38], "a GIF image. A table must be text"],
  [[0x49, 0x49, 0x2a, 0x00], "a TIFF image. A table must be text"],
  [[0xd0, 0xcf, 0x11, 0xe0], "a spreadsheet of the old .xls kind. Save the sheet as CSV or XLSX and upload that"],
  [[0x50, 0x4b, 0x03, 0x04], "a zip archive. Unpack it and upload the table inside"],
  [[0x1f, 0x8b], "a gzip archive. Unpack it and upload the table inside"],
  [[0x37, 0x7a, 0xbc, 0xaf], "a 7z archive. Unpack it and upload the table inside"],
  [[0x52, 0x61, 0x72, 0x21], "a RAR archive. Unpack it and upload the table inside"],
];

/**
 * The text of a source's bytes: UTF-8, UTF-16 with or without a byte order mark, else Latin-1 (read as Windows-1252, which
 * only adds to it).
 *
 * @throws CellError `source-empty`, `source-too-big`, `source-not-text`
 */
export function decodeText(bytes: Uint8Array): Decoded {
  if (bytes.length === 0)
    throw new CellError("source-empty", "The file is empty: it has no bytes at all. Upload a table with a line of headers and at least one row.");
  if (bytes.length > quotas.bytes)
    throw new CellError(
      "source-too-big",
      `The file has ${Math.ceil(bytes.length / 1048576)} MiB, and a source may have ${quotas.bytes / 1048576}. Split it, or leave out columns that are not needed.`,
    );
  for (const [begins, what] of notTables) if (begins.every((byte, i) => bytes[i] === byte)) throw new CellError("source-not-text", `This is ${what}.`);
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return wide(bytes.subarray(2), "utf-16le", "UTF-16 LE");
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return wide(bytes.subarray(2), "utf-16be", "UTF-16 BE");
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return narrow(bytes.subarray(3));
  const zeros = zeroBytes(bytes.subarray(0, 4096));
  // Text of Western languages in UTF-16 has a zero in every second byte.
  if (zeros.odd > 0.3 && zeros.even < 0.05) return wide(bytes, "utf-16le", "UTF-16 LE");
  if (zeros.even > 0.3 && zeros.odd < 0.05) return wide(bytes, "utf-16be", "UTF-16 BE");
  return narrow(bytes);
}

function narrow(bytes: Uint8Array): Decoded {
  if (bytes.includes(0))
    throw new CellError(
      "source-not-text",
      "This is not a table: the file holds zero bytes, as programs and images do and text does not. Save the table as CSV and upload that.",
    );
  try {
    return { text: checked(new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes)), encoding: "UTF-8" };
  } catch (error) {
    if (error instanceof CellError) throw error;
    return { text: checked(new TextDecoder("windows-1252").decode(bytes)), encoding: "Latin-1" };
  }
}

function wide(bytes: Uint8Array, label: string, encoding: Decoded["encoding"]): Decoded {
  if (bytes.length % 2 === 1)
    throw new CellError(
      "source-not-text",
      "The file begins as UTF-16 text and ends in half a character, so it is not whole. Save it again and upload it anew.",
    );
  return { text: checked(new TextDecoder(label, { ignoreBOM: true }).decode(bytes)), encoding };
}

/** Refuses what decodes but is no text: more than a few control characters. */
function checked(text: string): string {
  let controls = 0;
  const length = Math.min(text.length, 65536);
  for (let i = 0; i < length; i++) {
    const code = text.charCodeAt(i);
    if (code === 0 || (code < 32 && code !== 9 && code !== 10 && code !== 13 && code !== 12)) controls++;
  }
  if (controls > 2 + length / 1000)
    throw new CellError(
      "source-not-text",
      "This is not a table: the file is full of control characters, so it is not text. Save the table as CSV and upload that.",
    );
  return text;
}

function zeroBytes(bytes: Uint8Array): { readonly even: number; readonly odd: number } {
  let even = 0;
  let odd = 0;
  for (let i = 0; i < bytes.length; i++)
    if (bytes[i] === 0) {
      if (i % 2 === 0) even++;
      else odd++;
    }
  const half = Math.max(1, bytes.length / 2);
  return { even: even / half, odd: odd / half };
}
