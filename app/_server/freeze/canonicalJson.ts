import canonicalize from "canonicalize";

/**
 * JSON in its one canonical spelling (RFC 8785), as bytes. Equal content gives equal bytes, and so equal hashes.
 *
 * −0 is written 0. Half of a surrogate pair has no UTF-8 and is refused, as are numbers that are not finite.
 *
 * @throws RangeError that names the place
 */
export function canonicalJson(value: unknown): Uint8Array {
  refuseUnwritable(value, "");
  const text = canonicalize(value);
  if (text === undefined) throw new RangeError("there is nothing to write");
  return new TextEncoder().encode(text);
}

function refuseUnwritable(value: unknown, place: string): void {
  if (typeof value === "string") {
    if (/\p{Surrogate}/u.test(value)) throw new RangeError(`${place || "the text"} holds half of a character; type that place again`);
  } else if (typeof value === "number") {
    if (!Number.isFinite(value)) throw new RangeError(`${place || "the number"} is not a finite number`);
  } else if (Array.isArray(value)) {
    value.forEach((item, index) => refuseUnwritable(item, `${place}[${index}]`));
  } else if (typeof value === "object" && value !== null) {
    for (const [key, item] of Object.entries(value)) {
      refuseUnwritable(key, place);
      refuseUnwritable(item, place ? `${place}.${key}` : key);
    }
  }
}
