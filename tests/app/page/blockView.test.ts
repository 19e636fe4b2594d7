import { describe, expect, it } from "vitest";
import { blockViewOf } from "@/app/_page/blockView";
import { initialState } from "@/app/_page/initialState";
import { createPageStore, type PageActions } from "@/app/_page/pageStore";
import type { NoteResult, PageResults } from "@/cells";

const actions: PageActions = {
  pick: () => undefined,
  trace: () => undefined,
  stopSimulation: () => undefined,
  enter: () => undefined,
  undo: () => undefined,
  redo: () => undefined,
  show: () => undefined,
};
const result = (): NoteResult => ({ kind: "note", problems: [], bodiesUsed: {}, values: [] });
const results = (blocks: [string, NoteResult][], readsFrom: [string, string[]][] = []): PageResults => ({
  engine: "1",
  bodies: {},
  blocks: new Map(blocks),
  readsFrom: new Map(readsFrom),
});

function store() {
  return createPageStore(
    initialState({
      pageId: "p",
      mode: "edit",
      title: "t",
      me: null,
      document: {
        format: "cotectic-page/1",
        title: "t",
        blocks: [
          { id: "a", kind: "note", text: "1" },
          { id: "b", kind: "note", text: "2" },
        ],
      },
    }),
    actions,
  );
}

describe("a block's view of the page", () => {
  it("stays the same while only another block changes", () => {
    const page = store();
    const viewOfB = blockViewOf(page, "b");
    const viewOfA = blockViewOf(page, "a");
    const [b, a] = [viewOfB(), viewOfA()];
    page.set({
      blocks: page.get().blocks.map((one) => (one.key === "a" ? { ...one, block: { id: "a", kind: "note" as const, text: "11" } } : one)),
      calculating: true,
    });
    expect(viewOfB()).toBe(b);
    expect(viewOfA()).not.toBe(a);
  });

  it("is new when its own result, or that of a block it reads from, is new", () => {
    const page = store();
    const [one, two] = [result(), result()];
    page.set({
      results: results(
        [
          ["a", one],
          ["b", two],
        ],
        [["b", ["a"]]],
      ),
    });
    const view = blockViewOf(page, "b");
    const before = view();
    page.set({
      results: results(
        [
          ["a", one],
          ["b", two],
        ],
        [["b", ["a"]]],
      ),
    });
    expect(view()).toBe(before);
    page.set({
      results: results(
        [
          ["a", result()],
          ["b", two],
        ],
        [["b", ["a"]]],
      ),
    });
    expect(view()).not.toBe(before);
  });

  it("always tells the newest state, even when it did not ask to be drawn anew", () => {
    const page = store();
    const view = blockViewOf(page, "b")();
    page.set({ title: "another" });
    expect(view.title).toBe("another");
  });

  it("leaves listeners alone where nothing differs", () => {
    const page = store();
    let called = 0;
    page.subscribe(() => called++);
    page.set({ title: "t" });
    page.set({ title: "u" });
    expect(called).toBe(1);
  });
});
