import type { Problem } from "@/cells";

/** What a worker thread is asked, and what it answers. Bytes are copied, never shared. */
export type Task =
  | { readonly kind: "read"; readonly fileName: string; readonly bytes: Uint8Array }
  | {
      readonly kind: "freeze";
      readonly page: unknown;
      readonly sources: readonly TaskSource[];
      readonly bodies: Uint8Array;
      readonly atomicWeights: Uint8Array;
    };

export interface TaskSource {
  readonly sha256: string;
  readonly name: string;
  readonly bytes: Uint8Array;
}

/** A table that could be read. */
export interface ReadAnswer {
  readonly rows: number;
  readonly columns: number;
}

/** A reference value that was written down from memory and that the page's numbers lean on. */
export interface MemoryValue {
  readonly body: string;
  readonly species: string;
  readonly value: number;
  readonly unit: string;
  readonly source: string;
}

export interface FreezeAnswer {
  readonly hash: string;
  readonly engine: string;
  readonly files: readonly { readonly path: string; readonly bytes: Uint8Array; readonly sha256: string }[];
  readonly bodies: Readonly<Record<string, string>>;
  readonly fromMemory: readonly MemoryValue[];
  readonly problems: readonly Problem[];
  readonly counts: { readonly blocks: number; readonly samples: number; readonly setAside: number; readonly amended: number };
}

export interface Answers {
  read: ReadAnswer;
  freeze: FreezeAnswer;
}

/** Wrong input, told in a sentence; anything else is a fault of ours. */
export interface Refused {
  readonly refused: string;
}
export type Reply = { readonly answer: Answers[keyof Answers] } | Refused | { readonly fault: string };
