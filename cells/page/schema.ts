import { z } from "zod";
import { ownBodiesSchema } from "../species/ownBody";

/**
 * The page document: a page as JSON. A live page, the body of an API call, a snapshot and an example are all this.
 *
 * Everything is strict: an unknown key makes the document unreadable, naming the block and the key, because a misspelt
 * `leaveout` that is silently ignored is a wrong number.
 */

/** A handle, as formulas write it: letters of any alphabet, digits and `_`, not beginning with a digit. */
export const handleSchema = z
  .string()
  .max(40)
  .regex(/^[\p{L}_][\p{L}\p{N}_]*$/u, "a handle has letters, digits and _ only, and does not begin with a digit");

const reasonSchema = z.string().min(1).max(2000);
const headerSchema = z.string().min(1).max(200);
const expressionSchema = z.string().max(4000);
/** 1-based data row of a source, or the stable id of a typed row. */
export const rowSchema = z.union([z.number().int().min(1).max(10_000_000), z.string().min(1).max(40)]);
const bySchema = z.string().max(80);
const atSchema = z.string().max(40);

export const roleSchema = z.enum(["sample", "class", "text", "reference", "quantity", "uncertainty"]);
export const uncertaintyKindSchema = z.enum(["1 sigma", "2 sigma", "1 sigma relative %", "2 sigma relative %", "95 % interval"]);
export const basisSchema = z.enum(["mass", "atoms"]);

export const columnSchema = z.strictObject({
  /** Header as it stands in the source; typed tables have none. */
  header: headerSchema.optional(),
  /** 1-based place in the source, needed only where two columns have one header. */
  position: z.number().int().min(1).max(1000).optional(),
  /** Name that formulas use; the header, where left out. */
  name: z.string().min(1).max(80).optional(),
  role: roleSchema,
  /** Species of a quantity: `SiO2`, `Mg`, `FeOt` … Left out for temperatures, ages, ready-made ratios. */
  species: z.string().max(40).optional(),
  unit: z.string().max(40).optional(),
  /** Basis of an imported ratio. */
  basis: basisSchema.optional(),
  /** Of an uncertainty: the name of the quantity's column. */
  of: z.string().max(80).optional(),
  as: uncertaintyKindSchema.optional(),
});

export const sourceSchema = z.strictObject({
  /** Name of the file as uploaded; on the command line, a path relative to the page. */
  file: z.string().min(1).max(255),
  /** SHA-256 of the bytes, hexadecimal; always there on live pages and in snapshots. */
  sha256: z
    .string()
    .regex(/^[0-9a-f]{64}$/)
    .optional(),
});

export const typedRowSchema = z.strictObject({
  id: z.string().min(1).max(40),
  /** Text of each cell by column name, exactly as typed. */
  cells: z.record(z.string().max(80), z.string().max(2000)),
});

export const amendmentSchema = z.strictObject({
  row: rowSchema,
  sample: z.string().max(200),
  column: z.string().min(1).max(200),
  was: z.string().max(2000),
  value: z.string().max(2000),
  reason: reasonSchema,
  by: bySchema.optional(),
  at: atSchema.optional(),
});

export const setAsideSchema = z.strictObject({
  row: rowSchema,
  sample: z.string().max(200).optional(),
  /** Only this value; the whole sample where left out. */
  column: z.string().min(1).max(200).optional(),
  reason: reasonSchema,
  by: bySchema.optional(),
  at: atSchema.optional(),
});

export const assumedSchema = z
  .strictObject({
    column: z.string().min(1).max(200),
    /** 1σ as a fraction of the value. */
    relative: z.number().positive().max(10).optional(),
    /** 1σ in the column's unit. */
    absolute: z.number().positive().optional(),
    reason: reasonSchema,
    by: bySchema.optional(),
    at: atSchema.optional(),
  })
  .refine((a) => (a.relative === undefined) !== (a.absolute === undefined), "give either relative or absolute");

export const correlationSchema = z.strictObject({
  of: z.tuple([z.string().max(80), z.string().max(80)]),
  value: z.union([z.number().min(-1).max(1), z.string().max(80)]),
});

const commonFields = {
  /** Handle: what formulas and other blocks use. */
  id: handleSchema,
  /** Earlier handles, which still resolve for edits that were under way when the block was renamed. */
  formerly: z.array(handleSchema).max(50).optional(),
  /** Title. */
  name: z.string().max(200).optional(),
  /** Columns of twelve that the block takes on the page; 12 where left out. */
  width: z.union([z.literal(4), z.literal(6), z.literal(8), z.literal(12)]).optional(),
};

export const replicatesSchema = z.union([z.literal("weighted"), z.literal("mean"), z.strictObject({ prefer: z.array(z.string().max(200)).min(1).max(100) })]);

export const dataBlockSchema = z
  .strictObject({
    kind: z.literal("data"),
    ...commonFields,
    source: sourceSchema.optional(),
    /** Rows typed by hand; `[]` is an empty typed table. */
    typed: z.array(typedRowSchema).max(2000).optional(),
    stack: z.array(handleSchema).min(1).max(50).optional(),
    join: z.array(handleSchema).min(2).max(50).optional(),
    replicates: replicatesSchema.optional(),
    columns: z.array(columnSchema).max(300).optional(),
    assumed: z.array(assumedSchema).max(1000).optional(),
    amendments: z.array(amendmentSchema).max(20_000).optional(),
    setAside: z.array(setAsideSchema).max(20_000).optional(),
    correlations: z.array(correlationSchema).max(300).optional(),
    /** Range of oxide totals that screening accepts, wt%. */
    totals: z.strictObject({ from: z.number(), to: z.number() }).optional(),
    /** Oxides and elements by mass are divided by their row's sum without volatiles; the total stays as measured. Never unless asked. */
    renormalise: z.literal("volatile-free").optional(),
    /** Declared substitution for values below detection: this fraction of the limit. Every result says so. */
    substitute: z.strictObject({ fraction: z.number().min(0).max(1), reason: reasonSchema }).optional(),
  })
  .refine(
    (b) => [b.source, b.typed, b.stack, b.join].filter((x) => x !== undefined).length === 1,
    "a data block has exactly one of source, typed, stack, join",
  );

/** Simulated propagation beside that to first order: draws of every input, and the seed that their chance follows from. */
export const simulateSchema = z.strictObject({ draws: z.number().int().min(200).max(50_000), seed: z.number().int().min(0).max(999_999_999) });

export const formulaBlockSchema = z.strictObject({
  kind: z.literal("formula"),
  ...commonFields,
  /** Handle of the data block whose columns the lines use; none for lines over bodies only. */
  data: handleSchema.optional(),
  text: z.string().max(100_000),
  simulate: simulateSchema.optional(),
});

export const trendMethodSchema = z.enum(["york", "ordinary least squares", "reduced major axis", "theil-sen"]);

export const leaveOutSchema = z.strictObject({
  row: rowSchema,
  sample: z.string().max(200).optional(),
  reason: reasonSchema,
  by: bySchema.optional(),
  at: atSchema.optional(),
});

export const trendBlockSchema = z.strictObject({
  kind: z.literal("trend"),
  ...commonFields,
  data: handleSchema,
  x: expressionSchema,
  y: expressionSchema,
  where: expressionSchema.optional(),
  method: trendMethodSchema,
  /** How scatter beyond the errors enters: maximum-likelihood scatter, or the plain ×√MSWD. */
  scatter: z.enum(["likelihood", "root mswd", "none"]).optional(),
  leaveOut: z.array(leaveOutSchema).max(20_000).optional(),
  crossWith: handleSchema.optional(),
  simulate: simulateSchema.optional(),
});

/** A composition named in a budget: exactly one way of saying what it is. */
export const substanceSchema = z.union([
  z.strictObject({ body: z.string().min(1).max(80) }),
  z.strictObject({ phase: z.string().min(1).max(80) }),
  z.strictObject({ element: z.string().min(1).max(3) }),
  z.strictObject({ data: handleSchema, sample: z.string().min(1).max(200) }),
  z.strictObject({ data: handleSchema, row: rowSchema }),
  z.strictObject({ data: handleSchema, class: z.string().min(1).max(200) }),
  z.strictObject({
    composition: z.record(z.string().max(60), z.union([z.number(), z.strictObject({ value: z.number(), sigma: z.number().min(0).optional() })])),
  }),
]);

export const fixedAmountSchema = z.strictObject({ value: z.number(), sigma: z.number().min(0).optional() });
export const amountSchema = z.union([fixedAmountSchema, z.strictObject({ from: z.number(), to: z.number() }), z.literal("solve")]);

export const addStepSchema = z.strictObject({ do: z.enum(["add", "remove", "mix"]), what: substanceSchema, amount: amountSchema });
export const metalStepSchema = z.strictObject({
  do: z.literal("share with metal"),
  species: z.union([z.string().max(40), z.array(z.string().max(40)).min(1).max(20)]),
  metalFraction: fixedAmountSchema,
  amount: amountSchema,
  rest: z.strictObject({ body: z.string().min(1).max(80) }).optional(),
});
export const meltStepSchema = z.strictObject({
  do: z.literal("extract melt"),
  model: z.enum(["batch", "fractional", "aggregated"]),
  amount: amountSchema,
  coefficients: z.record(z.string().max(40), z.number().min(0)),
  meltCoefficients: z.record(z.string().max(40), z.number().min(0)).optional(),
  melt: substanceSchema.optional(),
});
export const stepSchema = z.discriminatedUnion("do", [addStepSchema, metalStepSchema, meltStepSchema]);

export const targetSchema = z.union([
  z.strictObject({
    expression: expressionSchema,
    equals: z.union([
      z.strictObject({ body: z.string().min(1).max(80) }),
      z.strictObject({ value: z.number(), sigma: z.number().min(0).optional(), basis: basisSchema }),
      z.strictObject({ data: handleSchema, sample: z.string().min(1).max(200) }),
    ]),
  }),
  z.strictObject({ trend: handleSchema }),
]);

export const budgetBlockSchema = z.strictObject({
  kind: z.literal("budget"),
  ...commonFields,
  start: substanceSchema,
  steps: z.array(stepSchema).max(20),
  target: targetSchema.optional(),
  report: z.array(expressionSchema).max(50).optional(),
  simulate: simulateSchema.optional(),
});

export const ellipsesSchema = z.enum(["none", "1 sigma", "2 sigma", "95 %"]);
const hidden = { hidden: z.boolean().optional() };
/** One line of a plot's list of what is drawn, bottom first. */
export const drawnSchema = z.union([
  z.strictObject({
    data: handleSchema,
    x: expressionSchema.optional(),
    y: expressionSchema.optional(),
    z: expressionSchema.optional(),
    values: z.array(expressionSchema).max(60).optional(),
    /** Patterns: a line through each sample's points (the default), through the means of each class, or none. */
    join: z.enum(["sample", "class", "none"]).optional(),
    where: expressionSchema.optional(),
    ellipses: ellipsesSchema.optional(),
    ...hidden,
  }),
  z.strictObject({ trend: handleSchema, band: z.boolean().optional(), ...hidden }),
  z.strictObject({ crossing: handleSchema, ...hidden }),
  z.strictObject({ budget: handleSchema, ...hidden }),
  z.strictObject({ bodies: z.array(z.string().min(1).max(80)).max(40), ellipses: ellipsesSchema.optional(), ...hidden }),
  z.strictObject({ annotation: z.string().max(200), x: z.number(), y: z.number(), ...hidden }),
]);
export const axisSchema = z.strictObject({
  label: z.string().max(120).optional(),
  from: z.number().optional(),
  to: z.number().optional(),
  scale: z.enum(["linear", "log"]).optional(),
});
export const plotBlockSchema = z.strictObject({
  kind: z.literal("plot"),
  ...commonFields,
  plot: z.enum(["scatter", "ternary", "pattern", "distribution"]),
  /** What the axes show, for bodies and budgets that have no expression of their own; the first data line's, where left out. */
  x: expressionSchema.optional(),
  y: expressionSchema.optional(),
  /** Ternaries: the third corner. */
  z: expressionSchema.optional(),
  drawn: z.array(drawnSchema).max(40),
  xAxis: axisSchema.optional(),
  yAxis: axisSchema.optional(),
  /** Pattern plots: the body that normalises, and where elements stand: at their temperature, evenly in its order, or as typed. */
  normalise: z.string().max(80).optional(),
  /** Pattern plots: what every value is divided by first, such as Si, so that a sample with more water or carbon is not lower in everything. */
  per: expressionSchema.optional(),
  order: z.union([z.enum(["condensation temperature", "condensation order"]), z.array(z.string().max(3)).max(100)]).optional(),
});

export const noteBlockSchema = z.strictObject({
  kind: z.literal("note"),
  ...commonFields,
  /** Markdown; `{{name}}` shows a live value of the page. */
  text: z.string().max(100_000),
});

export const blockSchema = z.discriminatedUnion("kind", [
  dataBlockSchema,
  formulaBlockSchema,
  plotBlockSchema,
  trendBlockSchema,
  budgetBlockSchema,
  noteBlockSchema,
]);
export const blockKinds = ["data", "formula", "plot", "trend", "budget", "note"] as const;

export const PAGE_FORMAT = "cotectic-page/1";

export const pageSchema = z.strictObject({
  format: z.literal(PAGE_FORMAT),
  title: z.string().max(300),
  /** Aliases of the page for reference bodies: which compilation "CI" means here. */
  bodies: z.record(handleSchema, z.string().max(80)).optional(),
  /** The group's own bodies that this page uses, whole, by id: a page leans on nothing outside of it but the built-in tables. */
  ownBodies: ownBodiesSchema.optional(),
  blocks: z.array(blockSchema).max(300),
});

export type PageDocument = z.infer<typeof pageSchema>;
export type Block = z.infer<typeof blockSchema>;
export type BlockKind = Block["kind"];
export type DataBlock = z.infer<typeof dataBlockSchema>;
export type FormulaBlock = z.infer<typeof formulaBlockSchema>;
export type TrendBlock = z.infer<typeof trendBlockSchema>;
export type BudgetBlock = z.infer<typeof budgetBlockSchema>;
export type PlotBlock = z.infer<typeof plotBlockSchema>;
export type NoteBlock = z.infer<typeof noteBlockSchema>;
export type Column = z.infer<typeof columnSchema>;
export type Role = z.infer<typeof roleSchema>;
export type UncertaintyKind = z.infer<typeof uncertaintyKindSchema>;
export type Basis = z.infer<typeof basisSchema>;
export type RowId = z.infer<typeof rowSchema>;
export type TypedRow = z.infer<typeof typedRowSchema>;
export type Amendment = z.infer<typeof amendmentSchema>;
export type SetAside = z.infer<typeof setAsideSchema>;
export type Assumed = z.infer<typeof assumedSchema>;
export type Correlation = z.infer<typeof correlationSchema>;
export type LeaveOut = z.infer<typeof leaveOutSchema>;
export type Substance = z.infer<typeof substanceSchema>;
export type Amount = z.infer<typeof amountSchema>;
export type Step = z.infer<typeof stepSchema>;
export type Target = z.infer<typeof targetSchema>;
export type Drawn = z.infer<typeof drawnSchema>;
export type Axis = z.infer<typeof axisSchema>;
export type Ellipses = z.infer<typeof ellipsesSchema>;
