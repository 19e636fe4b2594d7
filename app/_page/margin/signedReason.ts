import { dayOf } from "../times";

/** Who said something and on which day: "Runa Haavik, 3 March 2026"; "" where the document says neither. */
function signature(said: { readonly by?: string | undefined; readonly at?: string | undefined }, people: Readonly<Record<string, string>>): string {
  return [nameOf(said.by, people), said.at === undefined ? "" : dayOf(said.at)].filter(Boolean).join(", ");
}

function nameOf(by: string | undefined, people: Readonly<Record<string, string>>): string {
  if (by === undefined) return "";
  // Snapshots carry opaque ids; an id without a name says nothing.
  return people[by] ?? (/^[0-9a-f]{8}-/.test(by) ? "" : by);
}

/** A reason as a sentence, signed. */
export function signedReason(
  said: { readonly reason: string; readonly by?: string | undefined; readonly at?: string | undefined },
  people: Readonly<Record<string, string>>,
): string {
  const reason = /[.!?]$/.test(said.reason) ? said.reason : `${said.reason}.`;
  return `${reason} ${signature(said, people)}`.trim();
}
