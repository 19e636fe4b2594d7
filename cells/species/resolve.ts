import type { Table } from "../table/table";
import { converted, convertsByMass, measuredColumns, single, type Measured } from "./candidates";
import { choose } from "./choose";
import { parseSpecies, type Species } from "./forms";
import { ironCandidates } from "./iron";
import type { Candidate, Refused, Resolution } from "./resolution";

const resolved = new WeakMap<Table, Map<string, Resolution | undefined>>();

/**
 * What a name means over a table: the column of that name, else a conversion from other columns of the element, chosen row
 * by row; where both exist, the one with a σ. Iron follows its own rules ({@link ironCandidates}).
 *
 * @param name a column's name, or a species as anyone spells it
 * @returns undefined where the table has nothing that the name could mean; a refusal where it has, but not so that a number follows
 */
export function resolveSpecies(table: Table, name: string): Resolution | undefined {
  const known = resolved.get(table) ?? new Map<string, Resolution | undefined>();
  resolved.set(table, known);
  if (known.has(name)) return known.get(name);
  const resolution = resolve(table, name);
  known.set(name, resolution);
  return resolution;
}

function resolve(table: Table, name: string): Resolution | undefined {
  const measured = measuredColumns(table);
  const own = measured.find((m) => m.column.name === name);
  const species = parseSpecies(name);
  // A column that is named otherwise than its species, or measures no mass fraction, means itself and nothing else.
  if (
    own !== undefined &&
    (species === undefined || own.species === undefined || own.species.element !== species.element || own.column.unit.dimension !== "mass fraction")
  )
    return choose(table, name, [single(own, name)]);
  if (species === undefined) return undefined;
  if (species.element === "Fe") {
    const iron = ironCandidates(
      measured.filter((m) => m.species?.element === "Fe" && convertsByMass(m.column)),
      name,
      species,
      own,
    );
    if (iron === undefined) return undefined;
    return iron.ok ? choose(table, name, iron.candidates, species.name) : iron;
  }
  const candidates: Candidate[] = own === undefined ? [] : [single(own, name)];
  const others = measured.filter((m) => m !== own && convertsByMass(m.column) && givesElement(m.species, species.element));
  for (const m of others) if (m.species?.name === species.name) candidates.push(converted(m, species));
  for (const m of others) if (m.species?.name !== species.name && m.species?.element === species.element) candidates.push(converted(m, species));
  // Sulphur of troilite stands in only where sulphur itself is not given: it is never added to it.
  if (species.element === "S") for (const m of others) if (m.species?.name === "FeS") candidates.push(converted(m, species));
  if (candidates.length > 0) return choose(table, name, candidates, species.name);
  const unfit = measured.find((m) => givesElement(m.species, species.element));
  return unfit === undefined ? undefined : unfitUnit(name, unfit);
}

function givesElement(species: Species | undefined, element: string): boolean {
  return species !== undefined && (species.element === element || (element === "S" && species.name === "FeS"));
}

function unfitUnit(name: string, of: Measured): Refused {
  const text = `${name} cannot be had from the column ${of.column.name}, which is in ${of.column.unit.symbol}: a conversion needs a mass fraction (wt%, µg/g …). Use ${of.column.name} as it stands, or import the mass fractions.`;
  return { ok: false, name, code: "species-unit", column: of.column.name, text };
}
