import type { Problem } from "../errors";
import type { BlockContext } from "../page/context";
import type { NoteResult, NoteValue } from "../page/results";
import type { NoteBlock } from "../page/schema";
import { quotesIn, type Quote } from "./quotes";
import { quotable, type Quoted } from "./quotable";

/** Finds the formula blocks that have a line of that name, for names that stand alone in a note. */
export type LineFinder = (name: string) => readonly string[];

/**
 * The live values a note quotes.
 *
 * A name alone is a line of a formula block that is the only one of its name on the page, a block, or an alias of a body;
 * `block.name` is a line, column or result of that block; a third part asks for one side of a budget's reported expression.
 */
export function evaluateNote(block: NoteBlock, context: BlockContext, linesNamed: LineFinder): NoteResult {
  const problems: Problem[] = [];
  const bodiesUsed: Record<string, string> = {};
  const values = quotesIn(block.text).map((quote): NoteValue => {
    const found = find(quote, context, linesNamed, bodiesUsed);
    if (typeof found === "string") {
      problems.push({ code: "no-such-value", severity: "error", block: block.id, span: quote.span, text: found });
      return { span: quote.span, name: quote.name, shown: null, unit: "", value: null, sigma: null };
    }
    const { shown, unit, value = null, sigma = null, trace } = found;
    return { span: quote.span, name: quote.name, shown, unit, value, sigma, ...(trace === undefined ? {} : { trace }) };
  });
  return { kind: "note", values, problems, bodiesUsed };
}

/** What a quote comes to, or the sentence that says why it comes to nothing. */
function find(quote: Quote, context: BlockContext, linesNamed: LineFinder, bodiesUsed: Record<string, string>): Quoted | string {
  const [first, second, third] = quote.parts;
  if (first === undefined) return `"${quote.name}" is not a name. Write {{name}} or {{block.name}}, with backticks round anything but letters, digits and _.`;
  if (second === undefined) return findAlone(first, context, linesNamed, bodiesUsed);
  const result = context.result(first);
  const block = context.block(first);
  if (block === undefined) return `There is no block "${first}" on this page to take ${second} from.`;
  if (result === undefined) return `Block ${first} has no result to quote.`;
  if (result.kind === "data") {
    const [owner, ...others] = linesNamed(second).filter((handle) => over(context, handle) === block.id);
    if (others.length > 0) return `"${second}" is a line of ${[owner, ...others].join(" and of ")}; write which, as {{${owner ?? ""}.${second}}}.`;
    const formula = owner === undefined ? undefined : context.result(owner);
    if (owner !== undefined && formula !== undefined) return quotable(owner, formula, second, third);
  }
  return quotable(block.id, result, second, third);
}

function over(context: BlockContext, formula: string): string | undefined {
  const block = context.block(formula);
  return block?.kind === "formula" && block.data !== undefined ? context.block(block.data)?.id : undefined;
}

function findAlone(name: string, context: BlockContext, linesNamed: LineFinder, bodiesUsed: Record<string, string>): Quoted | string {
  const owners = [...new Set(linesNamed(name))];
  const block = context.block(name);
  if (owners.length > 1) return `"${name}" is a line of ${owners.join(" and of ")}; write which, as {{${owners[0] ?? ""}.${name}}}.`;
  if (owners.length === 1 && block !== undefined)
    return `"${name}" is a line of ${owners[0] ?? ""} and a block; write {{${owners[0] ?? ""}.${name}}} for the line.`;
  const [owner] = owners;
  if (owner !== undefined) {
    const result = context.result(owner);
    return result === undefined ? `Block ${owner} has no result to quote.` : quotable(owner, result, name, undefined);
  }
  if (block !== undefined) {
    const result = context.result(name);
    if (result?.kind === "budget") return quotable(block.id, result, "solved", undefined);
    return `"${name}" is a block; say which of its values, as in {{${name}.${result?.kind === "trend" ? "slope" : "name"}}}.`;
  }
  const body = context.bodies(name);
  if (body !== undefined) {
    bodiesUsed[name] = body.id;
    return { shown: body.id, unit: "" };
  }
  return `Nothing on this page is called "${name}". Write a line's name, or {{block.name}}.`;
}
