/** Made from phases.csv by `npm run reference`; do not edit by hand. */
import type { PhaseRow } from "./rows";

export const phaseRows: readonly PhaseRow[] = [
  { phase: "forsterite", formula: "Mg2SiO4" },
  { phase: "fayalite", formula: "Fe2SiO4" },
  { phase: "olivine Fo90", formula: "Mg1.8Fe0.2SiO4" },
  { phase: "enstatite", formula: "MgSiO3" },
  { phase: "ferrosilite", formula: "FeSiO3" },
  { phase: "diopside", formula: "CaMgSi2O6" },
  { phase: "anorthite", formula: "CaAl2Si2O8" },
  { phase: "albite", formula: "NaAlSi3O8" },
  { phase: "orthoclase", formula: "KAlSi3O8" },
  { phase: "quartz", formula: "SiO2" },
  { phase: "spinel", formula: "MgAl2O4" },
  { phase: "chromite", formula: "FeCr2O4" },
  { phase: "gehlenite", formula: "Ca2Al2SiO7" },
  { phase: "akermanite", formula: "Ca2MgSi2O7" },
  { phase: "grossite", formula: "CaAl4O7" },
  { phase: "hibonite", formula: "CaAl12O19" },
  { phase: "corundum", formula: "Al2O3" },
  { phase: "perovskite", formula: "CaTiO3" },
  { phase: "pyrope", formula: "Mg3Al2Si3O12" },
  { phase: "troilite", formula: "FeS" },
  { phase: "magnetite", formula: "Fe3O4" },
];
