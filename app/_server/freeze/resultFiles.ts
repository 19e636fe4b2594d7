import type { BlockResult, PageResults } from "@/cells";
import { canonicalJson } from "./canonicalJson";

/** A file of a snapshot before it is hashed. */
export interface NewFile {
  readonly path: string;
  readonly bytes: Uint8Array;
}

export const FROZEN_RESULTS_FORMAT = "cotectic-frozen-results/1";

/** What a result holds that the page and its sources already say, or that only serves drawing. */
const leftOut: ReadonlySet<string> = new Set(["raw", "rawSigma", "layers", "span", "expressionSpan"]);

/**
 * The results of a page as files: an index in JSON, and beside it every array.
 *
 * - `….f64`: little-endian doubles, one a row. Where there is no number it holds +0, never NaN; −0 is stored as +0.
 * - `….state`: one byte a row. Beside an `.f64` of the same name, 0 says that the double counts and 1 that there is none;
 *   a result's own `state` gives the reason (0 present, 1 missing, 2 below detection, 3 out of domain, 4 set aside).
 *
 * @returns files in no particular order
 */
export function resultFiles(results: PageResults): NewFile[] {
  const files: NewFile[] = [];
  const blocks: Record<string, unknown> = {};
  let place = 0;
  for (const [handle, result] of results.blocks) {
    place++;
    // Handles may use any alphabet; file systems do not agree on how those are spelled.
    const stem = /^[A-Za-z0-9_]+$/.test(handle) ? handle : `block-${place}`;
    blocks[handle] = index(result, `results/${stem}`, files);
  }
  const bytes = canonicalJson({ format: FROZEN_RESULTS_FORMAT, engine: results.engine, bodies: results.bodies, blocks });
  return [{ path: "results/index.json", bytes }, ...files];
}

function index(result: BlockResult, stem: string, files: NewFile[]): unknown {
  return walk(result, stem, files);
}

function walk(value: unknown, path: string, files: NewFile[]): unknown {
  if (value instanceof Float64Array) return doubles(value, path, files);
  if (value instanceof Uint8Array) {
    files.push({ path: `${path}.state`, bytes: Uint8Array.from(value) });
    return { state: `${path}.state`, n: value.length };
  }
  if (typeof value === "number") return Number.isFinite(value) ? value : null;
  if (Array.isArray(value)) return value.map((item, n) => walk(item, `${path}.${n}`, files));
  if (value instanceof Map) return Object.fromEntries([...value].map(([key, item], n) => [String(key), walk(item, `${path}.${n}`, files)]));
  if (typeof value === "object" && value !== null) {
    const walked: Record<string, unknown> = {};
    for (const [key, item] of Object.entries(value)) if (item !== undefined && !leftOut.has(key)) walked[key] = walk(item, `${path}.${safe(key)}`, files);
    return walked;
  }
  return value;
}

function doubles(values: Float64Array, path: string, files: NewFile[]): unknown {
  const view = new DataView(new ArrayBuffer(values.length * 8));
  const state = new Uint8Array(values.length);
  values.forEach((value, row) => {
    if (!Number.isFinite(value)) state[row] = 1;
    view.setFloat64(row * 8, Number.isFinite(value) ? value + 0 : 0, true);
  });
  files.push({ path: `${path}.f64`, bytes: new Uint8Array(view.buffer) }, { path: `${path}.f64.state`, bytes: state });
  return { f64: `${path}.f64`, state: `${path}.f64.state`, n: values.length };
}

function safe(key: string): string {
  return key.replaceAll(/[^A-Za-z0-9_-]/g, "_");
}
