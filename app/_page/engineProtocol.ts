import type {
  Block,
  BlockResult,
  Column,
  DataResult,
  Nearest,
  NearestRequest,
  OwnBody,
  PlotResult,
  Problem,
  ProposedColumn,
  TraceNode,
  TraceRequest,
} from "@/cells";
import type { PackedPlot } from "./plotPacking";
import type { SimulationProgress } from "./simulationQueue";
import type { PackedTable } from "./tablePacking";

/**
 * What page and worker say to each other. Only what changed travels: blocks to the worker, results back, their typed arrays
 * as copies whose memory is handed over.
 */

/** A block result on its way: a table's texts are packed, a plot's stay behind, all else is as it is. */
export type TravellingResult = Exclude<BlockResult, DataResult | PlotResult> | PackedPlot | (Omit<DataResult, "table"> & { readonly table?: PackedTable });

export interface PageMessage {
  readonly type: "page";
  /** Rises with every message; a newer one supersedes what was not yet calculated. */
  readonly version: number;
  readonly title: string;
  readonly bodies: Readonly<Record<string, string>>;
  readonly ownBodies: Readonly<Record<string, OwnBody>>;
  /** Keys of all blocks in the page's order. */
  readonly order: readonly string[];
  readonly changed: readonly (readonly [key: string, block: Block])[];
  /** Where each source can be fetched, by SHA-256. */
  readonly sources: Readonly<Record<string, string>>;
}

export type ToWorker =
  | PageMessage
  | { readonly type: "trace"; readonly id: number; readonly request: TraceRequest }
  | { readonly type: "nearest"; readonly id: number; readonly request: NearestRequest }
  /** Stops the simulation of a block, or lets it go on. */
  | { readonly type: "simulation"; readonly block: string; readonly isStopped: boolean }
  | { readonly type: "propose"; readonly id: number; readonly bytes: Uint8Array; readonly fileName: string }
  /** What a file comes to under a mapping, before anything is saved. */
  | { readonly type: "preview"; readonly id: number; readonly bytes: Uint8Array; readonly fileName: string; readonly columns: readonly Column[] }
  /** Bytes the page has already, so that they need not be fetched. */
  | { readonly type: "source"; readonly sha256: string; readonly bytes: Uint8Array };

export interface ResultsMessage {
  readonly type: "results";
  readonly version: number;
  readonly engine: string;
  readonly bodies: Readonly<Record<string, string>>;
  /** All handles that have a result now, in the page's order. */
  readonly order: readonly string[];
  readonly changed: readonly (readonly [handle: string, result: TravellingResult])[];
  readonly readsFrom: readonly (readonly [handle: string, from: readonly string[]])[];
  /** Handles whose source, or a source they lean on, is still on its way. */
  readonly loading: readonly string[];
  /** Milliseconds the evaluation took. */
  readonly took: number;
}

/** What import proposes for a file, without its rows: those stay with the worker. */
export interface FileProposal {
  readonly fileName: string;
  readonly headers: readonly string[];
  readonly rows: number;
  readonly columns: readonly ProposedColumn[];
  /** The first values of each column, as the file writes them. */
  readonly samples: readonly (readonly string[])[];
  /** The first of what could not be read, and how much there is of it in all. */
  readonly problems: readonly Problem[];
  readonly problemCount: number;
}

/** What the preview of an import shows. */
export interface Preview {
  readonly rows: number;
  readonly problems: readonly Problem[];
  readonly summaries: DataResult["columns"];
  readonly screening: DataResult["screening"];
  /** The first rows only. */
  readonly table: PackedTable | null;
}

export type FromWorker =
  | ResultsMessage
  /** Blocks that are being simulated, after their results of first order and until those with quantiles; none when all is done. */
  | { readonly type: "simulating"; readonly progress: readonly (readonly [handle: string, progress: SimulationProgress])[] }
  | { readonly type: "trace"; readonly id: number; readonly node: TraceNode | null }
  | { readonly type: "nearest"; readonly id: number; readonly nearest: Nearest | null }
  | { readonly type: "proposal"; readonly id: number; readonly proposal: FileProposal }
  | { readonly type: "preview"; readonly id: number; readonly preview: Preview }
  | { readonly type: "failed"; readonly id: number; readonly text: string }
  /** The engine itself broke: a fault of ours, said as such. */
  | { readonly type: "fault"; readonly version: number; readonly text: string };
