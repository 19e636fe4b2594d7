/** Reading what a person types into a cell: the decimal sign is never guessed where it could mean two things. */

/**
 * Why a typed text is refused, in words; null where it may stand.
 *
 * `1,234` is one thousand two hundred and thirty-four to one reader and 1.234 to another; both are numbers a table could hold.
 */
export function typedFault(text: string, isQuantity: boolean): string | null {
  if (text.length > 2000) return `A cell holds at most 2,000 characters; this text has ${text.length}.`;
  if (!isQuantity) return null;
  const number = text.trim();
  if (/^[<>~]?\s*[-+−]?[1-9]\d{0,2}(,\d{3})+([.(±\s].*)?$/.test(number))
    return `“${number}” can be read in two ways. Write ${number.replace(/,/g, "")} if the comma parts thousands, or ${number.replace(",", ".")} if it is the decimal sign.`;
  return null;
}

/** What a person typed, in the form it is stored: spaces around it gone, a lone decimal comma as a point. */
export function typedStored(text: string, isQuantity: boolean): string {
  const plain = text.trim();
  if (!isQuantity) return plain;
  return plain.replace(/^([<>~]?\s*[-+−]?\d*),(\d+)/, "$1.$2").replace(/−/g, "-");
}

/** A stable id for a new row: never used again, so that two people who add rows at once both keep theirs. */
export function freshRowId(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(8));
  return `t${Array.from(bytes, (b) => b.toString(36).padStart(2, "0")).join("")}`;
}
