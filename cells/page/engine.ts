import { CellError, type Problem } from "../errors";
import { bodyLookup } from "../species";
import type { BlockContext } from "./context";
import { emptyResult } from "./emptyResult";
import { evaluateBlock, type Pair } from "./evaluateBlock";
import { pageGraph, type PageGraph, type Step } from "./graph";
import { Memory } from "./memory";
import { plotAxis } from "./references";
import { ENGINE_VERSION, type BlockResult, type PageResults, type TraceNode, type TraceRequest } from "./results";
import { nearest, type Nearest, type NearestRequest } from "../data/nearest";
import type { Table } from "../table/table";
import { pageScopes, type Scopes } from "./scopes";
import type { Block, Column, DataBlock, PageDocument } from "./schema";
import { proposeImport } from "./propose";
import { simulatedNumber, simulationOf, type Simulation } from "../simulate";
import { traceNumber } from "./trace";

/** A column as import proposes it, and why. */
export interface ProposedColumn {
  readonly column: Column;
  /** Sentence for people: what in the header or the first rows led to this. */
  readonly reason: string;
}

/** What import proposes for a file, before anything is saved. */
export interface ImportProposal {
  readonly fileName: string;
  readonly headers: readonly string[];
  /** Every data row as text; ragged rows are filled up with `""`. */
  readonly rows: readonly (readonly string[])[];
  readonly columns: readonly ProposedColumn[];
  /** What could not be read, row by row. */
  readonly problems: readonly Problem[];
}

/**
 * The engine: synchronous, without clock, network or chance. It remembers its last evaluation, so that a block whose inputs
 * did not change keeps the identical result object.
 */
export interface Engine {
  /** Gives the bytes of a source, under its SHA-256 or, on the command line, its file name. */
  setSource(ref: string, bytes: Uint8Array): void;
  hasSource(ref: string): boolean;
  /**
   * @param simulations "now" runs every simulation to its end; "later" gives results of first order at once, with the
   *   simulations that are to be advanced by the caller, whose blocks have their full results from the next evaluation on
   */
  evaluate(page: PageDocument, simulations?: "now" | "later"): PageResults;
  /** Where a number of the last evaluation comes from; null where there is no such number now. */
  trace(request: TraceRequest): TraceNode | null;
  /** Bodies and samples nearest to a sample of the last evaluation; null where there is no such sample, or it says too little. */
  nearest(request: NearestRequest): Nearest | null;
  /** Reads a file and proposes what each of its columns is. Throws CellError where it is no table. */
  propose(bytes: Uint8Array, fileName: string): ImportProposal;
}

/** An engine with nothing in it. */
export function createEngine(): Engine {
  const sources = new Map<string, Uint8Array>();
  const memory = new Memory();
  let last: Evaluation | undefined;
  return {
    setSource: (ref, bytes) => void sources.set(ref, bytes),
    hasSource: (ref) => sources.has(ref),
    evaluate: (page, simulations = "now") => {
      last = new Evaluation(page, sources, memory);
      return last.run(simulations);
    },
    trace: (request) => last?.trace(request) ?? null,
    nearest: (request) => last?.nearest(request) ?? null,
    propose: proposeImport,
  };
}

/** One evaluation of one page. */
class Evaluation {
  private readonly graph: PageGraph;
  private readonly scopes: Scopes;
  private readonly context: BlockContext;
  private readonly results = new Map<string, BlockResult>();
  private readonly fits = new Map<string, BlockResult>();
  /** What names of bodies mean on this page, as one text: everything but tables depends on it. */
  private readonly aliases: string;
  /** Pairs of expressions that are drawn or fitted against each other, by data block. */
  private readonly pairs: readonly Pair[];

  constructor(
    private readonly page: PageDocument,
    private readonly sources: ReadonlyMap<string, Uint8Array>,
    private readonly memory: Memory,
  ) {
    const own = page.ownBodies ?? {};
    const bodies = bodyLookup(page.bodies ?? {}, own);
    this.graph = pageGraph(page);
    this.aliases = JSON.stringify([
      page.bodies ?? {},
      Object.keys(own)
        .sort()
        .map((id) => [id, own[id]]),
    ]);
    this.pairs = pairsOf(page, this.graph);
    const resultOf = (handle: string, whole: boolean): BlockResult | undefined => (whole ? undefined : this.fits.get(handle)) ?? this.results.get(handle);
    this.scopes = pageScopes(this.graph, bodies, resultOf);
    this.context = {
      bodies,
      aliases: Object.keys(page.bodies ?? {}),
      scope: (data) => this.scopes.over(data),
      expand: (text, data) => this.scopes.expand(text, data),
      result: (handle) => {
        const block = this.graph.resolve(handle);
        return block === undefined ? undefined : (this.results.get(block.id) ?? this.fits.get(block.id));
      },
      block: (handle) => this.graph.resolve(handle),
    };
  }

  run(simulations: "now" | "later"): PageResults {
    this.memory.begin();
    for (const step of this.graph.steps) this.calculate(step);
    for (const block of this.page.blocks) {
      if (!this.results.has(block.id)) this.results.set(block.id, this.recallEmpty(block));
    }
    this.memory.end();
    const bodies: Record<string, string> = {};
    for (const [alias, id] of Object.entries(this.page.bodies ?? {})) if (this.context.bodies(alias) !== undefined) bodies[alias] = id;
    const blocks = new Map<string, BlockResult>();
    const putOff = new Map<string, Simulation>();
    for (const block of this.page.blocks) {
      const result = this.results.get(block.id);
      if (result === undefined) continue;
      Object.assign(bodies, result.bodiesUsed);
      const simulation = this.simulation(block);
      const simulated = simulations === "now" ? simulation?.finish() : simulation?.result;
      blocks.set(block.id, simulated ?? result);
      if (simulation !== undefined && simulated === undefined) putOff.set(block.id, simulation);
    }
    return { engine: ENGINE_VERSION, bodies, blocks, readsFrom: this.graph.readsFrom, ...(putOff.size === 0 ? {} : { simulations: putOff }) };
  }

  /** Other blocks read what first order says, so that nothing waits for a simulation and nothing depends on whether it ran. */
  private simulation(block: Block): Simulation | undefined {
    const result = this.results.get(block.id);
    return result === undefined ? undefined : simulationOf(result, "simulate" in block ? block.simulate : undefined);
  }

  nearest({ block, index }: NearestRequest): Nearest | null {
    const tableOf = (handle: string): Table | undefined => {
      const result = this.results.get(handle);
      return result?.kind === "data" ? result.table : undefined;
    };
    const own = tableOf(this.graph.resolve(block)?.id ?? block);
    // A table made of others has their samples; each counts where it was read.
    const others = this.page.blocks.flatMap((each) => {
      const table = each.kind === "data" && each.stack === undefined && each.join === undefined ? tableOf(each.id) : undefined;
      return table === undefined ? [] : [table];
    });
    return own === undefined ? null : nearest(own, index, others, this.context.bodies.all);
  }

  trace(request: TraceRequest): TraceNode | null {
    const block = this.graph.resolve(request.block);
    const node = block === undefined ? null : traceNumber(block, request, this.context);
    if (block === undefined || node === null) return node;
    const simulated = simulatedNumber(this.simulation(block)?.result, request);
    return simulated === undefined ? node : { ...node, simulated };
  }

  private calculate(step: Step): void {
    if (step.what === "fit") {
      const { crossWith: _, ...alone } = step.block;
      this.fits.set(
        alone.id,
        this.memory.recall(`fit:${alone.id}`, this.inputs(step), () => this.evaluate(alone)),
      );
      return;
    }
    const { block } = step;
    const fit = this.fits.get(block.id);
    const result =
      block.kind === "trend" && block.crossWith === undefined && fit !== undefined
        ? fit
        : this.memory.recall(block.id, this.inputs(step), () => this.evaluate(block));
    this.results.set(block.id, result);
  }

  private evaluate(block: Block): BlockResult {
    const own = (this.graph.problems.get(block.id) ?? []).filter(
      (problem) => problem.field !== "crossWith" || (block.kind === "trend" && block.crossWith !== undefined),
    );
    let result: BlockResult;
    try {
      result = evaluateBlock(block, this.context, {
        source: block.kind === "data" ? this.sourceOf(block) : undefined,
        circular: new Set(this.graph.linesOf(block.id).flatMap((line) => (this.graph.circleOf(line) === undefined ? [] : [line.name]))),
        drawnTogether: block.kind === "formula" ? this.pairs.filter((pair) => pair.data === this.overOf(block.data)) : [],
        linesNamed: (name) => this.graph.linesNamed(name).map((line) => line.block.id),
      });
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      result = emptyResult(block, [error.toProblem(block.id)]);
    }
    return withProblems(result, own);
  }

  /** A block in a circle has no result, and says so. */
  private recallEmpty(block: Block): BlockResult {
    return this.memory.recall(block.id, this.ownInputs(block), () => emptyResult(block, this.graph.problems.get(block.id) ?? []));
  }

  private inputs(step: Step): unknown[] {
    const found = this.ownInputs(step.block);
    for (const need of this.graph.needs(step)) {
      if (need.what === "line") {
        const { block, name, line, data } = need.line;
        found.push(block.id, name, line.text, data, this.graph.circleOf(need.line));
        continue;
      }
      const other = this.graph.resolve(need.handle);
      found.push(need.what === "fit" ? this.fits.get(need.handle) : this.results.get(need.handle));
      if (other !== undefined) found.push(documentText(other));
    }
    return found;
  }

  private ownInputs(block: Block): unknown[] {
    const found: unknown[] = [documentText(block), JSON.stringify(this.graph.problems.get(block.id) ?? [])];
    if (block.kind === "data") found.push(this.sourceOf(block));
    else found.push(this.aliases);
    if (block.kind === "formula") found.push(JSON.stringify(this.pairs.filter((pair) => pair.data === this.overOf(block.data))));
    return found;
  }

  private sourceOf(block: DataBlock): Uint8Array | undefined {
    const { source } = block;
    if (source === undefined) return undefined;
    return (source.sha256 === undefined ? undefined : this.sources.get(source.sha256)) ?? this.sources.get(source.file);
  }

  private overOf(data: string | undefined): string | undefined {
    return data === undefined ? undefined : this.graph.resolve(data)?.id;
  }
}

/** A block's document as far as results of first order can depend on it. */
function documentText(block: Block): string {
  return JSON.stringify({ ...block, width: undefined, simulate: undefined });
}

/** A result with what the page has to say of its block; where both say the same, the page does it in more words. */
function withProblems(result: BlockResult, problems: readonly Problem[]): BlockResult {
  if (problems.length === 0) return result;
  const isSaid = (known: Problem): boolean =>
    problems.some((problem) => known.code === problem.code && known.field === problem.field && known.span?.[0] === problem.span?.[0]);
  return { ...result, problems: [...problems, ...result.problems.filter((known) => !isSaid(known))] };
}

/** What stands on the two axes of trends and plots, where it is a name alone. */
function pairsOf(page: PageDocument, graph: PageGraph): Pair[] {
  const found: Pair[] = [];
  const put = (data: string, x: string | undefined, y: string | undefined): void => {
    const over = graph.resolve(data)?.id;
    const [a, b] = [x?.trim(), y?.trim()];
    if (over === undefined || a === undefined || b === undefined || a === b) return;
    if (graph.linesOver(over, a).length !== 1 || graph.linesOver(over, b).length !== 1) return;
    if (!found.some((pair) => pair.data === over && pair.of.includes(a) && pair.of.includes(b))) found.push({ data: over, of: a < b ? [a, b] : [b, a] });
  };
  for (const block of page.blocks) {
    if (block.kind === "trend") put(block.data, block.x, block.y);
    if (block.kind === "plot")
      for (const drawn of block.drawn) if ("data" in drawn) put(drawn.data, drawn.x ?? plotAxis(block, "x"), drawn.y ?? plotAxis(block, "y"));
  }
  return found.sort((p, q) => (JSON.stringify(p) < JSON.stringify(q) ? -1 : 1));
}
