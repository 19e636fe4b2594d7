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

/** How one point of a fit moves: with which independent chances, by how much in x and y. */
interface Moves {
  readonly at: Int32Array;
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/** A measured value that points depend on, by every table it is met in. */
interface Cell {
  readonly key: string;
  readonly met: { readonly variable: ColumnVariable; readonly row: number }[];
  /** Its place among the chances. */
  at: number;
}

/**
 * The points of fits, moved within their errors, draw by draw: each measured value by its own chance, with the correlations that
 * its table declares, so that x and y of a sample err together as their formulas make them, and a sample that stands in several
 * fits, be it by way of a stack, moves in all of them; what is common to samples (bodies, means) once a draw; and, where a fit
 * counts scatter beyond the errors, that too. All of it to first order in the values, normal. What has no known σ stands still.
 *
 * Every chance follows from the seed and the name of what it moves, so that nothing else on a page can change it.
 */
export class DrawnPoints {
  /** By fit: the points of the present draw. */
  readonly x: readonly Float64Array[];
  readonly y: readonly Float64Array[];
  /** False where no error is known that could move anything. */
  readonly areMoving: boolean;
  readonly #moves: readonly (readonly Moves[])[];
  readonly #chances: Random[] = [];
  readonly #z: Float64Array;
  readonly #commons: readonly (readonly { readonly noise: Float64Array; readonly x: Float64Array | null; readonly y: Float64Array | null }[])[];
  #draw = 0;

  constructor(
    private readonly fits: readonly FitToDraw[],
    wish: SimulationWish,
  ) {
    const samples = samplesOf(fits);
    const roots = new Map<string, readonly Float64Array[]>();
    const scatters = new Map<string, number>();
    const chance = (name: string): number => this.#chances.push(streamOf(wish.seed, name)) - 1;
    for (const [sample, cells] of samples) {
      cells.sort((a, b) => (a.key < b.key ? -1 : 1));
      for (const cell of cells) cell.at = chance(`cell|${cell.key}`);
      roots.set(sample, lowerRoot(cells.map((a, i) => Float64Array.from(cells, (b, j) => (i === j ? 1 : correlationOf(a, b))))));
    }
    this.#moves = fits.map(({ source }) => {
      const [inX, inY] = [source.x.inputs, source.y.inputs];
      const { extraY, from, factor } = source.errors;
      return Array.from(source.rows, (row, i): Moves => {
        const sample = source.classes === undefined ? sampleKey(source, row) : `${source.handle}|${i}`;
        const cells = samples.get(sample) ?? [];
        const root = roots.get(sample) ?? [];
        const gather = (inputs: Evaluated["inputs"]): number[] => {
          const by = new Array<number>(cells.length).fill(0);
          for (const { variable, partial } of inputs) {
            const place = cells.findIndex(({ key }) => key === cellKey(variable, row));
            const size = factor * (entry(partial, row) ?? 0) * (variable.column.sigma[row] ?? 0);
            if (size === size && size !== 0) for (let j = 0; j <= place; j++) by[j] = (by[j] ?? 0) + size * (root[place]?.[j] ?? 0);
          }
          return by;
        };
        const [at, x, y] = [cells.map((cell) => cell.at), gather(inX), gather(inY)];
        if (from === "errors" && extraY > 0) {
          const key = `scatter|${source.yMeaning}|${sample}`;
          const own = scatters.get(key) ?? chance(key);
          scatters.set(key, own);
          at.push(own);
          x.push(0);
          y.push(extraY);
        }
        return { at: Int32Array.from(at), x: Float64Array.from(x), y: Float64Array.from(y) };
      });
    });
    this.#z = new Float64Array(this.#chances.length);
    this.#commons = commonsOf(fits, wish);
    this.x = fits.map(({ points }) => Float64Array.from(points.x));
    this.y = fits.map(({ points }) => Float64Array.from(points.y));
    const moves = this.#moves.some((all) => all.some((each) => each.x.some((d) => d !== 0) || each.y.some((d) => d !== 0)));
    this.areMoving = moves || this.#commons.some((all) => all.length > 0);
  }

  /** Goes on to the next draw. */
  next(): void {
    for (let i = 0; i < this.#chances.length; i++) this.#z[i] = this.#chances[i]?.normal() ?? 0;
    const k = this.#draw++;
    this.fits.forEach(({ points }, f) => {
      const [x, y, moves] = [this.x[f], this.y[f], this.#moves[f]];
      if (x === undefined || y === undefined || moves === undefined) return;
      for (let i = 0; i < x.length; i++) {
        let dx = 0;
        let dy = 0;
        const own = moves[i];
        if (own !== undefined)
          for (let j = 0; j < own.at.length; j++) {
            const z = this.#z[own.at[j] as number] as number;
            dx += (own.x[j] as number) * z;
            dy += (own.y[j] as number) * z;
          }
        for (const { noise, x: byX, y: byY } of this.#commons[f] ?? []) {
          const z = noise[k] as number;
          if (byX !== null) dx += (byX[i] as number) * z;
          if (byY !== null) dy += (byY[i] as number) * z;
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
function samplesOf(fits: readonly FitToDraw[]): Map<string, Cell[]> {
  const samples = new Map<string, Cell[]>();
  for (const { source } of fits) {
    // Class means have their errors in common variables.
    if (source.classes !== undefined) continue;
    const inputs = [...source.x.inputs, ...source.y.inputs].map(({ variable }) => variable);
    for (const row of source.rows) {
      const sample = sampleKey(source, row);
      const cells = samples.get(sample) ?? [];
      samples.set(sample, cells);
      for (const variable of inputs) {
        if (!((variable.column.sigma[row] ?? Number.NaN) > 0)) continue;
        const key = cellKey(variable, row);
        const known = cells.find((cell) => cell.key === key);
        if (known === undefined) cells.push({ key, met: [{ variable, row }], at: -1 });
        else known.met.push({ variable, row });
      }
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
function commonsOf(
  fits: readonly FitToDraw[],
  wish: SimulationWish,
): { readonly noise: Float64Array; readonly x: Float64Array | null; readonly y: Float64Array | null }[][] {
  const all = new Map<string, CommonVariable>();
  for (const { source } of fits) for (const { variable } of [...source.x.common, ...source.y.common]) all.set(variable.key, variable);
  const noise = commonNoise([...all.values()].sort(byKey), wish);
  return fits.map(({ source: { rows, x, y, errors, classes } }) => {
    const found: { noise: Float64Array; x: Float64Array | null; y: Float64Array | null }[] = [];
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
