import type { Simulation } from "@/cells";

/** How far the simulation of a block is. */
export interface SimulationProgress {
  readonly done: number;
  /** Draws of all its values. */
  readonly total: number;
  readonly isStopped: boolean;
}

export interface SimulationQueueParts {
  /** Runs something after the messages that wait already, so that a newer edit goes first. */
  readonly later: (run: () => void) => void;
  readonly now: () => number;
  readonly onProgress: (progress: ReadonlyMap<string, SimulationProgress>) => void;
  /** A simulation is done: the next evaluation has its result. */
  readonly onDone: () => void;
}

/** Milliseconds that are simulated before messages are looked at again. */
const SLICE = 20;
/** Milliseconds between two reports of progress. */
const REPORT = 100;

/** Runs the simulations that an evaluation put off, one after the other, a slice at a time. */
export function createSimulationQueue({ later, now, onProgress, onDone }: SimulationQueueParts) {
  let waiting: ReadonlyMap<string, Simulation> = new Map();
  const stopped = new WeakSet<Simulation>();
  let isDue = false;
  let reported = -Infinity;

  const next = (): Simulation | undefined => [...waiting.values()].find((simulation) => !stopped.has(simulation));

  const report = () => {
    reported = now();
    onProgress(new Map([...waiting].map(([handle, s]) => [handle, { done: s.done, total: s.total, isStopped: stopped.has(s) }])));
  };

  const schedule = () => {
    if (isDue || next() === undefined) return;
    isDue = true;
    later(() => {
      isDue = false;
      slice();
    });
  };

  const slice = () => {
    const simulation = next();
    if (simulation === undefined) return;
    const until = now() + SLICE;
    let isLeft = true;
    while (isLeft && now() < until) isLeft = simulation.advance();
    if (!isLeft) {
      // The evaluation that shows it says what is still to be simulated.
      onDone();
      return;
    }
    if (now() - reported >= REPORT) report();
    schedule();
  };

  return {
    /** Takes over what the newest evaluation put off; what it no longer names is given up. */
    take(simulations: ReadonlyMap<string, Simulation>) {
      const had = waiting.size > 0;
      waiting = simulations;
      if (had || waiting.size > 0) report();
      schedule();
    },
    /** Stops a block's simulation, or lets it go on from where it stopped. */
    stop(handle: string, isStopped: boolean) {
      const simulation = waiting.get(handle);
      if (simulation === undefined) return;
      if (isStopped) stopped.add(simulation);
      else stopped.delete(simulation);
      report();
      schedule();
    },
  };
}
