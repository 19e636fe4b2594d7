/** Where expressions stand in the plain fields of a block, texts aside. */
type Plain = Readonly<Record<string, unknown>>;
export type Rewrite = (expression: string) => string;

const isPlain = (value: unknown): value is Plain => typeof value === "object" && value !== null && !Array.isArray(value);

/** Fields and keys of entries that are expressions. */
const expressionKeys: ReadonlySet<string> = new Set(["x", "y", "z", "per", "where", "expression"]);
/** Fields and keys of entries that are lists of expressions. */
const expressionListKeys: ReadonlySet<string> = new Set(["values", "report"]);

/** The value of a field with every expression in it rewritten; the identical value where nothing changed. */
export function rewriteExpressions(key: string, value: unknown, rewrite: Rewrite): unknown {
  if (typeof value === "string") return expressionKeys.has(key) ? rewrite(value) : value;
  if (Array.isArray(value)) {
    const next = value.map((v: unknown) => (typeof v === "string" && expressionListKeys.has(key) ? rewrite(v) : v));
    return next.some((v, n) => v !== value[n]) ? next : value;
  }
  if (!isPlain(value) || (key !== "target" && key !== "")) return value;
  let changed = false;
  const next: Record<string, unknown> = {};
  for (const [k, v] of Object.entries(value)) {
    next[k] = rewriteExpressions(k, v, rewrite);
    changed ||= next[k] !== v;
  }
  return changed ? next : value;
}

/** Rewrites the expressions between `{{` and `}}` of a note, and leaves its prose alone. */
export const rewriteNote = (text: string, rewrite: Rewrite): string => text.replace(/\{\{([^{}]*)\}\}/g, (_, inner: string) => `{{${rewrite(inner)}}}`);
