import { CellError, notYetSaid, type Problem } from "../errors";
import { evaluateExpression, type Evaluated } from "../language";
import type { BlockContext } from "../page/context";
import type { PlotBlock } from "../page/schema";

/** An expression of a plot, and where it stands. */
export interface Placed {
  readonly text: string;
  /** Handle of the data block its names stand over. */
  readonly data: string | undefined;
  /** Field of the plot that holds it; errors point there. */
  readonly field: string;
}

/** What one evaluation of a plot gathers on its way. A fault in one line of the list is that line's problem; the others are drawn. */
export class Drawing {
  readonly problems: Problem[] = [];
  readonly bodiesUsed: Record<string, string> = {};
  /** By place in the list: the rows whose condition holds, where a line of samples has one. */
  readonly chosen = new Map<number, Uint8Array>();
  readonly #known = new Map<string, Evaluated>();

  constructor(
    readonly block: PlotBlock,
    readonly context: BlockContext,
  ) {}

  /** What an expression comes to over its table; calculated once, however many lines draw it. */
  evaluate({ text, data, field }: Placed): Evaluated {
    const key = `${data ?? ""}|${text}`;
    const known = this.#known.get(key);
    if (known !== undefined) return known;
    const scope = this.context.scope(data);
    const evaluated = evaluateExpression(scope, text, { block: this.block.id, field });
    this.#known.set(key, evaluated);
    for (const problem of notYetSaid(evaluated.problems, this.problems)) this.note(problem);
    Object.assign(this.bodiesUsed, evaluated.bodiesUsed);
    return evaluated;
  }

  /** Does a piece of work; where it fails, notes why at `field`. */
  attempt<T>(field: string, work: () => T): T | undefined {
    try {
      return work();
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      const { span, ...problem } = error.toProblem(this.block.id);
      // The expressions of a ternary are put together from those people wrote, so places in them mean nothing to people.
      this.note({ field, ...problem, ...(span === undefined || this.block.plot === "ternary" ? {} : { span }) });
      return undefined;
    }
  }

  warn(code: string, field: string, text: string): void {
    this.note({ code, severity: "warning", block: this.block.id, field, text });
  }

  note(problem: Problem): void {
    const known = this.problems.some((other) => other.code === problem.code && other.field === problem.field && other.text === problem.text);
    if (!known) this.problems.push(problem);
  }
}
