import type { Problem } from "../errors";
import { namesUsed, parseLines, type FormulaLine } from "../language";
import { quotesIn } from "../note/quotes";
import { expressionsOf, referencesOf } from "./references";
import type { Block, FormulaBlock, PageDocument, TrendBlock } from "./schema";
import { circles } from "./circles";

/** A line of a formula block, as the page knows it before anything is calculated. */
export interface PageLine {
  readonly name: string;
  readonly block: FormulaBlock;
  readonly line: FormulaLine;
  /** Handle of the data block its names stand over; undefined for lines over bodies only. */
  readonly data: string | undefined;
}

/**
 * One thing that is calculated. A trend is two: its line, and its result with the crossing, so that two trends may each be
 * crossed with the other, and a formula may use the slope of a trend through another of its own lines.
 */
export type Step = { readonly what: "block"; readonly block: Block } | { readonly what: "fit"; readonly block: TrendBlock };

/** The page as a graph: what each name means, what is calculated before what, and what cannot be. */
export interface PageGraph {
  /** Finds a block by its handle, or by a former one that no block has now. */
  resolve(handle: string): Block | undefined;
  /** The lines named `name` over a data block: none, one, or several, which is an error where the name is used. */
  linesOver(data: string | undefined, name: string): readonly PageLine[];
  linesOf(block: string): readonly PageLine[];
  /** The lines of that name over whatever data block. */
  linesNamed(name: string): readonly PageLine[];
  /** Everything that can be calculated, each after what it needs. */
  readonly steps: readonly Step[];
  /** By block: what its calculation needs, in a fixed order, those of its lines included. */
  needs(step: Step): readonly Need[];
  /** By block: handles of the blocks it reads from, as the rail shows them. */
  readonly readsFrom: ReadonlyMap<string, readonly string[]>;
  /** By block: names that are not on the page, and circles. */
  readonly problems: ReadonlyMap<string, readonly Problem[]>;
  /** Blocks that stand in a circle and have no result. */
  readonly circular: ReadonlySet<string>;
  /** For a line that is calculated from itself: how it goes round. */
  circleOf(line: PageLine): string | undefined;
}

export type Need = { readonly what: "block" | "fit"; readonly handle: string } | { readonly what: "line"; readonly line: PageLine };

interface Node {
  readonly key: string;
  readonly step?: Step;
  readonly line?: PageLine;
  readonly needs: string[];
}

/** Reads the whole page's names once and brings its blocks into the order of calculation. */
export function pageGraph(page: PageDocument): PageGraph {
  const resolve = resolver(page);
  const lines = new PageLines(page, resolve);
  const problems = new Map<string, Problem[]>();
  const nodes = new Map<string, Node>();
  const reads = new Map<string, Set<string>>();

  for (const block of page.blocks) {
    problems.set(block.id, danglingIn(block, resolve));
    reads.set(block.id, new Set());
    if (block.kind === "trend") nodes.set(fitKey(block.id), { key: fitKey(block.id), step: { what: "fit", block }, needs: [] });
    nodes.set(blockKey(block.id), { key: blockKey(block.id), step: { what: "block", block }, needs: [] });
    for (const line of lines.of(block.id)) nodes.set(lines.key(line), { key: lines.key(line), line, needs: [] });
  }

  /** What a name inside an expression needs; notes which blocks it comes from. */
  const nameNeeds = (text: string, data: string | undefined, from: string): string[] => {
    const found: string[] = [];
    const read = reads.get(from);
    for (const used of namesUsed(text)) {
      if (used.member === undefined) {
        for (const line of lines.over(data, used.name)) {
          found.push(lines.key(line));
          if (line.block.id !== from) read?.add(line.block.id);
        }
        continue;
      }
      const block = resolve(used.name);
      if (block === undefined) continue;
      if (block.id !== from) read?.add(block.id);
      found.push(...memberNeeds(block, used.member, lines));
    }
    return found;
  };

  for (const block of page.blocks) {
    const node = nodes.get(blockKey(block.id));
    const fit = nodes.get(fitKey(block.id));
    const read = reads.get(block.id);
    if (node === undefined || read === undefined) continue;
    const target = fit ?? node;
    if (fit !== undefined) node.needs.push(fit.key);
    for (const reference of referencesOf(block)) {
      const other = resolve(reference.handle);
      if (other === undefined || !reference.expects.includes(other.kind)) continue;
      read.add(other.id);
      if (reference.field === "crossWith") node.needs.push(fitKey(other.id));
      else target.needs.push(blockKey(other.id));
    }
    for (const expression of expressionsOf(block)) {
      const over = expression.data === undefined ? undefined : resolve(expression.data)?.id;
      target.needs.push(...nameNeeds(expression.text, over, block.id));
    }
    if (block.kind === "budget" && block.target !== undefined && "trend" in block.target) {
      const trend = resolve(block.target.trend);
      if (trend?.kind === "trend") for (const text of [trend.x, trend.y]) target.needs.push(...nameNeeds(text, resolve(trend.data)?.id, block.id));
    }
    for (const line of lines.of(block.id)) {
      const own = nodes.get(lines.key(line));
      if (own === undefined) continue;
      node.needs.push(own.key);
      if (line.data !== undefined) own.needs.push(blockKey(line.data));
      own.needs.push(...nameNeeds(line.line.text, line.data, block.id));
    }
    if (block.kind === "note") {
      for (const quote of quotesIn(block.text)) {
        for (const other of quotedBlocks(quote.parts, resolve, lines)) {
          if (other === block.id) continue;
          read.add(other);
          node.needs.push(blockKey(other));
        }
      }
    }
  }

  const { order, cycles } = circles([...nodes.keys()], (key) => nodes.get(key)?.needs.filter((need) => nodes.has(need)) ?? []);
  const circular = new Set<string>();
  const circleByLine = new Map<PageLine, string>();
  for (const cycle of cycles) nameCircle(cycle, nodes, problems, circular, circleByLine);

  const readsFrom = new Map<string, readonly string[]>();
  for (const [id, found] of reads) readsFrom.set(id, [...found]);
  return {
    resolve,
    linesOver: (data, name) => lines.over(data, name),
    linesOf: (block) => lines.of(block),
    linesNamed: (name) => lines.named(name),
    steps: order.flatMap((key) => {
      const step = nodes.get(key)?.step;
      return step === undefined || circular.has(step.block.id) ? [] : [step];
    }),
    needs: (step) => neededBy(step, nodes),
    readsFrom,
    problems,
    circular,
    circleOf: (line) => circleByLine.get(line),
  };
}

function blockKey(id: string): string {
  return `block:${id}`;
}
function fitKey(id: string): string {
  return `fit:${id}`;
}

function resolver(page: PageDocument): (handle: string) => Block | undefined {
  const byHandle = new Map<string, Block>();
  for (const block of page.blocks)
    for (const former of block.formerly ?? []) if (!byHandle.has(former.normalize("NFC"))) byHandle.set(former.normalize("NFC"), block);
  for (const block of page.blocks) byHandle.set(block.id.normalize("NFC"), block);
  return (handle) => byHandle.get(handle.normalize("NFC"));
}

/** Every line of every formula block, by block and by the data block it stands over. */
class PageLines {
  private readonly byBlock = new Map<string, PageLine[]>();
  private readonly byData = new Map<string, PageLine[]>();

  constructor(page: PageDocument, resolve: (handle: string) => Block | undefined) {
    for (const block of page.blocks) {
      if (block.kind !== "formula") continue;
      const data = block.data === undefined ? undefined : (resolve(block.data)?.id ?? block.data);
      const lines = parseLines(block.text).lines.map((line): PageLine => ({ name: line.name, block, line, data }));
      this.byBlock.set(block.id, lines);
      for (const line of lines) {
        const key = dataKey(data, line.name);
        this.byData.set(key, [...(this.byData.get(key) ?? []), line]);
      }
    }
  }

  of(block: string): readonly PageLine[] {
    return this.byBlock.get(block) ?? [];
  }

  over(data: string | undefined, name: string): readonly PageLine[] {
    return this.byData.get(dataKey(data, name.normalize("NFC"))) ?? [];
  }

  /** All lines of that name, over whatever table. */
  named(name: string): readonly PageLine[] {
    return [...this.byBlock.values()].flat().filter((line) => line.name === name);
  }

  key(line: PageLine): string {
    return `line:${line.block.id}:${line.name}`;
  }
}

function dataKey(data: string | undefined, name: string): string {
  return `${data ?? ""}:${name}`;
}

/** What `block.member` needs: a table, a line, a trend's fit or its crossing, a budget. */
function memberNeeds(block: Block, member: string, lines: PageLines): string[] {
  switch (block.kind) {
    case "data":
      return [blockKey(block.id), ...lines.over(block.id, member).map((line) => lines.key(line))];
    case "formula":
      return lines
        .of(block.id)
        .filter((line) => line.name === member.normalize("NFC"))
        .map((line) => lines.key(line));
    case "trend":
      return [member.startsWith("crossing") ? blockKey(block.id) : fitKey(block.id)];
    default:
      return [blockKey(block.id)];
  }
}

/** Blocks whose results a note's quote shows. */
function quotedBlocks(parts: readonly string[], resolve: (handle: string) => Block | undefined, lines: PageLines): string[] {
  const [first, second] = parts;
  if (first === undefined) return [];
  const block = resolve(first);
  const fromLine = (line: PageLine) => line.block.id;
  if (second === undefined) return [...lines.named(first).map(fromLine), ...(block === undefined ? [] : [block.id])];
  if (block === undefined) return [];
  return block.kind === "data" ? [block.id, ...lines.over(block.id, second).map(fromLine)] : [block.id];
}

const kindNames: Readonly<Record<Block["kind"], string>> = {
  data: "a data block",
  formula: "a formula block",
  plot: "a plot",
  trend: "a trend",
  budget: "a budget",
  note: "a note",
};

function danglingIn(block: Block, resolve: (handle: string) => Block | undefined): Problem[] {
  return referencesOf(block).flatMap((reference): Problem[] => {
    const other = resolve(reference.handle);
    const wanted = kindNames[reference.expects[0] ?? "data"];
    const at = { severity: "error" as const, block: block.id, field: reference.field };
    if (other === undefined) {
      return [
        {
          code: "no-such-block",
          ...at,
          text: `There is no block "${reference.handle}" on this page; ${reference.field} needs ${wanted}. Choose another, or bring it back from the bin.`,
        },
      ];
    }
    if (reference.expects.includes(other.kind)) return [];
    return [
      { code: "wrong-kind", ...at, text: `${reference.field} needs ${wanted}, and "${reference.handle}" is ${kindNames[other.kind]}. Choose ${wanted}.` },
    ];
  });
}

/** Says at every line and block of a circle how it goes round. */
function nameCircle(
  cycle: readonly string[],
  nodes: ReadonlyMap<string, Node>,
  problems: ReadonlyMap<string, Problem[]>,
  circular: Set<string>,
  circleByLine: Map<PageLine, string>,
): void {
  const names = cycle.map((key) => {
    const node = nodes.get(key);
    return node?.line?.name ?? node?.step?.block.id ?? key;
  });
  const round = [...names.filter((name, i) => name !== names[i - 1]), names[0] ?? ""].join(" → ");
  for (const key of cycle) {
    const node = nodes.get(key);
    if (node?.line !== undefined) {
      circleByLine.set(node.line, round);
      problems.get(node.line.block.id)?.push({
        code: "circle",
        severity: "error",
        block: node.line.block.id,
        span: node.line.line.expressionSpan,
        text: `${node.line.name} is calculated from itself: ${round}. Break the circle in one of its places.`,
      });
    }
    if (node?.step !== undefined && !circular.has(node.step.block.id)) {
      const id = node.step.block.id;
      circular.add(id);
      problems
        .get(id)
        ?.push({ code: "circle", severity: "error", block: id, text: `${id} reads from itself: ${round}. Break the circle in one of its places.` });
    }
  }
}

/** A step's needs with those of the lines it uses, each once, in the order they are met. */
function neededBy(step: Step, nodes: ReadonlyMap<string, Node>): Need[] {
  const found: Need[] = [];
  const seen = new Set<string>();
  const visit = (keys: readonly string[]): void => {
    for (const key of keys) {
      if (seen.has(key)) continue;
      seen.add(key);
      const node = nodes.get(key);
      if (node?.line !== undefined) {
        found.push({ what: "line", line: node.line });
        visit(node.needs);
      } else if (node?.step !== undefined) found.push({ what: node.step.what, handle: node.step.block.id });
    }
  };
  visit(nodes.get(step.what === "fit" ? fitKey(step.block.id) : blockKey(step.block.id))?.needs ?? []);
  return found;
}
