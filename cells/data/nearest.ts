import { log } from "../numeric";
import { State } from "../quantity/state";
import { elementsOfBody, measuredColumns, resolveSpecies, type Body } from "../species";
import type { RowId } from "../page/schema";
import type { Table } from "../table/table";

/** Which sample is asked about: index into its table's rows. */
export interface NearestRequest {
  readonly block: string;
  readonly index: number;
}

/** A body or a sample beside the chosen sample. */
export interface NearestOne {
  /** Id of a body, or name of a sample. */
  readonly name: string;
  /** What a body is; handle of a sample's table. */
  readonly of: string;
  /** Of a sample: its row. */
  readonly row?: RowId;
  /** Log-ratio distance over the components both have: natural logarithms, dimensionless. */
  readonly distance: number;
  /** The distance over √(number of components), so that those with few components in common do not come first for that. */
  readonly perComponent: number;
  /** Elements used, and those of the chosen sample that it lacks. */
  readonly used: readonly string[];
  readonly missing: readonly string[];
}

/** Which bodies and samples a sample is nearest to. */
export interface Nearest {
  readonly sample: string;
  /** Elements that the chosen sample has: present, above 0, and known as a mass. */
  readonly components: readonly string[];
  /** Nearest first. */
  readonly bodies: readonly NearestOne[];
  readonly samples: readonly NearestOne[];
  /** How many bodies and samples have fewer than three of these elements and are not compared. */
  readonly tooFew: number;
}

/** Fewer components in common say nothing: two have a single ratio. */
const FEWEST = 3;
/** How many of each are given. */
const MOST = 12;

/**
 * Distance of two compositions over the components they share (Aitchison 1986, The Statistical Analysis of Compositional Data,
 * § 8.3; Aitchison et al. 2000, Math. Geol. 32, 271): √Σ (clr(x)ᵢ − clr(y)ᵢ)², clr(x)ᵢ = ln(xᵢ / geometric mean of x). It asks for
 * ratios alone: total, unit, and whether by mass or by atoms do not matter.
 *
 * @param x natural logarithms of one composition's components; NaN where it has none
 * @returns distance and the number of components; distance NaN for fewer than three
 */
export function logRatioDistance(x: ArrayLike<number>, y: ArrayLike<number>): { readonly distance: number; readonly shared: number } {
  let shared = 0;
  let sum = 0;
  for (let i = 0; i < x.length; i++) {
    const d = (x[i] ?? NaN) - (y[i] ?? NaN);
    if (d !== d) continue;
    shared++;
    sum += d;
  }
  if (shared < FEWEST) return { distance: NaN, shared };
  const mean = sum / shared;
  let square = 0;
  for (let i = 0; i < x.length; i++) {
    const d = (x[i] ?? NaN) - (y[i] ?? NaN);
    if (d === d) square += (d - mean) * (d - mean);
  }
  return { distance: Math.sqrt(square), shared };
}

/**
 * Bodies and samples nearest to a sample, by {@link logRatioDistance} over elements. Rows set aside, and rows of the same origin
 * as the chosen one, are left out.
 *
 * @param index of the chosen row in its table
 * @param tables all whose samples are compared
 * @returns null where there is no such row, or it has fewer than three elements
 */
export function nearest(table: Table, index: number, tables: readonly Table[], bodies: readonly Body[]): Nearest | null {
  if (!(Number.isInteger(index) && index >= 0 && index < table.rows)) return null;
  const all = elementsOf(table);
  const own = all.map((element) => logsOf(table, element)?.[index] ?? NaN);
  const components = all.filter((_, i) => own[i] === own[i]);
  const chosen = own.filter((value) => value === value);
  if (components.length < FEWEST) return null;
  let tooFew = 0;
  const compare = (name: string, of: string, other: readonly number[], row?: RowId): NearestOne[] => {
    const { distance, shared } = logRatioDistance(chosen, other);
    if (distance !== distance) {
      tooFew++;
      return [];
    }
    const has = (i: number): boolean => other[i] === other[i];
    return [
      {
        name,
        of,
        ...(row === undefined ? {} : { row }),
        distance,
        perComponent: distance / Math.sqrt(shared),
        used: components.filter((_, i) => has(i)),
        missing: components.filter((_, i) => !has(i)),
      },
    ];
  };
  const found = bodies.flatMap((body) => {
    const elements = elementsOfBody(body);
    return compare(
      body.id,
      body.what,
      components.map((element) => logOf(elements.get(element)?.value ?? NaN)),
    );
  });
  const origins = new Set((table.origins[index] ?? []).map(keyOf));
  const samples: NearestOne[] = [];
  for (const other of tables) {
    const columns = components.map((element) => logsOf(other, element));
    for (let row = 0; row < other.rows; row++) {
      if (other.setAside[row] === 1 || (other === table && row === index)) continue;
      const from = (other.origins[row] ?? []).map(keyOf);
      if (from.some((key) => origins.has(key))) continue;
      samples.push(
        ...compare(
          other.samples[row] ?? "",
          other.handle,
          columns.map((column) => column?.[row] ?? NaN),
          other.rowIds[row] ?? row + 1,
        ),
      );
      if (samples.length > 4096) keepNearest(samples);
    }
  }
  return { sample: table.samples[index] ?? "", components, bodies: keepNearest(found), samples: keepNearest(samples), tooFew };
}

/** Sorts in place, the nearest first, equal ones as they came, and keeps so many. */
function keepNearest(all: NearestOne[]): NearestOne[] {
  all.sort((a, b) => a.perComponent - b.perComponent);
  if (all.length > MOST) all.length = MOST;
  return all;
}

function keyOf(origin: { readonly table: string; readonly row: RowId }): string {
  return JSON.stringify([origin.table, origin.row]);
}

function logOf(value: number): number {
  return value > 0 ? log(value) : NaN;
}

/** Elements that a table measures as masses, in the order of its columns. */
function elementsOf(table: Table): string[] {
  const found = new Set<string>();
  for (const { species, column } of measuredColumns(table)) if (species !== undefined && column.unit.dimension === "mass fraction") found.add(species.element);
  return [...found];
}

const known = new WeakMap<Table, Map<string, Float64Array | undefined>>();

/** ln of an element's mass fraction, row by row; NaN where it is not present. Undefined where the table does not give it. */
function logsOf(table: Table, element: string): Float64Array | undefined {
  const made = known.get(table) ?? new Map<string, Float64Array | undefined>();
  known.set(table, made);
  if (!made.has(element)) made.set(element, readLogs(table, element));
  return made.get(element);
}

function readLogs(table: Table, element: string): Float64Array | undefined {
  const resolution = resolveSpecies(table, element === "Fe" ? "Fe_total" : element);
  if (resolution?.ok !== true) return undefined;
  const found = new Float64Array(table.rows).fill(NaN);
  for (let row = 0; row < table.rows; row++) {
    const candidate = resolution.candidates[resolution.choice[row] ?? 0];
    if (resolution.state[row] !== State.present || candidate === undefined) continue;
    if (candidate.terms.some(({ column }) => column.unit.dimension !== "mass fraction")) continue;
    let value = 0;
    for (const { factor, column } of candidate.terms) value += factor * (column.value[row] ?? NaN);
    found[row] = logOf(value);
  }
  return found;
}
