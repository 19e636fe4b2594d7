/** Rewrites the handles in the plain fields of a block (rule D4). Texts and expressions are rewritten elsewhere. */
type Plain = Readonly<Record<string, unknown>>;
type Rename = (handle: string) => string;

const isPlain = (value: unknown): value is Plain => typeof value === "object" && value !== null && !Array.isArray(value);

/** Keys that hold a handle, wherever in a block's plain values they stand. `sample`, `class` and the like stand beside `data` and are no handles. */
const handleKeys: ReadonlySet<string> = new Set(["data", "trend", "crossing", "budget", "crossWith"]);
/** Keys that hold a list of handles. */
const handleListKeys: ReadonlySet<string> = new Set(["stack", "join"]);
/** Keys below which there is no handle: what people typed, and names of other things. */
const closed: ReadonlySet<string> = new Set(["cells", "composition", "coefficients", "meltCoefficients"]);

/** The value with every handle in it renamed; the identical value where there was none to rename. */
export function renameInValue(key: string, value: unknown, rename: Rename): unknown {
  if (typeof value === "string") return handleKeys.has(key) ? rename(value) : value;
  if (Array.isArray(value)) {
    const next = value.map((v: unknown) => (typeof v === "string" && handleListKeys.has(key) ? rename(v) : renameInValue("", v, rename)));
    return next.some((v, n) => v !== value[n]) ? next : value;
  }
  if (!isPlain(value) || closed.has(key)) return value;
  let changed = false;
  const next: Record<string, unknown> = {};
  for (const [k, v] of Object.entries(value)) {
    next[k] = renameInValue(k, v, rename);
    changed ||= next[k] !== v;
  }
  return changed ? next : value;
}
