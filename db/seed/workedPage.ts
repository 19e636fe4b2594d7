import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { pageSchema, type PageDocument } from "@/cells";

const examples = path.join(path.dirname(fileURLToPath(import.meta.url)), "..", "..", "examples");
/** The page the demo group opens on; the others follow by name. */
const first = "chondrites-and-mantle";

export interface WorkedSource {
  readonly sha256: string;
  readonly name: string;
  readonly bytes: Uint8Array;
}

/** A worked page of `examples/`, ready to become a live one. */
export interface WorkedPage {
  readonly folder: string;
  readonly page: PageDocument;
  readonly sources: readonly WorkedSource[];
}

/** Every worked page there is. */
export function workedPages(): WorkedPage[] {
  if (!existsSync(examples)) return [];
  const folders = readdirSync(examples, { withFileTypes: true })
    .filter((entry) => entry.isDirectory() && existsSync(path.join(examples, entry.name, "page.json")))
    .map((entry) => entry.name)
    .sort((a, b) => Number(b === first) - Number(a === first) || (a < b ? -1 : 1));
  return folders.map(workedPage);
}

function workedPage(folder: string): WorkedPage {
  const page = pageSchema.parse(JSON.parse(readFileSync(path.join(examples, folder, "page.json"), "utf8")));
  const sources: WorkedSource[] = [];
  const blocks = page.blocks.map((block) => {
    if (block.kind !== "data" || !block.source) return block;
    const bytes = new Uint8Array(readFileSync(path.join(examples, folder, block.source.file)));
    const source = { sha256: createHash("sha256").update(bytes).digest("hex"), name: path.basename(block.source.file), bytes };
    sources.push(source);
    return { ...block, source: { file: source.name, sha256: source.sha256 } };
  });
  return { folder, page: { ...page, blocks }, sources };
}

/** An id that is always the same for one example, so that seeding again finds its page. */
export function pageIdOf(folder: string): string {
  const hex = createHash("sha256").update(`example ${folder}`).digest("hex");
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-4${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}
