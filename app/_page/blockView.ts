import type { BlockResult } from "@/cells";
import type { PageView } from "./contract";
import type { PageState, PageStore } from "./pageStore";
import { sameEntries } from "./structure";

/**
 * What one block looks at. Two states that agree in all of these need no new drawing of the block, so that typing in one block
 * leaves the others alone.
 */
function lookedAt(state: PageState, key: string): readonly unknown[] {
  const own = state.blocks.find((b) => b.key === key);
  const handle = own?.block.id ?? "";
  const from = state.results?.readsFrom.get(handle) ?? [];
  return [
    own?.block,
    state.results?.blocks.get(handle),
    // What a block reads of formulas stands in its own result; their lines change with every letter that is typed in them.
    ...from.flatMap((f) => [f, ...changesShown(state.results?.blocks.get(f))]),
    // Others by name only: lists to choose from need handles, kinds and titles, not contents.
    state.blocks.map((b) => `${b.key} ${b.block.id} ${b.block.kind} ${b.block.name ?? ""}`).join("\n"),
    state.results === null,
    state.loading.has(handle),
    state.simulating.get(handle),
    state.mode,
    state.edits,
    state.live,
    state.bodies,
    state.ownBodies,
    state.settings,
    state.picked,
    state.traced,
    state.classes,
    state.present.map((p) => (p.block === key || p.picked.length > 0 ? `${p.clientId} ${p.block === key} ${JSON.stringify(p.picked)}` : "")).join("\n"),
  ];
}

function changesShown(result: BlockResult | undefined): readonly unknown[] {
  return result === undefined || result.kind === "formula" ? [result === undefined] : [result];
}

/** A view whose fields always tell the newest state; a new object only when what its block looks at changed. */
function liveView(store: PageStore): PageView {
  const { actions } = store;
  return {
    get pageId() {
      return store.get().pageId;
    },
    get title() {
      return store.get().title;
    },
    get mode() {
      return store.get().mode;
    },
    get blocks() {
      return store.get().blocks;
    },
    get bin() {
      return store.get().bin;
    },
    get bodies() {
      return store.get().bodies;
    },
    get ownBodies() {
      return store.get().ownBodies;
    },
    get results() {
      return store.get().results;
    },
    get calculating() {
      return store.get().calculating;
    },
    get simulating() {
      return store.get().simulating;
    },
    get edits() {
      return store.get().edits;
    },
    get me() {
      return store.get().me;
    },
    get present() {
      return store.get().present;
    },
    get save() {
      return store.get().save;
    },
    get settings() {
      return store.get().settings;
    },
    get picked() {
      return store.get().picked;
    },
    get traced() {
      return store.get().traced;
    },
    get live() {
      return store.get().live;
    },
    classIndex: (name) => store.get().classes.get(name) ?? -1,
    pick: (rows) => actions.pick(rows),
    trace: (request) => actions.trace(request),
    nearest: (request) => actions.nearest?.(request) ?? Promise.resolve(null),
    stopSimulation: (handle, isStopped) => actions.stopSimulation(handle, isStopped),
    enter: (key) => actions.enter(key),
    show: (place) => actions.show(place),
    undo: () => actions.undo(),
    redo: () => actions.redo(),
  };
}

/** For `useSyncExternalStore`: gives the same view until what the block looks at changed. */
export function blockViewOf(store: PageStore, key: string): () => PageView {
  let seen: readonly unknown[] | undefined;
  let state: PageState | undefined;
  let view = liveView(store);
  return () => {
    const now = store.get();
    if (now === state) return view;
    state = now;
    const looks = lookedAt(now, key);
    if (seen !== undefined && sameEntries(seen, looks)) return view;
    seen = looks;
    view = liveView(store);
    return view;
  };
}

/** A view for what stands outside of blocks (the margin's trace): new with every change of the state. */
export function wholeViewOf(store: PageStore): () => PageView {
  let state: PageState | undefined;
  let view = liveView(store);
  return () => {
    const now = store.get();
    if (now !== state) {
      state = now;
      view = liveView(store);
    }
    return view;
  };
}
