import { ownBodyIdSchema, ownBodySchema, PAGE_FORMAT, type OwnBody, type PageDocument, type Problem } from "@/cells";
import type * as Y from "yjs";
import { freeHandle, type PageBlock, type PageReading } from "./pageBlock";
import { readBlock } from "./readBlock";
import { blocksOf, bodiesOf, byPlace, ownBodiesOf, pageOf, type BlockMap } from "./shape";

interface Cached {
  readonly page: PageBlock | null;
  readonly problems: readonly Problem[];
}

/** What was read of a document before, dropped block by block as blocks change. */
class Reader {
  private readonly cache = new Map<string, Cached>();
  private readonly bodies = new WeakMap<object, OwnBody | string>();
  private last: PageReading | null = null;

  constructor(private readonly doc: Y.Doc) {
    blocksOf(doc).observeDeep((events) => {
      this.last = null;
      for (const event of events) {
        const [key] = event.path;
        if (typeof key === "string") this.cache.delete(key);
        else for (const changed of event.changes.keys.keys()) this.cache.delete(changed);
      }
    });
    for (const map of [pageOf(doc), bodiesOf(doc), ownBodiesOf(doc)]) map.observe(() => (this.last = null));
  }

  read(): PageReading {
    this.last ??= this.assemble();
    return this.last;
  }

  private assemble(): PageReading {
    const title = pageOf(this.doc).get("title");
    const bodies: Record<string, string> = {};
    for (const [alias, body] of bodiesOf(this.doc).entries()) if (typeof body === "string") bodies[alias] = body;
    const all: PageBlock[] = [];
    const problems: Problem[] = [];
    const ownBodies = this.ownBodies(problems);
    for (const [key, map] of blocksOf(this.doc).entries()) {
      const cached = this.one(key, map);
      problems.push(...cached.problems);
      if (cached.page !== null) all.push(cached.page);
    }
    all.sort((a, b) => byPlace({ place: a.order, key: a.key }, { place: b.order, key: b.key }));
    const blocks = this.distinct(
      all.filter((b) => b.binned === undefined),
      problems,
    );
    return { title: typeof title === "string" ? title : "", bodies, ownBodies, blocks, bin: all.filter((b) => b.binned !== undefined), problems };
  }

  /** Own bodies in the order of their ids, whoever put them there first. One that cannot be read is left out, and says so. */
  private ownBodies(problems: Problem[]): Readonly<Record<string, OwnBody>> {
    const found: Record<string, OwnBody> = {};
    for (const [id, stored] of [...ownBodiesOf(this.doc).entries()].sort(([a], [b]) => (a < b ? -1 : 1))) {
      const read = ownBodyIdSchema.safeParse(id).success ? this.ownBody(stored) : "its id is damaged";
      if (typeof read !== "string") found[id] = read;
      else
        problems.push({
          code: "unreadable-body",
          severity: "error",
          text: `The body ${id.slice(0, 40)} of this page cannot be read: ${read}. Choose it anew.`,
        });
    }
    return found;
  }

  private ownBody(stored: unknown): OwnBody | string {
    if (typeof stored !== "object" || stored === null) return "it is no body";
    let read = this.bodies.get(stored);
    if (read === undefined) {
      const parsed = ownBodySchema.safeParse(stored);
      this.bodies.set(stored, (read = parsed.success ? parsed.data : (parsed.error.issues[0]?.message ?? "it has another form")));
    }
    return read;
  }

  private one(key: string, map: BlockMap): Cached {
    const known = this.cache.get(key);
    if (known !== undefined) return known;
    const read = readBlock(key, map);
    this.cache.set(key, read);
    return read;
  }

  /** Two edits can merge into two blocks of one handle (rule D3). The one with the smaller key keeps it; the other is read under a handle beside it, and says so. */
  private distinct(blocks: readonly PageBlock[], problems: Problem[]): readonly PageBlock[] {
    const taken = new Set(blocks.map((b) => b.block.id));
    if (taken.size === blocks.length) return blocks;
    const owner = new Map<string, string>();
    for (const { key, block } of blocks) {
      const other = owner.get(block.id);
      if (other === undefined || key < other) owner.set(block.id, key);
    }
    return blocks.map((page) => {
      if (owner.get(page.block.id) === page.key) return page;
      const id = freeHandle(page.block.id, (handle) => taken.has(handle));
      taken.add(id);
      problems.push({
        code: "two-blocks-of-one-handle",
        severity: "error",
        block: id,
        text: `Two blocks are called ${page.block.id}. This one is read as ${id} until you rename it; formulas that say ${page.block.id} mean the other.`,
      });
      return { ...page, block: { ...page.block, id } };
    });
  }
}

const readers = new WeakMap<Y.Doc, Reader>();

/** Reads a live page: what stands on it in order, what lies in its bin, and what is wrong with it. */
export function readPage(doc: Y.Doc): PageReading {
  let reader = readers.get(doc);
  if (reader === undefined) readers.set(doc, (reader = new Reader(doc)));
  return reader.read();
}

/** The page document (JSON) of a live page, without its bin (rule D2). */
export function toPageDocument(doc: Y.Doc): PageDocument {
  const { title, bodies, ownBodies, blocks } = readPage(doc);
  const empty = pageOf(doc).get("empty");
  const isThere = (field: string, held: object): boolean => Object.keys(held).length > 0 || (Array.isArray(empty) && empty.includes(field));
  const named = { ...(isThere("bodies", bodies) ? { bodies } : {}), ...(isThere("ownBodies", ownBodies) ? { ownBodies } : {}) };
  return { format: PAGE_FORMAT, title, ...named, blocks: blocks.map((b) => b.block) };
}
