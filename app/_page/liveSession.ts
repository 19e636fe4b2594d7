import type { Awareness } from "y-protocols/awareness";
import * as Y from "yjs";
import type { Draft } from "@/realtime/client";
import { createEdits, createUndo, readPage } from "@/realtime/document";
import type { PickedRow, SaveState } from "./contract";
import { goToPlace } from "./goTo";
import { initialState } from "./initialState";
import { startPageEngine } from "./pageEngine";
import { createPageStore, type PageActions, type PageStore } from "./pageStore";
import { readPresence, spokenPicks } from "./presence";
import type { LivePageProps } from "./props";
import { liveSourceUrl } from "./sourceUrls";
import { shareStructure } from "./structure";
import { uploadSource } from "./upload";

/** A page's connection, as the session needs it: the shared document, who is there, and what became of one's edits. */
export interface PageConnection {
  readonly doc: Y.Doc;
  readonly awareness: Awareness;
  close(): void;
}

export interface ConnectionEvents {
  /** Called with every change of what "Saved" says. */
  readonly onSave: (save: SaveState) => void;
  /** The document holds the page: from the server, or from this browser's own store. */
  readonly onReady: () => void;
  /** The server says that one may only read now, with a sentence. */
  readonly onEnded: (sentence: string) => void;
  /** This browser keeps unsent work on this page that must not merge by itself (rule A6). */
  readonly onDrafts: (drafts: readonly Draft[]) => void;
}

export type Connect = (props: LivePageProps, events: ConnectionEvents) => PageConnection;

export interface LiveSession {
  readonly store: PageStore;
  /** Connects and calculates; returns what ends both. Only in the browser. */
  start(): () => void;
  /** State vector of what is on the screen, base64, for freezing exactly that. */
  stateVector(): string;
}

function base64(bytes: Uint8Array): string {
  let text = "";
  for (const byte of bytes) text += String.fromCharCode(byte);
  return btoa(text);
}

/**
 * One person's stay on a live page: the shared document read once a frame, the engine kept up to date, picks and places told to
 * the others. Knows no React.
 */
export function createLiveSession(props: LivePageProps, connect: Connect): LiveSession {
  const { page, me, role } = props;
  const mayEdit = me !== null && (role === "lead" || role === "analyst");
  let running: { readonly connection: PageConnection; readonly undo: Y.UndoManager | null; readonly engine: ReturnType<typeof startPageEngine> } | null = null;

  const say = (field: string, value: unknown) => running?.connection.awareness.setLocalStateField(field, value);
  const actions: PageActions = {
    pick(rows: readonly PickedRow[]) {
      store.set({ picked: rows });
      say("picked", spokenPicks(rows));
    },
    trace: (request) => running?.engine.askTrace(request),
    nearest: (request) => running?.engine.nearest(request) ?? Promise.resolve(null),
    stopSimulation: (handle, isStopped) => running?.engine.stopSimulation(handle, isStopped),
    enter: (key) => say("block", key),
    undo: () => void running?.undo?.undo(),
    redo: () => void running?.undo?.redo(),
    show(place) {
      const key = store.get().blocks.find((b) => b.block.id === place.block || b.block.formerly?.includes(place.block) === true)?.key;
      if (key !== undefined) goToPlace(key, place);
    },
  };
  const store = createPageStore(
    initialState({ pageId: page.id, mode: mayEdit ? "edit" : "read", title: page.title, document: props.initialDocument ?? null, me, people: props.people }),
    actions,
  );

  const start = () => {
    let frame = 0;
    let isReady = false;
    const engine = startPageEngine(store, liveSourceUrl(page.id));

    /** Takes over what the document says now; parts that did not change stay the identical objects. */
    const read = () => {
      frame = 0;
      if (!isReady) return;
      const old = store.get();
      const { title, bodies, ownBodies, blocks, bin } = readPage(connection.doc);
      const shared = {
        title,
        bodies: shareStructure(old.bodies, bodies),
        ownBodies: shareStructure(old.ownBodies, ownBodies),
        blocks: shareStructure(old.blocks, blocks),
        bin: shareStructure(old.bin, bin),
      };
      const changes = shared.bodies !== old.bodies || shared.ownBodies !== old.ownBodies || shared.blocks !== old.blocks;
      store.set({ ...shared, ...(changes ? { calculating: true } : {}) });
      if (changes) engine.update(shared);
    };
    const later = () => {
      // A hidden tab gets no frames; it catches up when it is looked at.
      if (frame === 0) frame = requestAnimationFrame(read);
    };

    const connection = connect(props, {
      onSave: (save) => store.set({ save }),
      onReady() {
        if (isReady) return;
        isReady = true;
        read();
        if (mayEdit && me !== null)
          store.set({ edits: createEdits(connection.doc, me), live: undo === null ? null : { awareness: connection.awareness, undoManager: undo } });
      },
      onEnded(sentence) {
        store.set({ mode: "read", edits: null, live: null, save: { kind: "refused", text: sentence, waiting: store.get().save?.waiting ?? 0 } });
      },
      onDrafts: (drafts) => store.set({ drafts }),
    });
    const { doc, awareness } = connection;
    const undo = mayEdit ? createUndo(doc) : null;
    running = { connection, undo, engine };

    const seePeople = () => {
      const states = awareness.getStates() as ReadonlyMap<number, Readonly<Record<string, unknown>>>;
      store.set({ present: shareStructure(store.get().present, readPresence(states, doc.clientID, me)) });
    };
    doc.on("update", later);
    awareness.on("change", seePeople);
    seePeople();
    // The first paint's document is calculated at once; the live one takes its place.
    const first = store.get();
    if (first.blocks.length > 0) engine.update(first);
    store.set({
      services: {
        propose: (bytes, name) => engine.propose(bytes, name),
        preview: (bytes, name, columns) => engine.preview(bytes, name, columns),
        async upload(bytes, name, onProgress, signal) {
          const uploaded = await uploadSource(page.id, bytes, name, onProgress, signal);
          engine.giveSource(uploaded.sha256, bytes);
          return uploaded;
        },
        async sourceBytes(sha256) {
          const answer = await fetch(liveSourceUrl(page.id)(sha256), { credentials: "same-origin" });
          if (!answer.ok) throw new Error(`The server answered ${answer.status}.`);
          return new Uint8Array(await answer.arrayBuffer());
        },
      },
    });
    return () => {
      cancelAnimationFrame(frame);
      doc.off("update", later);
      awareness.off("change", seePeople);
      undo?.destroy();
      connection.close();
      engine.stop();
      running = null;
      store.set({ edits: null, live: null, services: null });
    };
  };

  return {
    store,
    start,
    stateVector: () => (running === null ? "" : base64(Y.encodeStateVector(running.connection.doc))),
  };
}
