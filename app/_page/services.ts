import type { Column } from "@/cells";
import type { FileProposal, Preview } from "./engineProtocol";

export interface Uploaded {
  readonly sha256: string;
  readonly name: string;
  readonly size: number;
}

/** What the data block needs besides the document: the engine's reading of a file, and the way to the server. */
export interface PageServices {
  propose(bytes: Uint8Array, fileName: string): Promise<FileProposal>;
  preview(bytes: Uint8Array, fileName: string, columns: readonly Column[]): Promise<Preview>;
  /** Bytes of a source the page uses. */
  sourceBytes(sha256: string, fileName: string): Promise<Uint8Array>;
  /** Keeps a file byte for byte. @param onProgress told the sent share, 0 to 1 */
  upload(bytes: Uint8Array, fileName: string, onProgress: (done: number) => void, signal: AbortSignal): Promise<Uploaded>;
}
