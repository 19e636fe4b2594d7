import { State } from "../../quantity/state";
import { measuredColumns, oxides, type Measured } from "../../species";
import type { QuantityColumn, Table } from "../../table/table";
import type { Problems } from "../problems";
import type { Flags } from "./flags";

/** Range of totals of volatile-free rocks, wt%; common practice, no source. */
const COMMON = { from: 98.5, to: 101.5 } as const;
/** Without these a sum of oxides means nothing. */
const majors = ["SiO2", "Al2O3", "MgO", "CaO"] as const;
const known: ReadonlySet<string> = new Set(oxides);
const volatileOxides: ReadonlySet<string> = new Set(["H2O", "CO2", "SO2", "SO3"]);

/** The columns whose sum is the total of a row, iron counted once. */
interface Counted {
  readonly columns: readonly QuantityColumn[];
  /** Those that a row must have for its total to mean anything: the majors and the iron. */
  readonly needed: readonly QuantityColumn[];
}

/**
 * Totals of oxides against a range, only for rows that have the major oxides and all their iron. Iron counts once: a total as
 * it is given (FeOt or Fe2O3t), else every part the table has, metal and troilite by their own mass. Where the table leaves
 * open whether its iron is all of it, no total is checked.
 */
export function screenTotals(table: Table, flags: Flags, problems: Problems, range: { readonly from: number; readonly to: number } = COMMON): void {
  const counted = countedColumns(table, problems);
  if (counted === undefined) return;
  for (let row = 0; row < table.rows; row++) {
    if (table.setAside[row] === 1 || !counted.needed.every((column) => column.state[row] === State.present)) continue;
    let total = 0;
    for (const column of counted.columns) if (column.state[row] === State.present) total += 100 * (column.value[row] ?? Number.NaN);
    if (total >= range.from && total <= range.to) continue;
    const missing = counted.columns.filter((column) => column.state[row] !== State.present).map((column) => column.name);
    const without = missing.length === 0 ? "" : `, without ${missing.slice(0, 4).join(", ")}${missing.length > 4 ? " …" : ""}`;
    const side = total < range.from ? `below ${range.from.toFixed(1)}` : `above ${range.to.toFixed(1)}`;
    flags.flag("total", row, undefined, `total ${total.toFixed(1)} wt%, ${side}${without}`);
  }
}

function countedColumns(table: Table, problems: Problems): Counted | undefined {
  const measured = measuredColumns(table).filter(({ column, species }) => species !== undefined && column.unit.dimension === "mass fraction");
  const byName = (name: string): QuantityColumn | undefined => measured.find(({ species }) => species?.name === name)?.column;
  const needed = majors.map(byName);
  if (!needed.every((column) => column !== undefined)) return undefined;
  const iron = ironOnce(measured);
  if (iron === undefined) return undefined;
  if (iron === "untold") {
    problems.note(
      "totals-iron",
      "Totals of oxides are not checked: the table does not say whether its column of iron is all the iron or a part. Set its species to say so.",
    );
    return undefined;
  }
  const ignition = table.columns.find(
    (column): column is QuantityColumn => column.kind === "quantity" && column.name === "LOI" && column.unit.dimension === "mass fraction",
  );
  const columns = [...oxidesOf(measured, ignition !== undefined), ...iron, ...(ignition === undefined ? [] : [ignition])];
  return { columns, needed: [...needed, ...iron] };
}

/** Every oxide once, and elements of which no oxide is there; never iron. */
function oxidesOf(measured: readonly Measured[], hasIgnition: boolean): readonly QuantityColumn[] {
  const taken = new Set<string>(["Fe", "O"]);
  const found: QuantityColumn[] = [];
  const hasTroilite = measured.some(({ species }) => species?.name === "FeS");
  if (hasTroilite) taken.add("S");
  for (const oxide of [true, false])
    for (const { column, species } of measured) {
      if (species === undefined || taken.has(species.element) || known.has(species.name) !== oxide) continue;
      // Loss on ignition holds the volatiles already.
      if (hasIgnition && (volatileOxides.has(species.name) || ["H", "C", "S"].includes(species.element))) continue;
      taken.add(species.element);
      found.push(column);
    }
  return found;
}

/** The iron's columns by mass, each form once; "untold" where nobody says how much of it a lone column is. */
function ironOnce(measured: readonly Measured[]): readonly QuantityColumn[] | "untold" | undefined {
  const iron = measured.filter(({ species }) => species?.element === "Fe");
  if (iron.length === 0) return undefined;
  const oxideTotal = iron.find(({ species }) => species?.name === "FeOt") ?? iron.find(({ species }) => species?.name === "Fe2O3t");
  if (oxideTotal !== undefined) return [oxideTotal.column];
  const forms = new Map<string, QuantityColumn>();
  for (const { column, species } of iron) {
    if (species?.iron === "total") continue;
    const form = species?.name.replace(/_ferr(?:ous|ic)$/u, "") ?? "";
    if (!forms.has(form)) forms.set(form, column);
  }
  // All of it as the element: how much oxygen goes with it is not known, so no total follows.
  if (forms.size === 0) return undefined;
  if (forms.has("Fe")) return "untold";
  const [only] = iron;
  if (forms.size === 1 && only?.species?.iron === "untold") return "untold";
  return forms.size === 1 ? undefined : [...forms.values()];
}
