import type { Basis, Role, UncertaintyKind } from "../../../cells/page/schema";

/** A header as laboratories write it, and what it says. What is left out the header does not say. */
export interface KnownHeader {
  readonly header: string;
  readonly role: Role | undefined;
  readonly species?: string;
  readonly name?: string;
  readonly unit?: string;
  readonly basis?: Basis;
  readonly kind?: UncertaintyKind;
}

type What = { readonly species: string } | { readonly name: string };
const el = (species: string): What => ({ species });
const named = (name: string): What => ({ name });

/** Headers of one quantity in one unit. */
function quantities(what: What, unit: string | undefined, ...headers: readonly string[]): readonly KnownHeader[] {
  return headers.map((header) => ({ header, role: "quantity", ...what, ...(unit === undefined ? {} : { unit }) }));
}

/** Headers of uncertainties of one kind: of a species, or of the column before them. */
function uncertainties(kind: UncertaintyKind, species: string | undefined, unit: string | undefined, ...headers: readonly string[]): readonly KnownHeader[] {
  return headers.map((header) => ({
    header,
    role: "uncertainty",
    kind,
    ...(species === undefined ? {} : { species }),
    ...(unit === undefined ? {} : { unit }),
  }));
}

function ratios(name: string, basis: Basis | undefined, ...headers: readonly string[]): readonly KnownHeader[] {
  return headers.map((header) => ({ header, role: "quantity", name, unit: "1", ...(basis === undefined ? {} : { basis }) }));
}

function roles(role: Role | undefined, ...headers: readonly string[]): readonly KnownHeader[] {
  return headers.map((header) => ({ header, role }));
}

/**
 * Spellings met in laboratory exports, supplementary tables and data bases. Written down from knowledge of the trade; no
 * single source.
 */
export const knownHeaders: readonly KnownHeader[] = [
  // Oxides
  ...quantities(el("SiO2"), undefined, "SiO2", "SIO2", "sio2", "SiO₂", "SiO<sub>2</sub>", "SiO_2", " SiO2 ", "SiO2 measured", "XRF SiO2"),
  ...quantities(
    el("SiO2"),
    "wt%",
    ...["SiO2 (wt%)", "SiO2 (wt.%)", "SiO2 (wt. %)", "SiO2 [wt%]", "SiO2, wt%", "SiO2 wt%", "SiO2_wt%", "SIO2_WT_PCT", "SiO2(%)", "SiO2 %", "SiO2 [mass%]"],
    ...["wt% SiO2", "SiO2 (mass %)", "SiO2 (weight percent)", "SiO2 (Gew.-%)", "SiO2 (% (m/m))", "SiO2 % (m/m)", "SiO2 (g/100g)", "SIO2(WT%)", "SiO₂ (wt.%)"],
    ...["SiO2-wt%", "SiO2 (wt-%)", "SiO2 in wt%", "SiO2/wt%", "SiO2%", "%SiO2", "% SiO2"],
  ),
  ...quantities(el("Al2O3"), "wt%", "Al2O3 (wt%)", "AL2O3_WT%", "Al₂O₃ [wt.%]", "AL2O3(WT%)"),
  ...quantities(el("TiO2"), "wt%", "TiO2 (wt%)", "TIO2 (WT%)"),
  ...quantities(el("Cr2O3"), "wt%", "Cr2O3 (wt.%)"),
  ...quantities(el("MnO"), "wt%", "MnO wt.%"),
  ...quantities(el("MgO"), "wt%", "MgO (wt%)", "MGO_WT_PCT", "MgO [wt. %]", "MGO(WT%)", "MgO (g/100 g)"),
  ...quantities(el("CaO"), "wt%", "CaO (wt%)", "CAO(WT%)"),
  ...quantities(el("Na2O"), "wt%", "Na2O (wt%)", "NA2O(WT%)"),
  ...quantities(el("K2O"), "wt%", "K2O (wt%)", "K2O(WT%)"),
  ...quantities(el("P2O5"), "wt%", "P2O5 (wt%)", "P2O5(WT%)"),
  ...quantities(el("CO2"), "wt%", "CO2 (wt%)"),
  ...quantities(el("H2O"), "wt%", "H2O (wt%)"),
  ...quantities(el("SO3"), "wt%", "SO3 wt%"),
  // Iron, which is reported in many ways
  ...quantities(
    el("FeOt"),
    undefined,
    "FeO*",
    "FeOT",
    "FeO(T)",
    "FeO tot",
    "FeO_tot",
    "FeOtot",
    "FeO total",
    "FeO (total)",
    "Total FeO",
    "ΣFeO",
    "∑ FeO",
    "FeO(tot)",
  ),
  ...quantities(el("FeOt"), "wt%", "FeO* (wt%)", "FeOt (wt%)", "FeOT(WT%)", "FeO total (wt.%)", "FeO (total) [wt%]", "Total Fe as FeO (wt%)"),
  ...quantities(el("Fe2O3t"), undefined, "Fe2O3*", "Fe2O3T", "Fe2O3(T)", "Fe2O3tot", "Fe2O3 total", "Total Fe2O3", "Total Fe as Fe2O3", "Fe2O3_T"),
  ...quantities(el("Fe2O3t"), "wt%", "Fe2O3T (wt%)", "FE2O3T(WT%)", "Fe2O3t [wt.%]", "Fe2O3 (total) wt%"),
  ...quantities(el("FeO"), "wt%", "FeO (wt%)", "FEO(WT%)"),
  ...quantities(el("Fe2O3"), "wt%", "Fe2O3 (wt%)", "FE2O3(WT%)"),
  ...quantities(el("Fe_total"), undefined, "Fe total", "Total Fe", "Fe_tot", "FeT", "Fe(tot)", "bulk Fe"),
  ...quantities(el("Fe_metal"), "wt%", "Fe metal (wt%)", "Fe(m) wt%", "Metallic Fe (wt%)", "Fe0 (wt%)"),
  ...quantities(el("FeS"), "wt%", "FeS (wt%)", "FeS wt%"),
  ...quantities(el("Fe"), "wt%", "Fe (wt%)"),
  // Elements, major and trace
  ...quantities(el("Mg"), undefined, "Mg", "MG", "Mg24", "24Mg"),
  ...quantities(el("Mg"), "wt%", "Mg (wt%)", "Mg %", "Mg, wt.%", "Mg [%]", "Mg conc (wt%)"),
  ...quantities(el("Mg"), "g/kg", "Mg (g/kg)", "Mg g kg-1"),
  ...quantities(el("Mg"), "mg/g", "Mg (mg/g)", "Mg [mg/g]"),
  ...quantities(
    el("Ni"),
    "µg/g",
    ...[
      "Ni (ppm)",
      "Ni ppm",
      "Ni_ppm",
      "NI(PPM)",
      "Ni [µg/g]",
      "Ni [μg/g]",
      "Ni (ug/g)",
      "Ni (µg g-1)",
      "Ni µg g⁻¹",
      "Ni (mg/kg)",
      "Ni, mg/kg",
      "Ni (mg kg-1)",
    ],
    ...["ppm Ni", "Ni (ppmw)", "Ni_ug_g", "Ni (g/t)", "Ni (wt ppm)"],
  ),
  ...quantities(el("Ir"), "ng/g", "Ir (ppb)", "Ir_ppb", "IR(PPB)", "Ir (ng/g)", "Ir [ng g-1]", "Ir (µg/kg)"),
  ...quantities(el("Os"), "ng/g", "OS(PPB)", "Os (ppb)"),
  ...quantities(el("Ho"), "µg/g", "HO(PPM)", "Ho ppm"),
  ...quantities(el("Co"), "µg/g", "CO(PPM)", "CO_ppm", "Co ppm"),
  ...quantities(el("Sc"), "µg/g", "SC(PPM)"),
  ...quantities(el("Hf"), "µg/g", "HF(PPM)"),
  ...quantities(el("Cs"), "µg/g", "CS(PPM)"),
  ...quantities(el("Os"), "pg/g", "Os (pg/g)", "Os (ppt)", "Os pg/g"),
  ...quantities(el("La"), undefined, "La", "LA", "La139", "139La"),
  ...quantities(el("Sr"), "µg/g", "Sr88 (ppm)", "88Sr ppm", "Sr_ppm"),
  ...quantities(el("C"), "wt%", "C (wt%)", "C wt.%"),
  ...quantities(el("S"), "wt%", "S (wt%)", "S [wt.%]"),
  ...quantities(el("K"), "µg/g", "K (ppm)", "K ppm"),
  ...quantities(el("Si"), "at%", "Si (at%)", "Si at.%", "Si (atomic %)", "Si [atom%]"),
  ...quantities(el("SiO2"), "mol%", "SiO2 (mol%)", "SiO2 mol.%", "SiO2 (mole %)"),
  ...quantities(el("Mg"), "mol/kg", "Mg (mol/kg)"),
  ...quantities(el("Mg"), "atoms/10⁶ Si", "Mg (atoms/10^6 Si)", "Mg (atoms/10⁶ Si)", "Mg (atoms per 10^6 Si)", "Mg (Si=10^6)"),
  ...quantities(el("Mg"), "dex", "Mg (dex)"),
  // Sums and physical quantities
  ...quantities(named("Total"), undefined, "Total", "Sum", "TOTAL", "Summe", "Σ", "Sum of oxides"),
  ...quantities(named("Total"), "wt%", "Total (wt%)", "Sum (wt.%)"),
  ...quantities(named("LOI"), undefined, "LOI", "L.O.I.", "Loss on ignition"),
  ...quantities(named("LOI"), "wt%", "LOI (wt%)", "LOI(WT%)", "LOI wt.%"),
  ...quantities(named("H2O_plus"), undefined, "H2O+", "H2O(+)"),
  ...quantities(named("H2O_minus"), undefined, "H2O-", "H2O(-)"),
  ...quantities(named("Mg_number"), undefined, "Mg#", "Mg-number", "Mg no."),
  ...quantities(named("T"), "°C", "T (°C)", "T [deg C]", "T, °C"),
  ...quantities(named("T"), "K", "T (K)", "T [K]"),
  ...quantities(named("P"), "GPa", "P (GPa)", "P [GPa]"),
  ...quantities(named("P"), "kbar", "P (kbar)"),
  ...quantities(named("Age"), "Ma", "Age (Ma)", "Age [Myr]"),
  ...quantities(named("Age"), "Ga", "Age (Ga)"),
  ...quantities(named("Density"), "g/cm³", "Density (g/cm3)", "Density [g/cm³]", "Density (g cm-3)"),
  // Isotopes
  ...quantities(named("delta17O"), "‰", "δ17O", "d17O", "δ17O (‰)", "delta17O (permil)"),
  ...quantities(named("Delta17O"), "‰", "Δ17O", "Δ17O (‰)", "Δ'17O"),
  ...quantities(named("epsilon54Cr"), "ε", "ε54Cr", "eps54Cr"),
  ...quantities(named("mu142Nd"), "µ", "µ142Nd", "μ142Nd"),
  // Ratios
  ...ratios("Mg_Si", undefined, "Mg/Si", "Mg / Si", "(Mg/Si)"),
  ...ratios("Al_Si", "atoms", "Al/Si (atomic)", "Al/Si atomic", "Al/Si (at.)", "Al/Si (molar)", "Al/Si (mol)"),
  ...ratios("Mg_Si", "mass", "Mg/Si (mass)", "Mg/Si (by weight)", "Mg/Si (wt.)"),
  ...ratios("r87Sr_86Sr", "atoms", "87Sr/86Sr"),
  // Uncertainties of a named species
  ...uncertainties(
    "2 sigma",
    "SiO2",
    undefined,
    ...["2s SiO2", "SiO2 2s", "SiO2 2σ", "2σ SiO2", "2σ(SiO2)", "SiO2 (2σ)", "SiO2_2SD", "SiO2 2SE", "SiO2 ±2σ", "2SD SiO2", "SiO2 2 sigma", "SiO2_2s"],
  ),
  ...uncertainties("2 sigma", "SiO2", "wt%", "SiO2 2σ (wt%)", "2s SiO2 (wt%)", "SiO2 (wt%) 2s", "SiO2 [wt.%] 2SE"),
  ...uncertainties(
    "1 sigma",
    "MgO",
    undefined,
    ...["1s MgO", "MgO 1s", "MgO 1σ", "1σ MgO", "MgO_1SD", "MgO SD", "MgO_sd", "MgO stdev", "MgO std dev", "MgO (1σ)", "σ MgO", "σ(MgO)", "MgO sigma"],
    ...["SD MgO", "MgO_SE", "MgO st. dev.", "MgO standard deviation", "MgO std. error"],
  ),
  ...uncertainties("1 sigma", "MgO", "wt%", "MgO SD (wt%)", "MgO 1σ [wt%]"),
  ...uncertainties(
    "1 sigma",
    "MgO",
    undefined,
    "MgO error",
    "MgO err",
    "Err MgO",
    "±MgO",
    "MgO ±",
    "u(MgO)",
    "MgO unc.",
    "MgO uncertainty",
    "MgO_unc",
    "dMgO",
    "MgO +/-",
  ),
  ...uncertainties("1 sigma", "Ni", "µg/g", "Ni SD (ppm)", "Ni 1s ppm", "Ni ± (ppm)"),
  ...uncertainties("2 sigma", "Ni", "µg/g", "Ni_ppm_2SE", "Ni (ppm) 2σ", "Ni ppm 2SD"),
  ...uncertainties(
    "1 sigma relative %",
    "MgO",
    undefined,
    "MgO RSD%",
    "MgO RSD (%)",
    "MgO %RSD",
    "RSD MgO",
    "MgO 1s%",
    "MgO 1σ (%)",
    "MgO_RSD",
    "MgO rel. error",
  ),
  ...uncertainties("2 sigma relative %", "MgO", undefined, "MgO 2RSD%", "MgO 2σ%", "MgO 2s (%)", "MgO 2RSE (%)", "MgO 2σ rel.%"),
  ...uncertainties("95 % interval", "MgO", undefined, "MgO 95% CI", "MgO 95 % CL", "MgO CI95", "MgO 95% conf."),
  // Uncertainties of the column before them
  ...uncertainties("2 sigma", undefined, undefined, "2s", "2σ", "±2σ", "2SD", "2 SE", "2sigma", "2 s.d."),
  ...uncertainties("1 sigma", undefined, undefined, "1s", "1σ", "±1σ", "SD", "s.d.", "σ", "stdev", "Std. dev.", "1 SE", "s.e.m.", "±", "+/-", "error", "Unc."),
  ...uncertainties("1 sigma relative %", undefined, undefined, "RSD", "RSD%", "%RSD", "RSD (%)", "rel. error", "1σ %"),
  ...uncertainties("2 sigma relative %", undefined, undefined, "2RSD", "2σ %", "2s%", "2RSE"),
  ...uncertainties("95 % interval", undefined, undefined, "95% CI", "95 % conf. interval", "95%"),
  // Other roles
  ...roles(
    "sample",
    "Sample",
    "sample_id",
    "SAMPLE ID",
    "Sample No.",
    "Sample name",
    "Meteorite",
    "Name",
    "IGSN",
    "Specimen",
    "Probe",
    "Échantillon",
    "試料",
    "ID",
  ),
  ...roles("class", "Group", "Class", "Type", "Clan", "Lithology", "Rock type", "Classification", "Gruppe", "ROCK NAME"),
  ...roles("reference", "Reference", "Ref.", "Source", "DOI", "Citation", "References", "Literature", "Quelle"),
  ...roles("text", "Comment", "Notes", "Location", "Method", "Laboratory", "Weathering grade", "Latitude", "Remarks"),
  ...roles(undefined, "", "foo", "x1", "???", "Batch Q", "Zz (wt%)", "12"),
];
