import { units, type QuantityColumn, type Table } from "@/cells";

/** A small table with every state in it, invented. */
export function exampleTable(rows = 4): Table {
  const column = (name: string, values: readonly number[]): QuantityColumn => ({
    kind: "quantity",
    name,
    species: name,
    unit: units["wt%"],
    value: Float64Array.from(values, (v) => v / 100),
    sigma: Float64Array.from(values, (v) => (Number.isFinite(v) ? 0.003 : NaN)),
    state: Uint8Array.from(values, (v) => (Number.isFinite(v) ? 0 : 1)),
    limit: new Float64Array(values.length).fill(NaN),
    assumed: new Uint8Array(values.length),
    raw: values.map((v) => (Number.isFinite(v) ? v.toFixed(2) : "")),
    rawSigma: values.map(() => "0.3"),
    amended: new Uint8Array(values.length),
  });
  const index = Array.from({ length: rows }, (_, i) => i);
  return {
    handle: "th",
    rows,
    rowIds: index.map((i) => i + 1),
    samples: index.map((i) => `TH-${i + 1}`),
    classes: index.map((i) => (i % 2 === 0 ? "H5" : "L6")),
    origins: index.map((i) =>
      i === 1
        ? [
            { table: "a", row: 7 },
            { table: "b", row: "t1" },
          ]
        : [{ table: "th", row: i + 1 }],
    ),
    setAside: Uint8Array.from(index, (i) => (i === 2 ? 1 : 0)),
    columns: [
      { kind: "text", name: "Sample", role: "sample", text: index.map((i) => `TH-${i + 1}`) },
      column(
        "SiO2",
        index.map((i) => (i === 3 ? NaN : 36 + i)),
      ),
      column(
        "MgO",
        index.map((i) => 23 + i),
      ),
    ],
    correlations: [],
  };
}
