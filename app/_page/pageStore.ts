import type { Nearest, NearestRequest, OwnBody, PageResults, TraceNode, TraceRequest } from "@/cells";
import type { Draft } from "@/realtime/client";
import type { PageBlock, PageEdits } from "@/realtime/document";
import type { LiveText, PageMode, PagePlace, PickedRow, Presence, SaveState, Settings } from "./contract";
import type { SimulationProgress } from "./simulationQueue";
import type { PageServices } from "./services";

/** All that the screens of one page show. Never changed in place: a change is a new object, with unchanged parts kept. */
export interface PageState {
  readonly pageId: string;
  readonly mode: PageMode;
  readonly title: string;
  readonly blocks: readonly PageBlock[];
  readonly bin: readonly PageBlock[];
  readonly bodies: Readonly<Record<string, string>>;
  /** The group's own bodies that the page carries, by id. */
  readonly ownBodies: Readonly<Record<string, OwnBody>>;
  readonly results: PageResults | null;
  /** Handles whose source is still on its way. */
  readonly loading: ReadonlySet<string>;
  readonly calculating: boolean;
  /** Blocks that are being simulated now, or whose simulation was stopped, by handle. */
  readonly simulating: ReadonlyMap<string, SimulationProgress>;
  /** A fault of the engine itself, in words. */
  readonly fault: string | null;
  readonly edits: PageEdits | null;
  readonly me: { readonly id: string; readonly name: string } | null;
  readonly present: readonly Presence[];
  readonly save: SaveState | null;
  readonly settings: Settings;
  readonly picked: readonly PickedRow[];
  readonly traced: { readonly request: TraceRequest; readonly node: TraceNode | null } | null;
  /** Names of people by id; empty for guests and snapshots. */
  readonly people: Readonly<Record<string, string>>;
  readonly services: PageServices | null;
  readonly live: LiveText | null;
  /** Work of one's own that this browser keeps and that was never stored. */
  readonly drafts: readonly Draft[];
  /** Place of each class in the page's sequence. */
  readonly classes: ReadonlyMap<string, number>;
}

/** What a person does that goes beyond the page's document. */
export interface PageActions {
  pick(rows: readonly PickedRow[]): void;
  trace(request: TraceRequest | null): void;
  /** Bodies and samples nearest to a sample; left out where no engine runs. */
  nearest?(request: NearestRequest): Promise<Nearest | null>;
  stopSimulation(handle: string, isStopped: boolean): void;
  enter(blockKey: string | null): void;
  undo(): void;
  redo(): void;
  show(place: PagePlace): void;
}

export interface PageStore {
  readonly actions: PageActions;
  get(): PageState;
  set(change: Partial<PageState>): void;
  subscribe(listener: () => void): () => void;
}

export function createPageStore(initial: PageState, actions: PageActions): PageStore {
  let state = initial;
  const listeners = new Set<() => void>();
  return {
    actions,
    get: () => state,
    set(change) {
      const differs = (Object.keys(change) as (keyof PageState)[]).some((key) => !Object.is(change[key], state[key]));
      if (!differs) return;
      state = { ...state, ...change };
      for (const listener of listeners) listener();
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}
