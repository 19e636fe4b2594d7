import { units, type Unit } from "../quantity/unit";

/** A function of the language, as completion shows it. */
export interface FunctionInfo {
  readonly name: string;
  /** How it is written: `norm(expression, BODY)`. */
  readonly form: string;
  readonly help: string;
  readonly least: number;
  readonly most: number;
}

/** Units that functions make (`wtpct(20)`) and show (`as_wtpct(x)`), by the suffix of their names. */
export const unitSuffixes: ReadonlyMap<string, Unit> = new Map<string, Unit>([
  ["wtpct", units["wt%"]],
  ["gkg", units["g/kg"]],
  ["mgg", units["mg/g"]],
  ["ugg", units["µg/g"]],
  ["ppm", units["µg/g"]],
  ["ngg", units["ng/g"]],
  ["ppb", units["ng/g"]],
  ["pgg", units["pg/g"]],
  ["kgkg", units["kg/kg"]],
  ["molpct", units["mol%"]],
  ["atpct", units["at%"]],
  ["molkg", units["mol/kg"]],
  ["permil", units["‰"]],
  ["epsilon", units["ε"]],
  ["mu", units["µ"]],
  ["kelvin", units.K],
  ["celsius", units["°C"]],
  ["gpa", units.GPa],
  ["kbar", units.kbar],
  ["bar", units.bar],
  ["gcm3", units["g/cm³"]],
  ["ma", units.Ma],
  ["ga", units.Ga],
  ["dex", units.dex],
]);

function info(name: string, form: string, help: string, least = 1, most = least): FunctionInfo {
  return { name, form, help, least, most };
}

const aggregateForms = (name: string, what: string): FunctionInfo =>
  info(
    name,
    `${name}(x), ${name}(x, "class"), ${name}(x, Group)`,
    `${what} over samples: all, one class, or class by class. What is missing or set aside is left out.`,
    1,
    2,
  );

export const aggregateNames = ["mean", "median", "sd", "se", "wmean", "count", "least", "most"] as const;
export type AggregateName = (typeof aggregateNames)[number];

export const functions: readonly FunctionInfo[] = [
  info("log10", "log10(x)", "Logarithm to the base 10 of a dimensionless number above 0."),
  info("ln", "ln(x)", "Natural logarithm of a dimensionless number above 0."),
  info("exp", "exp(x)", "e to the power of a dimensionless number."),
  info("sqrt", "sqrt(x)", "Square root."),
  info("abs", "abs(x)", "Value without its sign."),
  info("min", "min(a, b, …)", "The least of several values of one unit, sample by sample.", 2, 50),
  info("max", "max(a, b, …)", "The greatest of several values of one unit, sample by sample.", 2, 50),
  info("atoms", "atoms(Mg)", "Amount of an element: mass fraction over atomic weight. atoms(Mg) / atoms(Si) is a ratio by atoms."),
  info("mol", "mol(SiO2)", "Amount of formula units: mass fraction over molar mass."),
  info("oxide", "oxide(Mg)", "Mass fraction of an element written as its usual oxide: MgO for Mg, FeO for all iron."),
  info("norm", "norm(expression, BODY)", "The expression divided by the same expression on a body. A normalised ratio has no basis.", 2),
  info("at", "at(expression, BODY)", "The expression on a body.", 2),
  info("from_dex", "from_dex(x)", "Ratio by atoms from its logarithm: 10 to the power of x."),
  info("to_dex", "to_dex(x)", "Logarithm to the base 10 of a ratio, in dex."),
  info("is_missing", "is_missing(x)", "True where a value is missing."),
  info("is_below", "is_below(x)", "True where a value is below detection."),
  aggregateForms("mean", "Mean, with σ = sd/√n,"),
  aggregateForms("median", "Median, with σ = 1.2533 sd/√n,"),
  aggregateForms("sd", "Standard deviation (n − 1), with σ = sd/√(2(n − 1)),"),
  aggregateForms("se", "Standard error of the mean, sd/√n,"),
  aggregateForms("wmean", "Mean weighted by 1/σ² of each sample, with its internal σ,"),
  aggregateForms("count", "Number of values"),
  aggregateForms("least", "Least value"),
  aggregateForms("most", "Greatest value"),
  ...[...unitSuffixes].map(([suffix, unit]) => info(suffix, `${suffix}(number)`, `Makes a plain number a quantity in ${unit.symbol}.`)),
  ...[...unitSuffixes].map(([suffix, unit]) => info(`as_${suffix}`, `as_${suffix}(x)`, `Shows a quantity in ${unit.symbol}.`)),
];

const byName: ReadonlyMap<string, FunctionInfo> = new Map(functions.map((f) => [f.name, f]));
export const functionNames: ReadonlySet<string> = new Set(byName.keys());

export function functionNamed(name: string): FunctionInfo | undefined {
  return byName.get(name);
}

/** What people write for functions of the language. */
export const otherSpellings: ReadonlyMap<string, string> = new Map([
  ["log", "ln or log10"],
  ["lg", "log10"],
  ["average", "mean"],
  ["avg", "mean"],
  ["std", "sd"],
  ["stdev", "sd"],
  ["pow", "^, as in x^2"],
  ["if", "condition ? value : other value"],
  ["ppmw", "ugg"],
  ["n", "count"],
  ["maximum", "most"],
  ["minimum", "least"],
  ["atom", "atoms"],
  ["moles", "mol"],
  ["normalize", "norm"],
  ["normalise", "norm"],
  ["isnan", "is_missing"],
  ["sum", "+"],
]);
