import * as Y from "yjs";

/** What an update is before it is applied (rule H2): decoding it proves nothing about whose it is. */
export type Judgement =
  /** `clients`: ids that nobody had and that are the sender's from now on. */
  | { readonly is: "fine"; readonly clients: readonly number[] }
  /** It builds on something that is not here. */
  | { readonly is: "gap" }
  | { readonly is: "malformed"; readonly reason: string }
  /** It brings something new under the mark of somebody else's browser. */
  | { readonly is: "foreign"; readonly client: number };

/** Clocks beyond this are no work of hands; they would poison the state vector. */
const MOST_CLOCK = 2 ** 40;
const MOST_CLIENT = 2 ** 53 - 1;

/**
 * Judges an update against the document it is meant for, without applying it.
 *
 * @param owners whose each client id is; `null` for those of the server
 */
export function judge(doc: Y.Doc, owners: ReadonlyMap<number, string | null>, userId: string, update: Uint8Array): Judgement {
  let decoded: ReturnType<typeof Y.decodeUpdate>;
  try {
    decoded = Y.decodeUpdate(update);
  } catch {
    return { is: "malformed", reason: "The server could not read an edit of this page. Reload the page." };
  }
  const next = new Map<number, number>();
  const known = (client: number): number => next.get(client) ?? Y.getState(doc.store, client);
  const fresh = new Set<number>();
  for (const struct of decoded.structs) {
    const { client, clock } = struct.id;
    const end = clock + struct.length;
    if (!(client >= 0 && client <= MOST_CLIENT && end <= MOST_CLOCK && struct.length > 0))
      return { is: "malformed", reason: "An edit of this page is damaged. Reload the page." };
    if (struct instanceof Y.Skip || clock > known(client)) return { is: "gap" };
    if (end <= known(client)) continue;
    next.set(client, end);
    if (fresh.has(client)) continue;
    const owner = owners.get(client);
    const isKnown = owners.has(client) || Y.getState(doc.store, client) > 0;
    if (isKnown && owner !== userId) return { is: "foreign", client };
    fresh.add(client);
  }
  const isHere = (id: Y.ID | null): boolean => id === null || id.clock < known(id.client);
  for (const struct of decoded.structs) {
    if (!(struct instanceof Y.Item)) continue;
    // Before it is integrated, an item's parent is a root's name, an id, or follows from its neighbour.
    const parent: unknown = struct.parent;
    if (!isHere(struct.origin) || !isHere(struct.rightOrigin) || (parent instanceof Y.ID && !isHere(parent))) return { is: "gap" };
  }
  for (const [client, ranges] of decoded.ds.clients) {
    if (ranges.some((range) => range.clock + range.len > known(client))) return { is: "gap" };
  }
  return { is: "fine", clients: [...fresh].filter((client) => !owners.has(client)) };
}
