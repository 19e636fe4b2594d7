import { atomicWeightRows } from "./reference/atomicWeights";

const weights: ReadonlyMap<string, number> = new Map(atomicWeightRows.map((row) => [row.element, row.atomicWeight]));

/** Standard atomic weight (CIAAW/IUPAC 2021, as in the reference table); undefined for what is not an element with one. */
export function atomicWeight(element: string): number | undefined {
  return weights.get(element);
}

/** True for the symbol of an element, written as it should be: `Mg`, not `MG`. */
export function isElement(text: string): boolean {
  return weights.has(text);
}

/** A chemical formula, read. */
export interface Chemical {
  readonly formula: string;
  /** Atoms per formula unit by element, in the order of the formula. */
  readonly atoms: ReadonlyMap<string, number>;
  /** g/mol */
  readonly weight: number;
}

const read = new Map<string, Chemical | null>();

/**
 * Reads a formula: `SiO2`, `Mg1.8Fe0.2SiO4`, `CaMg(CO3)2`.
 *
 * @returns undefined where the text is not a formula of known elements
 */
export function parseChemical(formula: string): Chemical | undefined {
  const known = read.get(formula);
  if (known !== undefined) return known ?? undefined;
  const chemical = parse(formula);
  if (read.size < 2000) read.set(formula, chemical ?? null);
  return chemical;
}

function parse(formula: string): Chemical | undefined {
  if (formula.length === 0 || formula.length > 80) return undefined;
  const tokens = formula.match(/[A-Z][a-z]?|\d+(?:\.\d+)?|[()]/gu) ?? [];
  if (tokens.join("") !== formula) return undefined;
  const stack: Map<string, number>[] = [new Map()];
  for (let i = 0; i < tokens.length; i++) {
    const token = tokens[i] ?? "";
    const top = stack[stack.length - 1];
    if (top === undefined) return undefined;
    if (token === "(") {
      stack.push(new Map());
      continue;
    }
    const next = tokens[i + 1] ?? "";
    const counted = /^\d/u.test(next);
    const count = counted ? Number(next) : 1;
    if (token === ")") {
      const outer = stack[stack.length - 2];
      if (outer === undefined || top.size === 0) return undefined;
      for (const [element, n] of top) outer.set(element, (outer.get(element) ?? 0) + n * count);
      stack.pop();
    } else if (weights.has(token)) top.set(token, (top.get(token) ?? 0) + count);
    else return undefined;
    if (!(count > 0)) return undefined;
    if (counted) i++;
  }
  const atoms = stack[0];
  if (stack.length !== 1 || atoms === undefined || atoms.size === 0) return undefined;
  let weight = 0;
  for (const [element, n] of atoms) weight += n * (weights.get(element) ?? Number.NaN);
  return { formula, atoms, weight };
}

/** The element an oxide or element stands for: Si of SiO2, Mg of Mg, H of H2O, O of O; undefined for anything with two cations. */
export function keyElement(chemical: Chemical): string | undefined {
  const others = [...chemical.atoms.keys()].filter((element) => element !== "O");
  if (others.length === 0) return "O";
  return others.length === 1 ? others[0] : undefined;
}

/** Mass of `element` per mass of `chemical`; 0 where it holds none. */
export function elementMassFraction(chemical: Chemical, element: string): number {
  return ((chemical.atoms.get(element) ?? 0) * (weights.get(element) ?? Number.NaN)) / chemical.weight;
}
