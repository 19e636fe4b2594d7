import { describe, expect, it } from "vitest";
import { columnSchema } from "../../../cells/page/schema";
import { identifier, proposeMapping, readTable, type Proposal } from "../../../cells/table";
import { knownHeaders } from "./headers";

const propose = (text: string): Proposal => proposeMapping(readTable(text));
const codes = (proposal: Proposal): string[] => proposal.problems.map((problem) => `${problem.code} ${problem.column ?? ""}`.trim());

describe("the importer's proposal", () => {
  it("for a table of rocks as laboratories send it", () => {
    const { columns, problems } = propose(
      "Sample,Group,SiO2 (wt%),2s SiO2,MgO (wt%),MgO RSD%,FeO*,Ni (ppm),1σ,Reference\nA,CI,45.0,0.4,37.8,1,8.1,2000,50,Smith\nB,CM,44.0,0.4,38.8,1,8.2,1900,50,Smith\n",
    );
    expect(columns).toEqual([
      { header: "Sample", role: "sample" },
      { header: "Group", role: "class" },
      { header: "SiO2 (wt%)", name: "SiO2", role: "quantity", species: "SiO2", unit: "wt%" },
      { header: "2s SiO2", role: "uncertainty", of: "SiO2", as: "2 sigma" },
      { header: "MgO (wt%)", name: "MgO", role: "quantity", species: "MgO", unit: "wt%" },
      { header: "MgO RSD%", role: "uncertainty", of: "MgO", as: "1 sigma relative %" },
      { header: "FeO*", name: "FeOt", role: "quantity", species: "FeOt", unit: "wt%" },
      { header: "Ni (ppm)", name: "Ni", role: "quantity", species: "Ni", unit: "µg/g" },
      { header: "1σ", role: "uncertainty", of: "Ni", as: "1 sigma" },
      { header: "Reference", role: "reference" },
    ]);
    expect(problems).toEqual([]);
  });

  it("fits the schema of columns, for every header known", () => {
    const headers = knownHeaders.map(({ header }) => header).filter((header) => header.trim() !== "");
    const quoted = headers.map((header) => `"${header}"`);
    // A source may have 300 columns.
    for (const part of [quoted.slice(0, 200), quoted.slice(200)]) {
      const proposal = propose(`${part.join(",")}\n${part.map((_, i) => (i % 2 === 0 ? "1.5" : "2")).join(",")}\n`);
      expect(proposal.columns).toHaveLength(part.length);
      expect(proposal.reasons).toHaveLength(part.length);
      for (const column of proposal.columns) expect(columnSchema.safeParse(column).success).toBe(true);
      const names = proposal.columns.flatMap((column) => (column.role === "uncertainty" ? [] : [column.name ?? column.header]));
      expect(new Set(names).size).toBe(names.length);
    }
  });

  it("tells two columns of one header apart by place and by name", () => {
    const { columns } = propose("Sample,Mg,1s,Mg,1s\nA,9,0.1,8,0.2\n");
    expect(columns.slice(1)).toEqual([
      { header: "Mg", position: 2, role: "quantity", species: "Mg", unit: "wt%" },
      { header: "1s", position: 3, role: "uncertainty", of: "Mg", as: "1 sigma" },
      { header: "Mg", position: 4, name: "Mg_2", role: "quantity", species: "Mg", unit: "wt%" },
      { header: "1s", position: 5, role: "uncertainty", of: "Mg_2", as: "1 sigma" },
    ]);
  });

  it("takes units from a line of their own, and says which it does not know", () => {
    const known = propose("Sample,SiO2,Ni,Q\n,wt%,ppm,furlong\nA,45,2000,1\nB,44,1900,2\n");
    expect(known.columns.map((column) => column.unit)).toEqual([undefined, "wt%", "µg/g", "1"]);
    expect(codes(known)).toEqual(["unit-unknown Q"]);
    expect(known.problems[0]?.text).toContain('"furlong"');
  });

  it("says which units it assumed, by the size of the values", () => {
    const proposal = propose("Sample,Mg,Ni\nA,9.5,10500\n");
    expect(proposal.columns.map((column) => column.unit)).toEqual([undefined, "wt%", "µg/g"]);
    expect(codes(proposal)).toEqual(["unit-assumed Mg", "unit-assumed Ni"]);
  });

  it("asks whether CO in capitals is cobalt", () => {
    const proposal = propose("SAMPLE,CO(PPM),Co (ppm)\nA,500,500\n");
    expect(proposal.columns[1]).toMatchObject({ species: "Co", unit: "µg/g" });
    expect(codes(proposal)).toEqual(["species-assumed CO(PPM)"]);
  });

  it("does not decide silently of which kind an uncertainty is", () => {
    expect(codes(propose("Sample,MgO (wt%),MgO error\nA,38,0.4\n"))).toEqual(["sigma-kind-assumed MgO error"]);
    expect(codes(propose("Sample,MgO (wt%),MgO 1σ\nA,38,0.4\n"))).toEqual([]);
  });

  it("doubts a σ in %, which may be wt% or per cent of the value", () => {
    const inPercent = propose("Sample,Ni (ppm),Ni 1σ %\nA,2000,2\n");
    expect(inPercent.columns[2]).toMatchObject({ as: "1 sigma relative %", of: "Ni" });
    const proposal = propose("Sample,MgO (wt%),± (%)\nA,38,0.4\n");
    expect(proposal.columns[2]).toMatchObject({ role: "uncertainty", of: "MgO", as: "1 sigma" });
    expect(codes(proposal)).toEqual(["sigma-percent ± (%)", "sigma-kind-assumed ± (%)"]);
  });

  it("keeps an uncertainty without a quantity as text, and says so", () => {
    const proposal = propose("Sample,2s CaO,MgO (wt%)\nA,0.1,38\n");
    expect(proposal.columns[1]).toEqual({ header: "2s CaO", role: "text", name: "_2s_CaO" });
    expect(codes(proposal)).toEqual(["mapping-uncertainty 2s CaO"]);
  });

  it("names two such columns apart", () => {
    const { columns } = propose("Sample,1s,1s,MgO (wt%)\nA,0.1,0.1,38\n");
    expect(columns.map((column) => column.name)).toEqual([undefined, "_1s", "_1s_2", "MgO"]);
  });

  it("finds samples where no header says so, and says where there are none", () => {
    expect(propose("Stone,MgO (wt%)\nAllende,25\nOrgueil,16\n").columns[0]).toMatchObject({ header: "Stone", role: "sample" });
    const none = propose("MgO (wt%),SiO2 (wt%)\n25,34\n16,22\n");
    expect(codes(none)).toEqual(["mapping-no-sample"]);
  });

  it("keeps one column of samples and one of classes", () => {
    const { columns } = propose("ID,Sample,Type,Group,MgO (wt%)\n1,A,H5,OC,25\n2,B,CM2,CC,16\n");
    expect(columns.map((column) => column.role).filter((role) => role === "sample" || role === "class")).toEqual(["sample", "class"]);
    expect(columns[1]?.role).toBe("sample");
  });

  it("reads a column of a species as text where its cells are no numbers", () => {
    const { columns, reasons } = propose("Sample,S\nA,grey\nB,pale\n");
    expect(columns[1]?.role).toBe("text");
    expect(reasons[1]).toContain("no numbers");
  });

  it("takes numbers under an unknown header for plain numbers, and says so", () => {
    const proposal = propose("Sample,Foo index\nA,1.5\nB,2.5\n");
    expect(proposal.columns[1]).toEqual({ header: "Foo index", name: "Foo_index", role: "quantity", unit: "1" });
    expect(proposal.reasons[1]).toContain("plain numbers");
  });
});

describe("names for formulas", () => {
  it.each([
    ["SiO2 (wt%)", "SiO2_wt"],
    ["2s", "_2s"],
    ["δ17O", "δ17O"],
    ["Größe", "Größe"],
    ["___", "column"],
    ["%", "column"],
    ["a".repeat(100), "a".repeat(60)],
  ])("%s is %s", (header, name) => {
    expect(identifier(header)).toBe(name);
  });
});
