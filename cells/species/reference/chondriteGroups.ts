/** Made from chondrite-groups.csv by `npm run reference`; do not edit by hand. */
import type { ChondriteGroupRow } from "./rows";

const t1 = "Wasson & Kallemeyn 1988, Phil. Trans. R. Soc. A 325, 535-544";
const t2 = "from memory; confidence medium-high";
const t3 = "Lodders & Fegley 1998, The Planetary Scientist's Companion";
const t4 = "from memory; confidence medium";

export const chondriteGroupRows: readonly ChondriteGroupRow[] = [
  { group: "CI", values: { Mg: 9.7, Si: 10.5, Al: 0.86, Ca: 0.92, Fe: 18.2 }, source: t1, checked: "read in a copy of the source; confidence high" },
  { group: "CM", values: { Mg: 11.7, Si: 12.9, Al: 1.18, Ca: 1.27, Fe: 21 }, source: t1, checked: t2 },
  { group: "CO", values: { Mg: 14.5, Si: 15.9, Al: 1.43, Ca: 1.58, Fe: 24.8 }, source: t1, checked: t2 },
  { group: "CV", values: { Mg: 14.5, Si: 15.6, Al: 1.75, Ca: 1.9, Fe: 23.5 }, source: t1, checked: t2 },
  { group: "H", values: { Mg: 14, Si: 16.9, Al: 1.13, Ca: 1.25, Fe: 27.5 }, source: t1, checked: t2 },
  { group: "L", values: { Mg: 14.9, Si: 18.5, Al: 1.22, Ca: 1.31, Fe: 21.5 }, source: t1, checked: t2 },
  { group: "LL", values: { Mg: 15.3, Si: 18.9, Al: 1.19, Ca: 1.3, Fe: 18.5 }, source: t1, checked: t2 },
  { group: "EH", values: { Mg: 10.6, Si: 16.7, Al: 0.81, Ca: 0.85, Fe: 29 }, source: t1, checked: t2 },
  { group: "EL", values: { Mg: 14.1, Si: 18.6, Al: 1.05, Ca: 1.01, Fe: 22 }, source: t1, checked: t2 },
  { group: "CK", values: { Mg: 14.7, Si: 15.8, Al: 1.47, Ca: 1.7, Fe: 23 }, source: t3, checked: t4 },
  { group: "CR", values: { Mg: 13.7, Si: 15, Al: 1.15, Ca: 1.29, Fe: 23.8 }, source: t3, checked: t4 },
  { group: "CH", values: { Mg: 11.3, Si: 13.5, Al: 1.05, Ca: 1.3, Fe: 38 }, source: t3, checked: "from memory; confidence medium-low" },
  { group: "R", values: { Mg: 12.9, Si: 18, Al: 1.06, Ca: 0.914, Fe: 24.4 }, source: t3, checked: t4 },
];
