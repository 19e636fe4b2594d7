import { describe, expect, it } from "vitest";
import { readOwnTable } from "../../../cells/table/readOwnTable";

const plain = [
  { species: "SiO2", unit: "wt%", value: 45, sigma: 0.9 },
  { species: "MgO", unit: "wt%", value: 37.8, sigma: 0.5 },
  { species: "La", unit: "wt%", value: 0.6 },
];

describe("a composition as people paste it", () => {
  it.each([
    ["by tabs", "SiO2\t45.0\t0.9\nMgO\t37.8\t0.5\nLa\t0.6"],
    ["by commas", "SiO2,45.0,0.9\nMgO,37.8,0.5\nLa,0.6,"],
    ["by semicolons, with decimal commas", "SiO2;45,0;0,9\nMgO;37,8;0,5\nLa;0,6;"],
    ["by blanks", "  SiO2  45.0  0.9\nMgO 37.8 0.5\n\nLa 0.6\n"],
    ["by blanks, with decimal commas", "SiO2 45,0 0,9\nMgO 37,8 0,5\nLa 0,6"],
    ["with the uncertainty in the value", "SiO2 45.0 ± 0.9\nMgO 37.8(5)\nLa 0.6"],
    ["with headings", "Oxide\tvalue (wt%)\t1σ\nSiO2\t45.0\t0.9\nMgO\t37.8\t0.5\nLa\t0.6\t"],
    ["spelt in capitals, from a spreadsheet", "SIO2\t45.0\t0.9\r\nMGO\t37.8\t0.5\r\nLA\t0.6\t\r\n"],
  ])("is read %s", (_, text) => {
    expect(readOwnTable(text, "wt%")).toEqual({ values: plain, without: [], problems: [] });
  });

  it("has units of its own where it says them, and the chosen one elsewhere", () => {
    const { values, problems } = readOwnTable("SiO2 (wt%)\t45\nLa µg/g\t0.648\nYb\t0.441 ppm\nNi\t1960\t\tµg/g\nTi\t1.2", "mg/g");
    expect(problems).toEqual([]);
    expect(values.map(({ species, unit }) => [species, unit])).toEqual([
      ["SiO2", "wt%"],
      ["La", "µg/g"],
      ["Yb", "µg/g"],
      ["Ni", "µg/g"],
      ["Ti", "mg/g"],
    ]);
  });

  it("takes the unit of the headings before the chosen one", () => {
    expect(readOwnTable("element\tµg/g\nLa\t0.648", "wt%").values).toEqual([{ species: "La", unit: "µg/g", value: 0.648 }]);
  });

  it("brings every uncertainty to 1σ", () => {
    expect(readOwnTable("MgO\t40\t2", "wt%", "2 sigma").values[0]?.sigma).toBe(1);
    expect(readOwnTable("MgO\t40\t5", "wt%", "1 sigma relative %").values[0]?.sigma).toBe(2);
    expect(readOwnTable("MgO\t40 ± 5%", "wt%").values[0]?.sigma).toBe(2);
    expect(readOwnTable("x\ty\t2σ\nMgO\t40\t2", "wt%").problems).toMatchObject([{ row: 1, text: expect.stringMatching(/2 sigma, and 1 sigma is chosen/) }]);
  });

  it("says which species have no value, and leaves them out", () => {
    expect(readOwnTable("MgO\t40\nCr2O3\tn.d.\nNiO\t", "wt%")).toMatchObject({ values: [{ species: "MgO" }], without: ["Cr2O3", "NiO"], problems: [] });
  });

  it("lists what is wrong by line of the text, species named", () => {
    const { problems } = readOwnTable("MgO\t40\n\nXx\t1\nSiO2\t<0.05\nCaO\tmany\nAl2O3\t4\tsome\nTiO2\t-1\nNa2O\t1\t2\t3\t4\n\t7", "wt%");
    expect(problems.map(({ row }) => row)).toEqual([3, 4, 5, 6, 7, 8, 9]);
    for (const [n, says] of [
      /^Row 3, Xx: this is no element/,
      /^Row 4, SiO2: .*detection limit/,
      /^Row 5, CaO: "many" is not a number/,
      /^Row 6, Al2O3: the uncertainty "some"/,
      /^Row 7, TiO2: the value is -1/,
      /^Row 8, Na2O: there are more than three columns/,
      /^Row 9, no species: a value stands here/,
    ].entries())
      expect(problems[n]?.text).toMatch(says);
  });

  it("gives nothing for nothing", () => {
    expect(readOwnTable(" \n\n", "wt%")).toEqual({ values: [], without: [], problems: [] });
  });
});
