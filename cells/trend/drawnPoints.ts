import { columnOrigins } from "../data/members";
import { declaredCorrelation, type ColumnVariable, type CommonVariable, type Evaluated } from "../language";
import type { Random } from "../numeric";
import { byKey, commonNoise, type SimulationWish } from "../simulate";
import { streamOf } from "../simulate/streams";
import { lowerRoot } from "./jointDraws";
import type { FitPoints } from "./lineFit";
import type { SampleSource } from "./sampleSource";

/** A fit whose points are drawn. */
export interface FitToDraw {
  readonly source: SampleSource;
  readonly points: FitPoints;
}

/** Samples that are prepared before whoever waits may go first. */
const SAMPLES_AT_ONCE = 500;

/** How the points of a fit move: for each, the chances from `from[i]` to `from[i + 1]`, and by how much they move x and y. */
interface Moves {
  readonly from: Int32Array;
  readonly at: Int32Array;
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/** How the points of a fit move with something common to them. */
interface CommonMoves {
  readonly noise: Float64Array;
  readonly x: Float64Array | null;
  readonly y: Float64Array | null;
}

/** A measured value that points depend on, by every table it is met in. */
interface Cell {
  readonly key: string;
  readonly met: { readonly variable: ColumnVariable; readonly row: number }[];
  /** Its place among the chances. */
  at: number;
}

/** What the points of a sample depend on: its cells, in the order of their names, and the root of their correlations. */
interface Sample {
  readonly cells: Cell[];
  root?: readonly Float64Array[];
}

/**
 * The points of fits, moved within their errors, draw by draw: each measured value by its own chance, with the correlations that
 * its table declares, so that x and y of a sample err together as their formulas make them, and a sample that stands in several
 * fits, be it by way of a stack, moves in all of them; what is common to samples (bodies, means) once a draw; and, where a fit
 * counts scatter beyond the errors, that too. All of it to first order in the values, normal. What has no known σ stands still.
 *
 * Every chance follows from the seed and the name of what it moves, so that nothing else on a page can change it.
 *
 * @returns step by step, 0 at each: many samples take a while to prepare
 */
export function* drawnPoints(fits: readonly FitToDraw[], wish: SimulationWish): Generator<number, DrawnPoints> {
  const chances: Random[] = [];
  const chance = (name: string): number => chances.push(streamOf(wish.seed, name)) - 1;
  const samples = yield* samplesOf(fits);
  let prepared = 0;
  for (const sample of samples.values()) {
    const { cells } = sample;
    cells.sort((a, b) => (a.key < b.key ? -1 : 1));
    for (const cell of cells) cell.at = chance(`cell|${cell.key}`);
    if (cells.some(({ met }) => met.some(({ variable }) => variable.table.correlations.length > 0)))
      sample.root = lowerRoot(cells.map((a, i) => Float64Array.from(cells, (b, j) => (i === j ? 1 : correlationOf(a, b)))));
    if (++prepared % SAMPLES_AT_ONCE === 0) yield 0;
  }
  const scatters = new Map<string, number>();
  const scatterOf = (key: string): number => {
    const own = scatters.get(key) ?? chance(key);
    scatters.set(key, own);
    return own;
  };
  const moves: Moves[] = [];
  for (const { source } of fits) moves.push(yield* movesOf(source, samples, scatterOf));
  return new DrawnPoints(fits, chances, moves, commonsOf(fits, wish));
}

function* movesOf(source: SampleSource, samples: ReadonlyMap<string, Sample>, scatterOf: (key: string) => number): Generator<number, Moves> {
  const { rows, classes, handle, yMeaning } = source;
  const { extraY, from: ofErrors, factor } = source.errors;
  const scatters = ofErrors === "errors" && extraY > 0;
  const [inX, inY] = [source.x.inputs, source.y.inputs];
  const from = new Int32Array(rows.length + 1);
  const at: number[] = [];
  const x: number[] = [];
  const y: number[] = [];
  for (const [i, row] of rows.entries()) {
    const key = classes === undefined ? sampleKey(source, row) : `${handle}|${i}`;
    const { cells, root } = samples.get(key) ?? { cells: [] };
    const begin = at.length;
    for (const cell of cells) {
      at.push(cell.at);
      x.push(0);
      y.push(0);
    }
    const gather = (inputs: Evaluated["inputs"], into: number[]): void => {
      for (const { variable, partial } of inputs) {
        const size = factor * (entry(partial, row) ?? 0) * (variable.column.sigma[row] ?? 0);
        if (size !== size || size === 0) continue;
        const place = cells.findIndex(({ met }) => met.some((each) => each.variable.column === variable.column && each.row === row));
        if (root === undefined) into[begin + place] = (into[begin + place] ?? 0) + size;
        else for (let j = 0; j <= place; j++) into[begin + j] = (into[begin + j] ?? 0) + size * (root[place]?.[j] ?? 0);
      }
    };
    gather(inX, x);
    gather(inY, y);
    if (scatters) {
      at.push(scatterOf(`scatter|${yMeaning}|${key}`));
      x.push(0);
      y.push(extraY);
    }
    from[i + 1] = at.length;
    if (i % SAMPLES_AT_ONCE === 0) yield 0;
  }
  return { from, at: Int32Array.from(at), x: Float64Array.from(x), y: Float64Array.from(y) };
}

/** Points of fits that move: see {@link drawnPoints}. */
class DrawnPoints {
  /** By fit: the points of the present draw. */
  readonly x: readonly Float64Array[];
  readonly y: readonly Float64Array[];
  /** False where no error is known that could move anything. */
  readonly areMoving: boolean;
  readonly #z: Float64Array;
  #draw = 0;

  constructor(
    private readonly fits: readonly FitToDraw[],
    private readonly chances: readonly Random[],
    private readonly moves: readonly Moves[],
    private readonly commons: readonly (readonly CommonMoves[])[],
  ) {
    this.#z = new Float64Array(chances.length);
    this.x = fits.map(({ points }) => Float64Array.from(points.x));
    this.y = fits.map(({ points }) => Float64Array.from(points.y));
    const isMove = (by: number): boolean => by !== 0;
    this.areMoving = moves.some((each) => each.x.some(isMove) || each.y.some(isMove)) || commons.some((all) => all.length > 0);
  }

  /** Goes on to the next draw. */
  next(): void {
    const z = this.#z;
    for (let i = 0; i < z.length; i++) z[i] = (this.chances[i] as Random).normal();
    const k = this.#draw++;
    this.fits.forEach(({ points }, f) => {
      const [x, y, moves] = [this.x[f], this.y[f], this.moves[f]];
      if (x === undefined || y === undefined || moves === undefined) return;
      const { from, at, x: byX, y: byY } = moves;
      for (let i = 0; i < x.length; i++) {
        let dx = 0;
        let dy = 0;
        for (let j = from[i] as number; j < (from[i + 1] as number); j++) {
          const own = z[at[j] as number] as number;
          dx += (byX[j] as number) * own;
          dy += (byY[j] as number) * own;
        }
        for (const common of this.commons[f] ?? []) {
          const own = common.noise[k] as number;
          if (common.x !== null) dx += (common.x[i] as number) * own;
          if (common.y !== null) dy += (common.y[i] as number) * own;
        }
        x[i] = (points.x[i] as number) + dx;
        y[i] = (points.y[i] as number) + dy;
      }
    });
  }
}

/** One entry for all rows stands at each of them. */
function entry(values: Float64Array, row: number): number | undefined {
  return values.length === 1 ? values[0] : values[row];
}

/** Where a row was read, where that is one place; else the row of this table. */
function sampleKey({ table }: Pick<SampleSource, "table">, row: number): string {
  const origins = table.origins[row] ?? [];
  const [only] = origins;
  return JSON.stringify(origins.length === 1 && only !== undefined ? [only.table, only.row] : [table.handle, table.rowIds[row]]);
}

/** Which cell of which source a value is, where it is a single one. */
function cellKey({ table, column }: ColumnVariable, row: number): string {
  const origins = table.origins[row] ?? [];
  const [only] = origins;
  const source = origins.length === 1 ? columnOrigins(table.handle, column).find((each) => each.table === only?.table) : undefined;
  return JSON.stringify(source === undefined ? [table.handle, table.rowIds[row], column.name] : [source.table, only?.row, source.column]);
}

/** The measured values with a known σ that the points of some fits depend on, by sample. */
function* samplesOf(fits: readonly FitToDraw[]): Generator<number, Map<string, Sample>> {
  const samples = new Map<string, Sample>();
  for (const { source } of fits) {
    // Class means have their errors in common variables.
    if (source.classes !== undefined) continue;
    const byColumn = new Map([...source.x.inputs, ...source.y.inputs].map(({ variable }) => [variable.column, variable]));
    const inputs = [...byColumn.values()];
    for (const [i, row] of source.rows.entries()) {
      const key = sampleKey(source, row);
      const sample = samples.get(key) ?? { cells: [] };
      samples.set(key, sample);
      for (const variable of inputs) {
        if (!((variable.column.sigma[row] ?? Number.NaN) > 0)) continue;
        const own = cellKey(variable, row);
        const known = sample.cells.find((cell) => cell.key === own);
        if (known === undefined) sample.cells.push({ key: own, met: [{ variable, row }], at: -1 });
        else known.met.push({ variable, row });
      }
      if (i % SAMPLES_AT_ONCE === 0) yield 0;
    }
  }
  return samples;
}

/** What a table that has both values declares. */
function correlationOf(a: Cell, b: Cell): number {
  for (const first of a.met)
    for (const second of b.met) {
      const rho = first.row === second.row ? declaredCorrelation(first.variable, second.variable)?.[first.row] : undefined;
      if (rho !== undefined && rho === rho) return rho;
    }
  return 0;
}

/** By fit: the common variables with a known σ, their draws, and how each point moves with them. */
function commonsOf(fits: readonly FitToDraw[], wish: SimulationWish): CommonMoves[][] {
  const all = new Map<string, CommonVariable>();
  for (const { source } of fits) for (const { variable } of [...source.x.common, ...source.y.common]) all.set(variable.key, variable);
  const noise = commonNoise([...all.values()].sort(byKey), wish);
  return fits.map(({ source: { rows, x, y, errors, classes } }) => {
    const found: CommonMoves[] = [];
    for (const [axis, evaluated] of [["x", x] as const, ["y", y] as const])
      for (const { variable, partial, place } of evaluated.common) {
        const own = noise.get(variable.key);
        if (own === undefined) continue;
        // Of class means, what belongs to one class is the error of its point.
        const factor = classes !== undefined && place !== undefined ? errors.factor : 1;
        const by = Float64Array.from(rows, (row) => factor * known(entry(partial, row)));
        found.push({ noise: own, x: axis === "x" ? by : null, y: axis === "y" ? by : null });
      }
    return found;
  });
}

function known(x: number | undefined): number {
  return x !== undefined && x === x ? x : 0;
}
