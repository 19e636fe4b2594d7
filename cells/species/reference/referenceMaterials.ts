/** Made from reference-materials.csv by `npm run reference`; do not edit by hand. */
import type { ReferenceMaterialRow } from "./rows";

const t1 = "USGS certificate of analysis, BHVO-2 (prelim., issued 1998-04-30; Wilson 1998)";
const t2 = "read in a copy of the source";
const t3 = "USGS certificate (Wilson 1997)";
const t4 = "from memory";
const t5 = "USGS certificate (Flanagan 1984; Gladney & Roelandts 1988)";
const t6 = "Govindaraju 1994, Geostand. Newsl. 18 (special issue)";
const t7 = "USGS certificate (preliminary)";
const t8 = "Imai et al. 1995, Geochem. J. 29, 91-95";
const t9 = "Allende powder (USNM 3529)";
const t10 = "Jarosewich, Clarke & Barrows 1987, Smithson. Contrib. Earth Sci. 27";

export const referenceMaterialRows: readonly ReferenceMaterialRow[] = [
  { material: "BHVO-2", quantity: "SiO2", value: 49.9, uncertainty: 0.6, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "TiO2", value: 2.73, uncertainty: 0.04, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "Al2O3", value: 13.5, uncertainty: 0.2, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "Fe2O3T", value: 12.3, uncertainty: 0.2, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "MgO", value: 7.23, uncertainty: 0.12, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "CaO", value: 11.4, uncertainty: 0.2, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "Na2O", value: 2.22, uncertainty: 0.08, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "K2O", value: 0.52, uncertainty: 0.01, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "P2O5", value: 0.27, uncertainty: 0.02, unit: "wt%", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "Mn", value: 1290, uncertainty: 40, unit: "ug/g", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "Cr", value: 280, uncertainty: 19, unit: "ug/g", source: t1, checked: t2 },
  { material: "BHVO-2", quantity: "Ni", value: 119, uncertainty: 7, unit: "ug/g", source: t1, checked: t2 },
  { material: "BCR-2", quantity: "SiO2", value: 54.1, uncertainty: 0.8, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "TiO2", value: 2.26, uncertainty: 0.05, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "Al2O3", value: 13.5, uncertainty: 0.2, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "Fe2O3T", value: 13.8, uncertainty: 0.2, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "MgO", value: 3.59, uncertainty: 0.05, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "CaO", value: 7.12, uncertainty: 0.11, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "Na2O", value: 3.16, uncertainty: 0.11, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "K2O", value: 1.79, uncertainty: 0.05, unit: "wt%", source: t3, checked: t4 },
  { material: "BCR-2", quantity: "P2O5", value: 0.35, uncertainty: 0.02, unit: "wt%", source: t3, checked: t4 },
  { material: "BIR-1", quantity: "SiO2", value: 47.96, uncertainty: 0.19, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "TiO2", value: 0.96, uncertainty: 0.01, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "Al2O3", value: 15.5, uncertainty: 0.15, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "Fe2O3T", value: 11.3, uncertainty: 0.12, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "MnO", value: 0.175, uncertainty: 0.003, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "MgO", value: 9.7, uncertainty: 0.079, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "CaO", value: 13.3, uncertainty: 0.12, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "Na2O", value: 1.82, uncertainty: 0.045, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "K2O", value: 0.03, uncertainty: 0.003, unit: "wt%", source: t5, checked: t4 },
  { material: "BIR-1", quantity: "P2O5", value: 0.021, uncertainty: 0.001, unit: "wt%", source: t5, checked: t4 },
  { material: "PCC-1", quantity: "SiO2", value: 41.71, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "TiO2", value: 0.013, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "Al2O3", value: 0.675, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "Fe2O3T", value: 8.25, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "MnO", value: 0.12, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "MgO", value: 43.43, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "CaO", value: 0.52, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "Na2O", value: 0.03, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "K2O", value: 0.007, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "PCC-1", quantity: "P2O5", value: 0.002, uncertainty: null, unit: "wt%", source: t6, checked: t4 },
  { material: "DTS-2b", quantity: "SiO2", value: 39.4, uncertainty: null, unit: "wt%", source: t7, checked: t4 },
  { material: "DTS-2b", quantity: "Al2O3", value: 0.45, uncertainty: null, unit: "wt%", source: t7, checked: t4 },
  { material: "DTS-2b", quantity: "Fe2O3T", value: 7.76, uncertainty: null, unit: "wt%", source: t7, checked: t4 },
  { material: "DTS-2b", quantity: "MgO", value: 49.4, uncertainty: null, unit: "wt%", source: t7, checked: t4 },
  { material: "DTS-2b", quantity: "CaO", value: 0.12, uncertainty: null, unit: "wt%", source: t7, checked: t4 },
  { material: "JP-1", quantity: "SiO2", value: 42.38, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "Al2O3", value: 0.66, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "Fe2O3T", value: 8.37, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "MnO", value: 0.121, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "MgO", value: 44.6, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "CaO", value: 0.55, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "Na2O", value: 0.021, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: "JP-1", quantity: "K2O", value: 0.003, uncertainty: null, unit: "wt%", source: t8, checked: t4 },
  { material: t9, quantity: "SiO2", value: 34.23, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "TiO2", value: 0.15, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "Al2O3", value: 3.27, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "Cr2O3", value: 0.52, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "MnO", value: 0.18, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "MgO", value: 24.62, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "CaO", value: 2.61, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "Na2O", value: 0.45, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "K2O", value: 0.03, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "P2O5", value: 0.23, uncertainty: null, unit: "wt%", source: t10, checked: t4 },
  { material: t9, quantity: "Fe_total", value: 23.85, uncertainty: null, unit: "wt%", source: "Jarosewich et al. 1987", checked: t4 },
];
