import type { BlockResult } from "../page/results";
import type { SimulationWish } from "./simulated";

/**
 * A simulation under way. It advances by small parts when told to, so that whoever runs it can stop, or let something newer
 * go first; the result does not depend on how it was cut.
 */
export class Simulation {
  #done = 0;
  #result: BlockResult | undefined;

  /**
   * @param total draws of all values together
   * @param parts gives the number of draws that each part made, and at the end the result
   */
  constructor(
    readonly total: number,
    private readonly parts: Iterator<number, BlockResult>,
  ) {}

  /** Draws made so far. */
  get done(): number {
    return this.#done;
  }

  /** The block's result with what was simulated; undefined until all is done. */
  get result(): BlockResult | undefined {
    return this.#result;
  }

  /** Does the next part. @returns false when nothing is left */
  advance(): boolean {
    if (this.#result !== undefined) return false;
    const next = this.parts.next();
    if (next.done === true) this.#result = next.value;
    else this.#done += next.value;
    return this.#result === undefined;
  }

  /** Runs to the end. */
  finish(): BlockResult {
    while (this.advance());
    if (this.#result === undefined) throw new RangeError("expected a result at the end of a simulation, got none");
    return this.#result;
  }
}

/**
 * Starts what a block has to simulate: all of it where it wishes so, else only where first order cannot be trusted; undefined
 * where that is nothing.
 *
 * @param base the block's result of first order, as the page shows it
 */
export type StartSimulation<R extends BlockResult = BlockResult> = (base: R, wish: SimulationWish | undefined) => Simulation | undefined;

/** Under this key a result carries how it is simulated; neither JSON nor a message between threads takes it along. */
const startKey = Symbol("start of the simulation");

type Startable = BlockResult & { readonly [startKey]?: StartSimulation };

export function withSimulation<R extends BlockResult>(result: R, start: StartSimulation<R>): R {
  return { ...result, [startKey]: start };
}

const started = new WeakMap<BlockResult, { readonly wish: string; readonly simulation: Simulation | undefined }>();

/**
 * The simulation of a result: the same one as long as result and wish are the same, so that an edit elsewhere on the page
 * does not begin it anew.
 */
export function simulationOf(result: BlockResult, wish: SimulationWish | undefined): Simulation | undefined {
  const start = (result as Startable)[startKey];
  if (start === undefined) return undefined;
  const key = JSON.stringify(wish ?? null);
  const known = started.get(result);
  if (known?.wish === key) return known.simulation;
  const simulation = start(result, wish);
  started.set(result, { wish: key, simulation });
  return simulation;
}
