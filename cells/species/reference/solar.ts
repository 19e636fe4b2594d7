/** Made from solar.csv by `npm run reference`; do not edit by hand. */
import type { SolarRow } from "./rows";

const t1 = "photosphere";
const t2 = "read in a copy of the source";
const t3 = "Asplund et al. 2009";
const t4 = "CI meteorites";
const t5 = "Asplund et al. 2009 quoting Lodders et al. 2009";
const t6 = "Asplund, Amarsi & Grevesse 2021, A&A 653, A141, Table 2";
const t7 = "Asplund et al. 2021 quoting Palme et al. 2014";

export const solarRows: readonly SolarRow[] = [
  { element: "Mg", dex: 7.6, uncertainty: 0.04, kind: t1, source: "Asplund et al. 2009, ARA&A 47, 481, Table 1", checked: t2 },
  { element: "Al", dex: 6.45, uncertainty: 0.03, kind: t1, source: t3, checked: t2 },
  { element: "Si", dex: 7.51, uncertainty: 0.03, kind: t1, source: t3, checked: t2 },
  { element: "Mg", dex: 7.53, uncertainty: 0.01, kind: t4, source: t5, checked: t2 },
  { element: "Al", dex: 6.43, uncertainty: 0.01, kind: t4, source: t5, checked: t2 },
  { element: "Si", dex: 7.51, uncertainty: 0.01, kind: t4, source: t5, checked: t2 },
  { element: "Mg", dex: 7.55, uncertainty: 0.03, kind: t1, source: t6, checked: t2 },
  { element: "Al", dex: 6.43, uncertainty: 0.03, kind: t1, source: t6, checked: t2 },
  { element: "Si", dex: 7.51, uncertainty: 0.03, kind: t1, source: t6, checked: t2 },
  { element: "Mg", dex: 7.53, uncertainty: 0.02, kind: t4, source: t7, checked: t2 },
  { element: "Al", dex: 6.43, uncertainty: 0.03, kind: t4, source: t7, checked: t2 },
  { element: "Si", dex: 7.51, uncertainty: 0.01, kind: t4, source: t7, checked: t2 },
  { element: "Ca", dex: 6.34, uncertainty: 0.04, kind: t1, source: t3, checked: t2 },
  { element: "Fe", dex: 7.5, uncertainty: 0.04, kind: t1, source: t3, checked: t2 },
  { element: "Ca", dex: 6.3, uncertainty: 0.03, kind: t1, source: "Asplund et al. 2021", checked: t2 },
];
