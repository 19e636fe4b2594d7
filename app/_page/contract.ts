import type { Block, Engine, Nearest, NearestRequest, OwnBody, PageResults, RowId, TraceNode, TraceRequest } from "@/cells";
import type { PageBlock, PageEdits } from "@/realtime/document";
import type { SimulationProgress } from "./simulationQueue";
import type { Awareness } from "y-protocols/awareness";
import type { UndoManager } from "yjs";

/**
 * What the blocks see of the page they stand on. A live page, a page read by link and a snapshot give the same thing,
 * so that one set of views draws all three.
 */

/** `edit`: everything; `read`: nothing can be changed; `frozen`: a snapshot, which also shows no people and no picks. */
export type PageMode = "edit" | "read" | "frozen";

/** A person's own settings. */
export interface Settings {
  readonly uncertainty: "concise" | "plus-minus";
  readonly light: "plane" | "polars" | "system";
  readonly projector: boolean;
}

/** Somebody on the page now. */
export interface Presence {
  readonly clientId: number;
  readonly userId: string;
  readonly name: string;
  readonly color: string;
  /** Key of the block they are in. */
  readonly block: string | null;
  readonly isMe: boolean;
  /** Rows they picked, when they show it to everyone. */
  readonly picked: readonly PickedRow[];
}

/** A sample, wherever on the page it appears: origin table (handle) and row identity there. */
export interface PickedRow {
  readonly table: string;
  readonly row: RowId;
}

/** `text` is what the screen shows: "Saved 14:32", "Saving", "Offline, 3 edits waiting", "Refused: …". */
export interface SaveState {
  readonly kind: "saved" | "saving" | "offline" | "refused";
  readonly text: string;
  readonly waiting: number;
}

/** What an editor of shared text binds to; undo is the page's own manager, so that one stack holds a person's edits in order. */
export interface LiveText {
  readonly awareness: Awareness;
  readonly undoManager: UndoManager;
}

/** A place on the page that a view can lead to: a block, or a cell of its table. */
export interface PagePlace {
  readonly block: string;
  readonly row?: RowId;
  readonly column?: string;
}

export interface PageView {
  readonly pageId: string;
  readonly title: string;
  readonly mode: PageMode;
  readonly blocks: readonly PageBlock[];
  readonly bin: readonly PageBlock[];
  readonly bodies: Readonly<Record<string, string>>;
  /** The group's own bodies that the page carries, by id. */
  readonly ownBodies: Readonly<Record<string, OwnBody>>;
  /** null until the engine has answered once. */
  readonly results: PageResults | null;
  /** True while the engine works on something newer than `results`. */
  readonly calculating: boolean;
  /** null where nothing can be edited. */
  readonly edits: PageEdits | null;
  readonly me: { readonly id: string; readonly name: string } | null;
  readonly present: readonly Presence[];
  readonly save: SaveState | null;
  readonly settings: Settings;
  readonly picked: readonly PickedRow[];
  pick(rows: readonly PickedRow[]): void;
  /** The number whose trace is open in the margin, if any. */
  readonly traced: { readonly request: TraceRequest; readonly node: TraceNode | null } | null;
  trace(request: TraceRequest | null): void;
  /** Bodies and samples nearest to a sample; left out where no engine runs. */
  nearest?(request: NearestRequest): Promise<Nearest | null>;
  /** How far the simulations of blocks are that are not done, by handle. */
  readonly simulating?: ReadonlyMap<string, SimulationProgress>;
  /** Stops the simulation of a block, or lets it go on. */
  stopSimulation?(handle: string, isStopped: boolean): void;
  /** Tells the others which block one is in. */
  enter(blockKey: string | null): void;
  /** Fixed marker and colour of a class across the whole page; index into the class sequence. */
  classIndex(name: string): number;
  undo(): void;
  redo(): void;
  /** Carets and undo of shared texts; left out or null where nothing is live. */
  readonly live?: LiveText | null;
  /** Scrolls to a place, focuses it and marks the row. Where a page gives none, views fall back on the block's anchor. */
  show?(place: PagePlace): void;
}

/** What every block view gets. */
export interface BlockViewProps<B extends Block = Block> {
  readonly blockKey: string;
  readonly block: B;
  readonly view: PageView;
}

/** The engine as the page reaches it: in a Web Worker, one request superseding an older one. */
export type EngineApi = Engine;
