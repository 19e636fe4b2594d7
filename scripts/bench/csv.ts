import Papa from "papaparse";
import { readTable } from "@/cells/table";
import { createRandom } from "@/cells/numeric";

/** A table of analyses as laboratories send it, twelve columns; invented. */
export function csvOf(rows: number): Uint8Array {
  const random = createRandom(7);
  const number = (): string => (60 * random.uniform()).toFixed(3);
  const lines = ["Sample,Group,SiO2 (wt%),2s SiO2,MgO (wt%),2s MgO,Al2O3 (wt%),FeO* (wt%),CaO (wt%),Ni (ppm),Cr (ppm),Reference"];
  for (let i = 0; i < rows; i++) lines.push(`TH-${i},CI,${Array.from({ length: 9 }, number).join(",")},"Smith, Jones"`);
  return new TextEncoder().encode(`${lines.join("\n")}\n`);
}

/** Reading with everything the importer does to text, and papaparse splitting it into cells alone. */
export function csvWays(bytes: Uint8Array): { readonly ours: () => number; readonly papaparse: () => number } {
  return {
    ours: () => readTable(bytes).rows.length,
    papaparse: () => Papa.parse(new TextDecoder().decode(bytes), { skipEmptyLines: true }).data.length,
  };
}
