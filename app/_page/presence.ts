import { colorOf } from "@/realtime/personColor";
import type { PickedRow, Presence } from "./contract";

/** What a tab says of itself over awareness; name, colour and user are stamped by the server (rule A4). */
export interface SpokenPresence {
  readonly block?: string | null;
  readonly picked?: readonly PickedRow[];
}

const MOST_PICKED = 200;

function isPicked(value: unknown): value is PickedRow {
  if (typeof value !== "object" || value === null) return false;
  const { table, row } = value as { table?: unknown; row?: unknown };
  return typeof table === "string" && (typeof row === "string" || typeof row === "number");
}

/** As many picked rows as fit an awareness message. */
export function spokenPicks(rows: readonly PickedRow[]): readonly PickedRow[] {
  return rows.slice(0, MOST_PICKED / 4);
}

/**
 * Who is on the page, read from awareness states. States come over the wire, so nothing in them is taken for granted.
 *
 * @param own client id of this tab
 */
export function readPresence(
  states: ReadonlyMap<number, Readonly<Record<string, unknown>>>,
  own: number,
  me: { readonly id: string; readonly name: string } | null,
): Presence[] {
  const found: Presence[] = [];
  for (const [clientId, state] of states) {
    const user = typeof state.user === "object" && state.user !== null ? (state.user as Record<string, unknown>) : {};
    const isMe = clientId === own;
    const userId = typeof user.id === "string" ? user.id : isMe ? (me?.id ?? "") : "";
    const name = typeof user.name === "string" ? user.name : isMe ? (me?.name ?? "") : "";
    if (userId === "" || name === "") continue;
    const color = typeof user.color === "string" && /^(#[0-9a-f]{3,8}|var\(--[a-z0-9-]+\)|[a-z]+)$/i.test(user.color) ? user.color : colorOf(userId);
    const picked = Array.isArray(state.picked) ? state.picked.filter(isPicked).slice(0, MOST_PICKED) : [];
    found.push({ clientId, userId, name, color, block: typeof state.block === "string" ? state.block : null, isMe, picked });
  }
  return found;
}
