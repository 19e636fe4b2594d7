import { keyElement, parseChemical, type Chemical } from "./chemical";

/**
 * Species as tables name them. Iron is the only element whose columns are not all alike: a table may give it whole or in
 * parts, and the difference is a factor of two. `untold` is a bare Fe, FeO or Fe2O3, which may be either.
 */
export type IronForm = "total" | "part" | "untold";

export interface Species {
  /** As columns and formulas write it: `SiO2`, `FeOt`, `Fe_metal`. */
  readonly name: string;
  readonly chemical: Chemical;
  /** The element it is a measure of. */
  readonly element: string;
  readonly iron?: IronForm;
}

const ironForms: ReadonlyMap<string, readonly [formula: string, form: IronForm]> = new Map([
  ["Fe_total", ["Fe", "total"]],
  ["FeOt", ["FeO", "total"]],
  ["Fe2O3t", ["Fe2O3", "total"]],
  ["Fe_metal", ["Fe", "part"]],
  ["FeS", ["FeS", "part"]],
  ["FeO_ferrous", ["FeO", "part"]],
  ["Fe2O3_ferric", ["Fe2O3", "part"]],
  ["Fe", ["Fe", "untold"]],
  ["FeO", ["FeO", "untold"]],
  ["Fe2O3", ["Fe2O3", "untold"]],
]);

/** What laboratories write for the forms of iron, lower-cased, without spaces and underscores. */
const ironSpellings: ReadonlyMap<string, string> = new Map(
  Object.entries({
    FeOt: "feot feo* feo(t) feotot feo(tot) feo(tot.) feototal feo(total) totalfeo totfeo feo,total feoasterisk σfeo ∑feo feoall totalfeasfeo totfeasfeo allfeasfeo feasfeo fetasfeo fetotasfeo totalironasfeo allironasfeo feo(totalfe) feo(totalfeasfeo) feo(allfe) feo(feasfeo)",
    Fe2O3t:
      "fe2o3t fe2o3* fe2o3(t) fe2o3tot fe2o3(tot) fe2o3(tot.) fe2o3total fe2o3(total) totalfe2o3 totfe2o3 fe2o3,total σfe2o3 ∑fe2o3 fe2o3all totalfeasfe2o3 totfeasfe2o3 allfeasfe2o3 feasfe2o3 fetasfe2o3 fetotasfe2o3 totalironasfe2o3 allironasfe2o3 fe2o3(totalfe) fe2o3(totalfeasfe2o3)",
    Fe_total: "fet fetot fetotal fe(t) fe(tot) fe(tot.) fe(total) totalfe totfe bulkfe fe(bulk) febulk σfe ∑fe fe* totaliron irontotal fe,total feall",
    Fe_metal: "femetal fe(m) fe(metal) femet fe(met) fe(met.) metallicfe femetallic fe(metallic) fe0 fe(0) fe° fe⁰ metalfe nativefe metalliciron fe,metal",
    FeS: "fes fes(troilite) troilite fe(fes)",
    FeO_ferrous: "feoferrous feo(ferrous) ferrousfeo fe(ii)o fe2+o feo(ii) feo(titration) feo(titr.) ferrousoxide",
    Fe2O3_ferric: "fe2o3ferric fe2o3(ferric) ferricfe2o3 fe(iii)2o3 fe3+2o3 ferricoxide",
  }).flatMap(([name, spellings]) => spellings.split(" ").map((spelling): [string, string] => [spelling, name])),
);

const known = new Map<string, Species | null>();

/**
 * The species a text means, spelt as the product spells it: `FeO*` is FeOt, `SIO2` is SiO2. Undefined where the text is no
 * species. Two cations (a mineral) are no species, since they measure no single element.
 */
export function parseSpecies(text: string): Species | undefined {
  const cached = known.get(text);
  if (cached !== undefined) return cached ?? undefined;
  const species = find(text);
  if (known.size < 5000) known.set(text, species ?? null);
  return species;
}

function find(text: string): Species | undefined {
  // Subscript digits and the several letters that look like Σ and µ are one and the same here.
  const plain = text.normalize("NFKC").trim();
  const iron = ironForms.get(plain) === undefined ? ironSpellings.get(plain.toLowerCase().replace(/[\s_]+/gu, "")) : plain;
  if (iron !== undefined) return ironSpecies(iron);
  const spelt = plain.replace(/[\s_]+/gu, "");
  // Osmium and holmium in capitals would read as formulas of oxygen.
  if (spelt === "OS" || spelt === "HO") return upperElement(spelt);
  return chemicalSpecies(spelt) ?? chemicalSpecies(properCase.get(spelt.toLowerCase()) ?? "") ?? upperElement(spelt);
}

function ironSpecies(name: string): Species | undefined {
  const [formula, form] = ironForms.get(name) ?? [];
  const chemical = formula === undefined ? undefined : parseChemical(formula);
  return chemical === undefined || form === undefined ? undefined : { name, chemical, element: "Fe", iron: form };
}

function chemicalSpecies(formula: string): Species | undefined {
  const chemical = parseChemical(formula);
  const element = chemical === undefined ? undefined : keyElement(chemical);
  return chemical === undefined || element === undefined ? undefined : (ironSpecies(formula) ?? { name: formula, chemical, element });
}

/** Headers all in capitals: `MG`, `ZR`. Never where the text reads as a formula already (of `CO` in capitals the importer decides, and says so). */
function upperElement(text: string): Species | undefined {
  return /^[A-Z]{2}$/u.test(text) ? chemicalSpecies(text.charAt(0) + text.charAt(1).toLowerCase()) : undefined;
}

/** Oxides that rock and meteorite tables give, in the order that tables of results are written. */
export const oxides = [
  ...["SiO2", "TiO2", "ZrO2", "Al2O3", "Cr2O3", "V2O3", "V2O5", "Fe2O3", "FeO", "MnO", "MnO2", "NiO", "CoO", "ZnO", "MgO", "CaO", "SrO", "BaO"],
  ...[
    "Na2O",
    "K2O",
    "Li2O",
    "Rb2O",
    "Cs2O",
    "P2O5",
    "B2O3",
    "SO3",
    "SO2",
    "CO2",
    "H2O",
    "Y2O3",
    "Nb2O5",
    "ThO2",
    "UO2",
    "PbO",
    "CuO",
    "La2O3",
    "Ce2O3",
    "CrO",
    "Ti2O3",
  ],
] as const;

const properCase: ReadonlyMap<string, string> = new Map([...oxides, "FeS"].map((oxide) => [oxide.toLowerCase(), oxide]));

/**
 * Mass of `to` per mass of `from`, both standing for the same element: MgO → Mg is 0.603042. Where `to` is an element that
 * `from` holds beside others (Fe of Mg2SiO4's kin, S of FeS), its mass in it. Undefined where the two share no element.
 */
export function massFactor(from: string, to: string): number | undefined {
  const source = parseSpecies(from)?.chemical ?? parseChemical(from);
  const target = parseSpecies(to)?.chemical ?? parseChemical(to);
  if (source === undefined || target === undefined) return undefined;
  const element = target.atoms.size === 1 ? [...target.atoms.keys()][0] : (keyElement(target) ?? parseSpecies(to)?.element);
  const given = element === undefined ? undefined : source.atoms.get(element);
  const wanted = element === undefined ? undefined : target.atoms.get(element);
  if (given === undefined || wanted === undefined) return undefined;
  return source.formula === target.formula ? 1 : ((given / wanted) * target.weight) / source.weight;
}
