import { CellError } from "../errors";
import { namesUsed, writeName, type Named, type Scope } from "../language";
import type { BodyLookup } from "../species/body";
import type { Table } from "../table/table";
import { commonOf } from "./commons";
import type { PageGraph, PageLine } from "./graph";
import type { BlockResult } from "./results";
import type { Block } from "./schema";

/** What a page's names mean, while one evaluation is under way. */
export interface Scopes {
  /** @throws CellError where the data block has no table */
  over(data: string | undefined): Scope;
  expand(text: string, data: string | undefined): string;
}

/** Lines within lines, and names within names; more is a circle that was not seen. */
const MAX_EXPANSION = 64;

/**
 * @param resultOf the result of a block that was already calculated; trends give their line where the crossing is not asked
 */
export function pageScopes(graph: PageGraph, bodies: BodyLookup, resultOf: (handle: string, crossing: boolean) => BlockResult | undefined): Scopes {
  const made = new Map<string, Scope>();

  const tableOf = (handle: string): Table => {
    const block = graph.resolve(handle);
    const result = block === undefined ? undefined : resultOf(block.id, false);
    if (block === undefined) throw new CellError("no-such-block", `There is no block "${handle}" on this page.`);
    if (block.kind !== "data") throw new CellError("wrong-kind", `"${handle}" is not a data block.`);
    if (result?.kind !== "data" || result.table === undefined)
      throw new CellError("no-table", `The table of ${block.id} could not be read, so nothing can be calculated over it. See what ${block.id} says.`);
    return result.table;
  };

  const lineNamed = (lines: readonly PageLine[]): Named | undefined => {
    const [line, other] = lines;
    if (line === undefined) return undefined;
    if (other !== undefined) return "ambiguous";
    const circle = graph.circleOf(line);
    if (circle !== undefined) throw new CellError("circle", `${line.name} has no result, since it is calculated from itself: ${circle}.`);
    return { kind: "line", block: line.block.id, name: line.name, text: line.line.text, scope: over(line.data) };
  };

  const memberNamed = (block: Block, member: string): Named | undefined => {
    switch (block.kind) {
      case "data": {
        const line = lineNamed(graph.linesOver(block.id, member));
        const table = tableOf(block.id);
        const column = table.columns.some((candidate) => candidate.name === member);
        if (line !== undefined) return column ? "ambiguous" : line;
        return { kind: "column", table, name: member };
      }
      case "formula":
        return lineNamed(graph.linesOf(block.id).filter((line) => line.name === member));
      case "trend":
      case "budget": {
        if (graph.circular.has(block.id)) throw new CellError("circle", `${block.id} has no result, since it reads from itself.`);
        const result = resultOf(block.id, member.startsWith("crossing"));
        return result === undefined ? undefined : commonOf(block.id, result, member);
      }
      default:
        return undefined;
    }
  };

  function over(data: string | undefined): Scope {
    const block = data === undefined ? undefined : graph.resolve(data);
    const key = block?.id ?? data ?? "";
    const known = made.get(key);
    if (known !== undefined) return known;
    const scope: Scope = {
      table: data === undefined ? null : tableOf(data),
      bodies,
      lookup: (name, member) => {
        if (member === undefined) return lineNamed(graph.linesOver(block?.id, name));
        const other = graph.resolve(name);
        return other === undefined ? undefined : memberNamed(other, member.normalize("NFC"));
      },
    };
    made.set(key, scope);
    return scope;
  }

  /** The text that stands for a name on one composition; undefined where the name stands for itself. */
  const meaning = (name: string, member: string | undefined, data: string | undefined, depth: number): string | undefined => {
    const block = member === undefined ? undefined : graph.resolve(name);
    if (member !== undefined && block === undefined) return undefined;
    const table = member === undefined ? data : block?.kind === "data" ? block.id : undefined;
    const wanted = member ?? name;
    const lines = block?.kind === "formula" ? graph.linesOf(block.id).filter((line) => line.name === wanted) : graph.linesOver(table, wanted);
    const named = lineNamed(lines);
    if (named === "ambiguous") throw new CellError("ambiguous-name", `"${wanted}" is the name of two lines. Rename one of them.`);
    const [line] = lines;
    if (named !== undefined && line !== undefined) return `(${expand(line.line.text, line.data, depth + 1)})`;
    if (table === undefined) return undefined;
    const column = tableOf(table).columns.find((candidate) => candidate.name === wanted);
    return column?.kind === "quantity" && column.species !== undefined ? writeName(column.species) : undefined;
  };

  function expand(text: string, data: string | undefined, depth = 0): string {
    if (depth > MAX_EXPANSION) throw new CellError("too-deep", "More than 64 lines inside one another are not read.");
    const id = data === undefined ? undefined : (graph.resolve(data)?.id ?? data);
    let expanded = "";
    let from = 0;
    for (const used of namesUsed(text)) {
      const by = meaning(used.name, used.member, id, depth);
      if (by === undefined) continue;
      expanded += text.slice(from, used.span[0]) + by;
      from = used.span[1];
    }
    return expanded + text.slice(from);
  }

  return { over, expand: (text, data) => expand(text, data) };
}
