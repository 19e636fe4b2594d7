import { isOwnBodyId, parseSpecies, resolveSpecies, type Body } from "../species";
import type { Table } from "../table/table";
import { functionNamed, functions } from "./functions";
import type { Scope } from "./scope";
import { writeName } from "./tokens";

/** One thing that may stand where the cursor is. */
export interface Completion {
  /** As it is shown and searched. */
  readonly label: string;
  /** As it is written in place of what was typed. */
  readonly insert: string;
  readonly kind: "column" | "species" | "line" | "result" | "body" | "function" | "class";
  /** Unit, or what a function takes. */
  readonly detail: string;
  /** One line of help. */
  readonly help: string;
}

export interface Completions {
  /** Where what was typed begins; the completion replaces it up to the cursor. */
  readonly from: number;
  readonly options: readonly Completion[];
}

const typed = /(?:(?:[\p{L}_][\p{L}\p{M}\p{N}_]*|`[^`\n]*`)\.)?(?:[\p{L}_][\p{L}\p{M}\p{N}_]*|`[^`\n]*)?$/u;
const typedText = /["']([^"'\n]*)$/u;

/**
 * What may stand at a place of an expression or of a formula block's text: columns, the elements and oxides they give, lines,
 * results of other blocks, bodies, functions, and inside quotation marks the entries of the text column compared with.
 */
export function complete(scope: Scope, text: string, position: number): Completions {
  const line = text.slice(text.lastIndexOf("\n", position - 1) + 1, position);
  if (inComment(line)) return { from: position, options: [] };
  const quoted = insideText(line);
  if (quoted !== undefined)
    return {
      from: position - quoted.length,
      options: classOptions(scope, line.slice(0, line.length - quoted.length - 1)).filter((option) => matches(option, quoted)),
    };
  const word = typed.exec(line)?.[0] ?? "";
  const bodyWanted = isBodyArgument(line.slice(0, line.length - word.length));
  const options = bodyWanted ? bodyOptions(scope) : [...columnOptions(scope.table), ...namedOptions(scope), ...functionOptions(), ...bodyOptions(scope)];
  return { from: position - word.length, options: options.filter((option) => matches(option, word.replaceAll("`", ""))) };
}

function matches({ label }: Completion, word: string): boolean {
  return label.toLowerCase().startsWith(word.toLowerCase());
}

function inComment(line: string): boolean {
  const bare = line.replace(/"[^"]*"|'[^']*'|`[^`]*`/gu, (quoted) => " ".repeat(quoted.length));
  const hash = bare.indexOf("#");
  return hash >= 0 && !/["'`]/u.test(bare.slice(0, hash));
}

/** What was typed of a text whose quotation mark is still open. */
function insideText(line: string): string | undefined {
  const closed = line.replace(/"[^"]*"|'[^']*'/gu, (quoted) => " ".repeat(quoted.length));
  return typedText.exec(closed) === null ? undefined : typedText.exec(line)?.[1];
}

/** True after the comma of `norm(x, ` or `at(x, `, whatever brackets x has. */
function isBodyArgument(before: string): boolean {
  let depth = 0;
  let commas = 0;
  for (let i = before.length - 1; i >= 0; i--) {
    const character = before.charAt(i);
    if (character === ")") depth++;
    else if (character === "," && depth === 0) commas++;
    else if (character === "(" && depth-- === 0) return commas === 1 && /(?:^|[^\p{L}\p{N}_])(?:norm|at)$/u.test(before.slice(0, i).trimEnd());
  }
  return false;
}

function columnOptions(table: Table | null): Completion[] {
  if (table === null) return [];
  const options: Completion[] = [];
  const names = new Set<string>();
  const add = (name: string, kind: "column" | "species", detail: string, help: string): void => {
    if (names.has(name)) return;
    names.add(name);
    options.push({ label: name, insert: writeName(name), kind, detail, help });
  };
  for (const column of table.columns) {
    if (column.kind === "text") add(column.name, "column", "text", `Text column of ${table.handle}.`);
    else
      add(
        column.name,
        "column",
        column.unit.symbol,
        column.species === undefined ? `Column of ${table.handle}.` : `Column of ${table.handle}: ${column.species}.`,
      );
  }
  for (const column of table.columns) {
    const species = column.kind === "quantity" && column.species !== undefined ? parseSpecies(column.species) : undefined;
    if (species === undefined) continue;
    const resolution = resolveSpecies(table, species.element);
    if (resolution?.ok !== true) continue;
    add(species.element, "species", resolution.unit.symbol, resolution.candidates[0]?.sentence ?? "");
  }
  return options;
}

function namedOptions(scope: Scope): Completion[] {
  return (scope.offers?.() ?? []).map((offer): Completion => {
    const kind = offer.kind === "common" ? "result" : offer.kind;
    return { label: offer.text, insert: offer.text, kind, detail: offer.unit ?? "", help: offer.help ?? "" };
  });
}

function functionOptions(): Completion[] {
  return functions.map(({ name, form, help }) => ({ label: name, insert: `${name}(`, kind: "function", detail: form, help }));
}

function bodyOptions(scope: Scope): Completion[] {
  return scope.bodies.all.map((body) => {
    const alias = scope.bodies(body.id) === body ? body.id : "";
    return {
      label: body.id,
      insert: writeName(body.id),
      kind: "body",
      detail: body.what,
      help: alias === "" ? "Hidden by an alias of the page." : bodyHelp(body),
    };
  });
}

function bodyHelp({ id, fromMemory, formula, values }: Body): string {
  if (formula !== undefined) return `Stoichiometric, ${formula}.`;
  if (isOwnBodyId(id)) return fromMemory ? "The group's own, written down from memory." : `The group's own, from ${values[0]?.source ?? "its source"}.`;
  return fromMemory ? "Some of its values were written down from memory." : "All its values were read in a copy of their source.";
}

/** Entries of the text column that stands before the comparison, or of the classes inside an aggregate. */
function classOptions(scope: Scope, before: string): Completion[] {
  const { table } = scope;
  if (table === null) return [];
  const compared = /(?:([\p{L}_][\p{L}\p{M}\p{N}_]*)|`([^`]*)`)\s*(?:==|!=)\s*$/u.exec(before);
  const name = compared?.[1] ?? compared?.[2];
  const column = table.columns.find((c) => c.kind === "text" && c.name === name);
  const entries = column?.kind === "text" ? column.text : table.classes;
  const help = column === undefined ? `Class of ${table.handle}.` : `In ${column.name} of ${table.handle}.`;
  return [...new Set(entries)]
    .filter((entry) => entry !== "")
    .slice(0, 200)
    .map((entry) => ({ label: entry, insert: entry, kind: "class", detail: "", help }));
}

/** The form and help of a function, for a hint while its arguments are typed. */
export function helpFor(name: string): { readonly form: string; readonly help: string } | undefined {
  const info = functionNamed(name);
  return info === undefined ? undefined : { form: info.form, help: info.help };
}
