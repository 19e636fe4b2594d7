import { State } from "../../quantity/state";
import { parseSpecies } from "../../species";
import type { QuantityColumn, Table } from "../../table/table";
import { shown, type Flags } from "./flags";

/** Least and most that the median of a column of rocks or meteorites is expected to be, kg/kg; common practice, no source. */
const expected: Readonly<Record<string, readonly [least: number, most: number]>> = {
  SiO2: [0.05, 1],
  Si: [0.02, 0.5],
  MgO: [0.0005, 0.65],
  Al2O3: [0.0005, 0.7],
};
/** Elements that are traces in every rock: more than 1 wt% in the middle of a column is a unit gone wrong; common practice, no source. */
const traces: ReadonlySet<string> = new Set(
  "Li Be B Sc V Co Cu Zn Ga Ge As Se Br Rb Sr Y Zr Nb Mo Ru Rh Pd Ag Cd In Sn Sb Te I Cs Ba La Ce Pr Nd Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Th U".split(
    " ",
  ),
);
const MOST_TRACE = 0.01;

/** Negative amounts, amounts above the whole, and columns whose middle does not fit their unit. */
export function screenMagnitudes(table: Table, flags: Flags): void {
  for (const column of table.columns) {
    if (column.kind !== "quantity" || !amounts.has(column.unit.dimension)) continue;
    const whole = column.unit.dimension === "mass fraction" || column.unit.dimension === "amount fraction";
    for (let row = 0; row < table.rows; row++) {
      if (table.setAside[row] === 1 || column.state[row] !== State.present) continue;
      const value = column.value[row] ?? Number.NaN;
      if (value < 0) flags.flag("negative", row, column.name, `${column.name} ${shown(value, column.unit)} is below zero`);
      // A rounding beyond 100 in a sum is no fault of its unit.
      else if (whole && value > 1.05)
        flags.flag("unit magnitude", row, column.name, `${column.name} ${shown(value, column.unit)} is more than the whole sample`);
    }
    if (column.unit.dimension === "mass fraction") screenMiddle(column, table, flags);
  }
}

const amounts: ReadonlySet<string> = new Set(["mass fraction", "amount fraction", "amount per mass", "atoms per million Si"]);

function screenMiddle(column: QuantityColumn, table: Table, flags: Flags): void {
  const { species } = column;
  if (species === undefined) return;
  const element = parseSpecies(species)?.element ?? "";
  const range = expected[species] ?? (traces.has(element) ? ([0, MOST_TRACE] as const) : undefined);
  if (range === undefined) return;
  const values: number[] = [];
  let first = -1;
  for (let row = 0; row < table.rows; row++) {
    if (table.setAside[row] === 1 || column.state[row] !== State.present) continue;
    if (first < 0) first = row;
    values.push(column.value[row] ?? Number.NaN);
  }
  if (values.length < 3) return;
  const middle = Float64Array.from(values).sort()[Math.floor(values.length / 2)] ?? Number.NaN;
  if (middle >= range[0] && middle <= range[1]) return;
  const way = middle < range[0] ? "little" : "much";
  flags.flag(
    "unit magnitude",
    first,
    column.name,
    `the ${values.length} values of ${column.name} have the median ${shown(middle, column.unit)}, unusually ${way} for ${species}; check the column's unit`,
  );
}
