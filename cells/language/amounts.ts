import { CellError } from "../errors";
import { units, type Unit } from "../quantity/unit";
import { parseSpecies, type Species } from "../species";
import type { Compiler } from "./compiler";
import { sourceOf, type Frame } from "./frame";
import type { CompiledValue } from "./compiled";
import { dimensionOf, sameDimension, type Counting } from "./dimension";
import { inWords, quantityIn } from "./meaning";
import { resolveName } from "./names";
import type { CallTree, NameTree, Tree } from "./tree";

/** Usual oxides, where it is not the one with as many oxygens as the table of species begins with. */
const usualOxides: ReadonlyMap<string, string> = new Map(
  "SiO2 TiO2 ZrO2 HfO2 Al2O3 Cr2O3 V2O3 MnO NiO CoO ZnO MgO CaO SrO BaO Na2O K2O Li2O Rb2O Cs2O P2O5 B2O3 SO3 CO2 H2O Y2O3 Sc2O3 Nb2O5 Ta2O5 ThO2 UO2 PbO CuO La2O3 Ce2O3 Nd2O3 Sm2O3 Yb2O3 Ga2O3 GeO2 WO3 MoO3"
    .split(" ")
    .map((oxide): [string, string] => [parseSpecies(oxide)?.element ?? oxide, oxide]),
);

/**
 * `atoms(Mg)`, `mol(SiO2)`, `oxide(Mg)`: a species counted otherwise than by mass. Amounts are in mol/kg: mass fraction over
 * molar mass, with the molar mass in kg/mol.
 */
export function countSpecies(compiler: Compiler, tree: CallTree, name: "atoms" | "mol" | "oxide", frame: Frame): CompiledValue {
  const arg = tree.args[0];
  const named = arg === undefined ? undefined : speciesArgument(arg, frame);
  if (named === undefined || arg === undefined) throw notASpecies(tree, name, arg, frame);
  const { species } = named;
  if (name === "oxide") return asOxide(compiler, species, named.tree, frame);
  if (name === "atoms" && species.chemical.atoms.size > 1) {
    throw new CellError(
      "not-an-element",
      `atoms( ) counts one element, and ${named.tree.name} is a compound: write atoms(${species.element}), or mol(${species.chemical.formula}) to count formula units.`,
      { span: arg.span },
    );
  }
  const of = resolveName(compiler, named.tree, frame);
  if (of.kind !== "value") throw notASpecies(tree, name, arg, frame);
  const counting: Counting = species.chemical.atoms.size === 1 ? "atoms" : "formula units";
  if (isA(of, units["at%"]) || isA(of, units["mol/kg"]) || isA(of, units["atoms/10⁶ Si"])) return { ...of, meaning: { ...of.meaning, counting } };
  if (!isA(of, units["wt%"]))
    throw new CellError("unit-mismatch", `${name}( ) counts a species given by mass or amount, and ${sourceOf(arg, frame)} is ${inWords(of.meaning)}.`, {
      span: arg.span,
    });
  const perMass = compiler.graph.constant(species.chemical.weight / 1000);
  return {
    kind: "value",
    node: compiler.graph.div(of.node, perMass),
    state: of.state,
    meaning: quantityIn(units["mol/kg"], counting, dimensionOf(units["mol/kg"])),
    over: of.over,
  };
}

function isA(of: CompiledValue, unit: Unit): boolean {
  return sameDimension(of.meaning.dimension, dimensionOf(unit));
}

/** The species a name argument stands for: that of the column of the name, else the name's own. */
function speciesArgument(tree: Tree, frame: Frame): { readonly species: Species; readonly tree: NameTree } | undefined {
  if (tree.kind !== "name") return undefined;
  const name = tree.member ?? tree.name;
  const named = frame.scope.lookup(tree.name, tree.member);
  if (named !== undefined && (named === "ambiguous" || named.kind !== "column")) return undefined;
  const table = named?.table ?? frame.scope.table;
  const column = table?.columns.find((c) => c.name === name);
  const written = column?.kind === "quantity" ? column.species : name;
  const species = written === undefined ? undefined : parseSpecies(written);
  return species === undefined ? undefined : { species, tree };
}

function asOxide(compiler: Compiler, species: Species, tree: NameTree, frame: Frame): CompiledValue {
  const oxide = species.element === "Fe" ? "FeOt" : usualOxides.get(species.element);
  if (oxide === undefined) throw new CellError("no-oxide", `No usual oxide of ${species.element} is known here. Write the oxide itself.`, { span: tree.span });
  const member = tree.member === undefined ? {} : { member: oxide };
  const of = resolveName(compiler, { ...tree, name: tree.member === undefined ? oxide : tree.name, ...member }, frame);
  if (of.kind !== "value") throw new CellError("no-oxide", `${oxide} is a column of text here.`, { span: tree.span });
  return of;
}

function notASpecies(tree: CallTree, name: string, arg: Tree | undefined, frame: Frame): CellError {
  const source = arg === undefined ? "nothing" : sourceOf(arg, frame);
  const sum = arg?.kind === "binary" && (arg.operator === "+" || arg.operator === "-" || arg.operator === "/");
  const split = sum ? ` Write it for each: ${name}(${sourceOf(arg.left, frame)}) ${arg.operator} ${name}(${sourceOf(arg.right, frame)}).` : "";
  return new CellError(
    "not-a-species",
    `${name}( ) takes the name of an element or oxide, as in ${name}(${name === "mol" ? "SiO2" : "Mg"}), and ${source} is none.${split}`,
    { span: arg?.span ?? tree.span },
  );
}
