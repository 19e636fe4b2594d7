import type { Block, BudgetBlock, PlotBlock, Substance } from "./schema";

/** A field of a block that names another block outright. */
export interface Reference {
  readonly handle: string;
  /** Where it stands: `data`, `crossWith`, `drawn[2].trend` … */
  readonly field: string;
  /** Kinds of block it may mean. */
  readonly expects: readonly Block["kind"][];
}

/** A field of a block that is an expression, and the data block its names stand over. */
export interface Expression {
  readonly field: string;
  readonly text: string;
  readonly data: string | undefined;
}

/** The blocks that a block names outright, in the order of its fields. Names inside expressions are not among them. */
export function referencesOf(block: Block): Reference[] {
  switch (block.kind) {
    case "data":
      return [...(block.stack ?? []).map((handle, i) => data(handle, `stack[${i}]`)), ...(block.join ?? []).map((handle, i) => data(handle, `join[${i}]`))];
    case "formula":
      return block.data === undefined ? [] : [data(block.data, "data")];
    case "trend":
      return [
        data(block.data, "data"),
        ...(block.crossWith === undefined ? [] : [{ handle: block.crossWith, field: "crossWith", expects: ["trend"] as const }]),
      ];
    case "budget":
      return ofBudget(block);
    case "plot":
      return ofPlot(block);
    case "note":
      return [];
  }
}

function data(handle: string, field: string): Reference {
  return { handle, field, expects: ["data"] };
}

function ofSubstance(substance: Substance, field: string): Reference[] {
  return "data" in substance ? [data(substance.data, `${field}.data`)] : [];
}

function ofBudget(block: BudgetBlock): Reference[] {
  const found = ofSubstance(block.start, "start");
  block.steps.forEach((step, i) => {
    if ("what" in step) found.push(...ofSubstance(step.what, `steps[${i}].what`));
    if ("melt" in step && step.melt !== undefined) found.push(...ofSubstance(step.melt, `steps[${i}].melt`));
  });
  if (block.target !== undefined) {
    if ("trend" in block.target) found.push({ handle: block.target.trend, field: "target.trend", expects: ["trend"] });
    else if ("data" in block.target.equals) found.push(data(block.target.equals.data, "target.equals.data"));
  }
  return found;
}

function ofPlot(block: PlotBlock): Reference[] {
  return block.drawn.flatMap((drawn, i): Reference[] => {
    if ("data" in drawn) return [data(drawn.data, `drawn[${i}].data`)];
    if ("trend" in drawn) return [{ handle: drawn.trend, field: `drawn[${i}].trend`, expects: ["trend"] }];
    if ("crossing" in drawn) return [{ handle: drawn.crossing, field: `drawn[${i}].crossing`, expects: ["trend"] }];
    if ("budget" in drawn) return [{ handle: drawn.budget, field: `drawn[${i}].budget`, expects: ["budget"] }];
    return [];
  });
}

/** The expressions in a block's fields. A formula block's lines and a note's quotes are read elsewhere. */
export function expressionsOf(block: Block): Expression[] {
  switch (block.kind) {
    case "trend":
      return [expression("x", block.x, block.data), expression("y", block.y, block.data), expression("where", block.where, block.data)].flat();
    case "budget":
      return [
        ...(block.target !== undefined && "expression" in block.target ? expression("target.expression", block.target.expression, undefined) : []),
        ...(block.report ?? []).flatMap((text, i) => expression(`report[${i}]`, text, undefined)),
      ];
    case "plot": {
      const main = plotTable(block);
      return [
        ...expression("x", plotAxis(block, "x"), main),
        ...expression("y", plotAxis(block, "y"), main),
        ...expression("z", block.z, main),
        ...expression("per", block.per, main),
        ...block.drawn.flatMap((drawn, i) =>
          "data" in drawn
            ? [
                ...expression(`drawn[${i}].x`, drawn.x ?? plotAxis(block, "x"), drawn.data),
                ...expression(`drawn[${i}].y`, drawn.y ?? plotAxis(block, "y"), drawn.data),
                ...expression(`drawn[${i}].z`, drawn.z, drawn.data),
                ...(drawn.values ?? []).flatMap((text, j) => expression(`drawn[${i}].values[${j}]`, text, drawn.data)),
                ...expression(`drawn[${i}].where`, drawn.where, drawn.data),
              ]
            : [],
        ),
      ];
    }
    default:
      return [];
  }
}

/** The data block over which a plot's own axis expressions stand: that of its first line of samples. */
export function plotTable(block: PlotBlock): string | undefined {
  for (const drawn of block.drawn) if ("data" in drawn) return drawn.data;
  return undefined;
}

/** What an axis shows: the plot's own expression, else that of its first line of samples that has one. */
export function plotAxis(block: PlotBlock, axis: "x" | "y"): string | undefined {
  if (block[axis] !== undefined) return block[axis];
  for (const drawn of block.drawn) if ("data" in drawn && drawn[axis] !== undefined) return drawn[axis];
  return undefined;
}

function expression(field: string, text: string | undefined, over: string | undefined): Expression[] {
  return text === undefined ? [] : [{ field, text, data: over }];
}
