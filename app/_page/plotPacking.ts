import { referencesOf, type BlockResult, type PlotLayer, type PlotResult, type Table } from "@/cells";

type Samples = Extract<PlotLayer, { what: "samples" }>;
/** A layer of samples whose texts stay behind: the page has them already, in the table they come from. */
type PackedSamples = Omit<Samples, "classes" | "samples" | "rows" | "references"> & { readonly fromTable: true };
export type PackedLayer = PlotLayer | PackedSamples;
export type PackedPlot = Omit<PlotResult, "layers"> & { readonly layers: readonly PackedLayer[] };

/**
 * A plot on its way to the page. Names and classes of a hundred thousand samples would take longer to clone than everything
 * else that an edit sets off, so they travel with their table alone.
 *
 * @param tableOf the table that a handle's block came to, as the page has it
 */
export function packPlot(plot: PlotResult, tableOf: (handle: string) => Table | undefined): PackedPlot {
  return { ...plot, layers: plot.layers.map((layer) => (layer.what === "samples" && isOf(tableOf(layer.data), layer) ? withoutTexts(layer) : layer)) };
}

function isOf(table: Table | undefined, layer: Samples): boolean {
  return table?.samples === layer.samples && table.classes === layer.classes && table.rowIds === layer.rows;
}

function withoutTexts({ classes: _, samples: __, rows: ___, references: ____, ...rest }: Samples): PackedSamples {
  return { ...rest, fromTable: true };
}

/** The plot again as the engine made it. Texts are looked up on first use, when the table they stand in has arrived too. */
export function unpackPlot(plot: PackedPlot, results: ReadonlyMap<string, BlockResult>): PlotResult {
  return { ...plot, layers: plot.layers.map((layer) => ("fromTable" in layer ? withTexts(layer, results) : layer)) };
}

function withTexts({ fromTable: _, ...rest }: PackedSamples, results: ReadonlyMap<string, BlockResult>): Samples {
  const table = (): Table | undefined => {
    const result = results.get(rest.data);
    return result?.kind === "data" ? result.table : undefined;
  };
  return {
    ...rest,
    get classes() {
      return table()?.classes ?? [];
    },
    get samples() {
      return table()?.samples ?? [];
    },
    get rows() {
      return table()?.rowIds ?? [];
    },
    get references() {
      const found = table();
      return found === undefined ? [] : referencesOf(found);
    },
  };
}
