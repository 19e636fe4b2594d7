/**
 * Units of measured quantities.
 *
 * A value is held in its dimension's canonical unit: mass fractions as kg/kg, temperatures in K, pressures in GPa, times in
 * Ma. `per` is how many of the unit make one canonical unit, so that 45.0 wt% becomes 45.0 / 100, correctly rounded.
 */
export type DimensionName =
  | "mass fraction"
  | "amount fraction"
  | "amount per mass"
  | "atoms per million Si"
  | "dimensionless"
  | "relative deviation"
  | "temperature"
  | "pressure"
  | "density"
  | "time"
  | "dex";

export interface Unit {
  /** As screens and results write it. */
  readonly symbol: string;
  readonly dimension: DimensionName;
  readonly per: number;
  /** Added after dividing by `per`: only °C has one. */
  readonly offset: number;
  /** Code in the Unified Code for Units of Measure, for export. */
  readonly ucum: string;
}

function unit(symbol: string, dimension: DimensionName, per: number, ucum: string, offset = 0): Unit {
  return { symbol, dimension, per, offset, ucum };
}

/** Every unit the product knows, by the symbol it shows. */
export const units = {
  "kg/kg": unit("kg/kg", "mass fraction", 1, "kg/kg"),
  "wt%": unit("wt%", "mass fraction", 100, "%{mass}"),
  "g/kg": unit("g/kg", "mass fraction", 1e3, "g/kg"),
  "mg/g": unit("mg/g", "mass fraction", 1e3, "mg/g"),
  "µg/g": unit("µg/g", "mass fraction", 1e6, "ug/g"),
  "ng/g": unit("ng/g", "mass fraction", 1e9, "ng/g"),
  "pg/g": unit("pg/g", "mass fraction", 1e12, "pg/g"),
  "mol%": unit("mol%", "amount fraction", 100, "%{moles}"),
  "at%": unit("at%", "amount fraction", 100, "%{atoms}"),
  "mol/kg": unit("mol/kg", "amount per mass", 1, "mol/kg"),
  "atoms/10⁶ Si": unit("atoms/10⁶ Si", "atoms per million Si", 1, "{atoms}/10*6.{Si}"),
  "1": unit("1", "dimensionless", 1, "1"),
  "‰": unit("‰", "relative deviation", 1e3, "[ppth]"),
  ε: unit("ε", "relative deviation", 1e4, "10*-4"),
  µ: unit("µ", "relative deviation", 1e6, "10*-6"),
  K: unit("K", "temperature", 1, "K"),
  "°C": unit("°C", "temperature", 1, "Cel", 273.15),
  GPa: unit("GPa", "pressure", 1, "GPa"),
  kbar: unit("kbar", "pressure", 10, "kbar"),
  bar: unit("bar", "pressure", 1e4, "bar"),
  "g/cm³": unit("g/cm³", "density", 1, "g/cm3"),
  Ma: unit("Ma", "time", 1, "Ma"),
  Ga: unit("Ga", "time", 1e-3, "Ga"),
  dex: unit("dex", "dex", 1, "{dex}"),
} as const satisfies Record<string, Unit>;

export type UnitSymbol = keyof typeof units;

/** Spellings laboratories use, lower-cased with spaces removed, and the unit each one means. */
const spellings: ReadonlyMap<string, UnitSymbol> = new Map<string, UnitSymbol>([
  ["kg/kg", "kg/kg"],
  ...[
    "wt%",
    "wt.%",
    "wtpct",
    "wt.pct",
    "wt.-%",
    "wt-%",
    "weight%",
    "weightpercent",
    "mass%",
    "mass-%",
    "mass.%",
    "m%",
    "%",
    "pct",
    "percent",
    "%mass",
    "%(m/m)",
    "g/100g",
    "gew%",
    "gew.-%",
    "gew.%",
    "ma.-%",
    "masse%",
  ].map((s): [string, UnitSymbol] => [s, "wt%"]),
  ["g/kg", "g/kg"],
  ["gkg-1", "g/kg"],
  ["mg/g", "mg/g"],
  ...["µg/g", "μg/g", "ug/g", "mcg/g", "µgg-1", "μgg-1", "ugg-1", "µgg⁻¹", "μgg⁻¹", "mg/kg", "mgkg-1", "ppm", "ppmw", "ppm(wt)", "wtppm", "ppmwt", "g/t"].map(
    (s): [string, UnitSymbol] => [s, "µg/g"],
  ),
  ...["ng/g", "ngg-1", "ngg⁻¹", "ppb", "ppbw", "µg/kg", "μg/kg", "ug/kg"].map((s): [string, UnitSymbol] => [s, "ng/g"]),
  ...["pg/g", "pgg-1", "ppt", "ng/kg"].map((s): [string, UnitSymbol] => [s, "pg/g"]),
  ...["mol%", "mole%", "mol.%", "mol-%"].map((s): [string, UnitSymbol] => [s, "mol%"]),
  ...["at%", "at.%", "atom%", "atomic%", "atom-%"].map((s): [string, UnitSymbol] => [s, "at%"]),
  ["mol/kg", "mol/kg"],
  ["molkg-1", "mol/kg"],
  ...["atoms/10⁶si", "atoms/10^6si", "atoms/1e6si", "per10^6si", "per10⁶si", "atomsper10⁶si", "atomsper10^6si", "si=10^6", "si=1e6"].map(
    (s): [string, UnitSymbol] => [s, "atoms/10⁶ Si"],
  ),
  ...["1", "ratio", "dimensionless", "-"].map((s): [string, UnitSymbol] => [s, "1"]),
  ...["‰", "permil", "permille", "permill"].map((s): [string, UnitSymbol] => [s, "‰"]),
  ["ε", "ε"],
  ["epsilon", "ε"],
  ["µ", "µ"],
  ["μ", "µ"],
  ["k", "K"],
  ["kelvin", "K"],
  ...["°c", "degc", "℃", "celsius"].map((s): [string, UnitSymbol] => [s, "°C"]),
  ["gpa", "GPa"],
  ["kbar", "kbar"],
  ["kb", "kbar"],
  ["bar", "bar"],
  ...["g/cm³", "g/cm3", "g/cm^3", "gcm-3", "g/cc"].map((s): [string, UnitSymbol] => [s, "g/cm³"]),
  ...["ma", "myr"].map((s): [string, UnitSymbol] => [s, "Ma"]),
  ...["ga", "gyr"].map((s): [string, UnitSymbol] => [s, "Ga"]),
  ["dex", "dex"],
]);

/**
 * The unit a text means, or undefined when it means none we know.
 *
 * @param text a unit as a header or a person writes it: `wt. %`, `ppm`, `ug/g`, `µg g⁻¹` …
 */
export function parseUnit(text: string): Unit | undefined {
  const symbol = spellings.get(text.normalize("NFC").toLowerCase().replace(/\s+/gu, ""));
  return symbol === undefined ? undefined : units[symbol];
}

/** A value in `unit` brought to the canonical unit of its dimension. */
export function toCanonical(value: number, of: Unit): number {
  return value / of.per + of.offset;
}

/** A canonical value written in `unit`. */
export function fromCanonical(value: number, of: Unit): number {
  return (value - of.offset) * of.per;
}

/** A 1σ in `unit` brought to the canonical unit: an offset does not move it. */
export function sigmaToCanonical(sigma: number, of: Unit): number {
  return sigma / of.per;
}

/** A canonical 1σ written in `unit`. */
export function sigmaFromCanonical(sigma: number, of: Unit): number {
  return sigma * of.per;
}
