import { blockSchema, type Block, type OwnBody, type PageDocument, type Problem } from "@/cells";

/** Who laid a block into the page's bin, and when. */
export interface Binned {
  readonly by: string;
  readonly at: string;
}

/** A block where it stands on the live page. The key never changes; the handle is `block.id`. */
export interface PageBlock {
  readonly key: string;
  /** Fractional order key. */
  readonly order: string;
  readonly block: Block;
  readonly binned?: Binned;
}

/** A live page, read. A block that did not change since the last reading is the identical object. */
export interface PageReading {
  readonly title: string;
  readonly bodies: Readonly<Record<string, string>>;
  /** The group's own bodies that the page carries, by id. One that did not change is the identical object. */
  readonly ownBodies: Readonly<Record<string, OwnBody>>;
  readonly blocks: readonly PageBlock[];
  readonly bin: readonly PageBlock[];
  /** What cannot be read, and handles that two blocks have; by block handle. */
  readonly problems: readonly Problem[];
}

/** The blocks of a page document as a page shows them, for pages that are not live. Keys are the handles. */
export function blocksOfDocument(page: PageDocument): readonly PageBlock[] {
  return page.blocks.map((block, n) => ({ key: block.id, order: n.toString().padStart(6, "0"), block: blockSchema.parse(block) }));
}

/** The handle itself, or the first of `handle_2`, `handle_3` … that is free. */
export function freeHandle(handle: string, taken: (handle: string) => boolean): string {
  if (!taken(handle)) return handle;
  const stem = handle.replace(/_\d+$/, "").slice(0, 34);
  for (let n = 2; ; n++) {
    const candidate = `${stem}_${n.toString()}`;
    if (!taken(candidate)) return candidate;
  }
}
