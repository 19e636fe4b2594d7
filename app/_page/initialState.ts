import type { PageDocument } from "@/cells";
import { blocksOfDocument } from "@/realtime/document";
import type { PageMode } from "./contract";
import type { PageState } from "./pageStore";

export interface InitialPage {
  readonly pageId: string;
  readonly mode: PageMode;
  readonly title: string;
  readonly document: PageDocument | null;
  readonly me: { readonly id: string; readonly name: string } | null;
  readonly people?: Readonly<Record<string, string>> | undefined;
}

/** A page as it is first painted, on the server too: the document as it is stored, no results yet. */
export function initialState({ pageId, mode, title, document, me, people }: InitialPage): PageState {
  return {
    pageId,
    mode,
    title: document?.title ?? title,
    blocks: document === null ? [] : blocksOfDocument(document),
    bin: [],
    bodies: document?.bodies ?? {},
    ownBodies: document?.ownBodies ?? {},
    results: null,
    loading: new Set(),
    calculating: true,
    simulating: new Map(),
    fault: null,
    edits: null,
    me,
    present: [],
    save: null,
    // What a browser keeps is read after the first paint, which must be the same on server and browser.
    settings: { uncertainty: "concise", light: "system", projector: false },
    picked: [],
    traced: null,
    people: people ?? {},
    services: null,
    live: null,
    drafts: [],
    classes: new Map(),
  };
}
