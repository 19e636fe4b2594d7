import { z } from "zod";
import { UnreadablePageError } from "../errors";
import { PAGE_FORMAT, pageSchema, type PageDocument } from "./schema";

type Issue = z.core.$ZodIssue;
type Path = readonly PropertyKey[];

/**
 * Reads a page document.
 *
 * @param json the document as `JSON.parse` gives it
 * @throws UnreadablePageError naming block and key, in one line: wrong types, unknown keys, two blocks of one handle
 */
export function readPageDocument(json: unknown): PageDocument {
  if (typeof json !== "object" || json === null || Array.isArray(json)) {
    throw new UnreadablePageError(`A page is a JSON object with "format": "${PAGE_FORMAT}"; this is ${describe(json)}.`);
  }
  const format = valueAt(json, ["format"]);
  if (format !== PAGE_FORMAT) {
    throw new UnreadablePageError(`The page says "format": ${describe(format)}; this engine reads "${PAGE_FORMAT}".`);
  }
  const read = pageSchema.safeParse(json);
  if (!read.success) {
    const sentences = read.error.issues.map((issue) => sentenceFor(issue, json));
    const more = sentences.length > 1 ? ` ${sentences.length - 1} more like this.` : "";
    throw new UnreadablePageError(`${sentences[0] ?? "The page cannot be read."}${more}`);
  }
  refuseDuplicates(read.data);
  return read.data;
}

function refuseDuplicates(page: PageDocument): void {
  const seen = new Map<string, number>();
  page.blocks.forEach((block, index) => {
    const handle = block.id.normalize("NFC");
    const before = seen.get(handle);
    if (before !== undefined) {
      throw new UnreadablePageError(`Blocks ${before + 1} and ${index + 1} both have the id "${handle}"; every block of a page needs its own.`);
    }
    seen.set(handle, index);
  });
}

/** One sentence for one fault: where it is, by the block's id, and what was expected. */
function sentenceFor(issue: Issue, json: unknown): string {
  const deepest = narrow(issue, json, issue.path);
  const where = place(deepest.path, json);
  switch (deepest.issue.code) {
    case "unrecognized_keys": {
      const keys = deepest.issue.keys.map((key) => `"${key}"`).join(", ");
      return `${where}: unknown key ${keys}.`;
    }
    case "invalid_type": {
      const value = valueAt(json, deepest.path);
      if (value === undefined) return `${where}: missing; expected ${deepest.issue.expected}.`;
      return `${where}: expected ${deepest.issue.expected}, got ${describe(value)}.`;
    }
    case "invalid_value":
      return `${where}: expected ${deepest.issue.values.map((value) => JSON.stringify(value)).join(" or ")}, got ${describe(valueAt(json, deepest.path))}.`;
    case "custom":
      return `${where}: ${deepest.issue.message}.`;
    case "invalid_key":
      return `${where}: ${deepest.issue.issues[0]?.message ?? "this cannot be a name here"}.`;
    case "invalid_union":
      if (deepest.issue.discriminator !== undefined) {
        return `${where} is ${describe(valueAt(json, deepest.path))}, which is not one this page format knows.`;
      }
      return `${where}: ${describe(valueAt(json, deepest.path))} fits none of the allowed forms.`;
    default:
      return `${where}: ${deepest.issue.message}.`;
  }
}

/**
 * Where one of several forms was expected, the fault that matters is that of the form the author meant: the one with fewest
 * faults, an unknown key being a lighter fault than a missing one.
 */
function narrow(issue: Issue, json: unknown, path: Path): { issue: Issue; path: Path } {
  if (issue.code !== "invalid_union") return { issue, path };
  let best: { weight: number; issue: Issue } | undefined;
  for (const branch of issue.errors) {
    const first = branch.find((inner) => inner.code === "unrecognized_keys") ?? branch[0];
    if (first === undefined) continue;
    let weight = 0;
    for (const inner of branch) {
      const missing = inner.code === "invalid_type" && valueAt(json, [...path, ...inner.path]) === undefined;
      const wholly = inner.path.length === 0 && inner.code !== "unrecognized_keys" && inner.code !== "custom";
      weight += wholly ? 100 : missing ? 10 : 1;
    }
    if (best === undefined || weight < best.weight) best = { weight, issue: first };
  }
  if (best === undefined || best.weight >= 100) return { issue, path };
  const named = best.issue.code === "invalid_type" && valueAt(json, [...path, ...best.issue.path]) === undefined && best.weight > 11;
  return named ? { issue, path } : narrow(best.issue, json, [...path, ...best.issue.path]);
}

/** `block r: data`, `block 3: steps[0].amount`, `title`. */
function place(path: Path, json: unknown): string {
  if (path[0] !== "blocks" || typeof path[1] !== "number") return path.length === 0 ? "the page" : fieldName(path);
  const id = valueAt(json, ["blocks", path[1], "id"]);
  const block = typeof id === "string" && id !== "" ? `block ${id}` : `block ${path[1] + 1}`;
  return path.length > 2 ? `${block}: ${fieldName(path.slice(2))}` : block;
}

function fieldName(path: Path): string {
  return path.map((part, index) => (typeof part === "number" ? `[${part}]` : index === 0 ? String(part) : `.${String(part)}`)).join("");
}

function valueAt(json: unknown, path: Path): unknown {
  let value = json;
  for (const key of path) {
    if (typeof value !== "object" || value === null || !Object.hasOwn(value, key)) return undefined;
    value = Reflect.get(value, key);
  }
  return value;
}

function describe(value: unknown): string {
  if (value === undefined) return "nothing";
  if (value === null) return "null";
  if (Array.isArray(value)) return "a list";
  if (typeof value === "object") return `an object with ${Object.keys(value).slice(0, 5).join(", ") || "no keys"}`;
  const text = JSON.stringify(value);
  return text.length > 60 ? `${text.slice(0, 60)}…` : text;
}

/** JSON Schema (draft 2020-12) of the page document, made from the schema the engine itself reads with. */
export function pageJsonSchema(): object {
  return { $id: PAGE_FORMAT, title: "Page document", ...z.toJSONSchema(pageSchema) };
}
