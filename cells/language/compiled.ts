import type { QuantityColumn, Table } from "../table/table";
import type { Meaning } from "./meaning";
import type { CommonVariable } from "./scope";
import type { Over, Split } from "./split";

/** What a part of an expression has become: nodes of the graph with what they mean. */
export type Compiled = CompiledValue | CompiledCondition | CompiledText | CompiledLabels;

export interface CompiledValue {
  readonly kind: "value";
  readonly node: number;
  /** Node of its state, by state code. */
  readonly state: number;
  readonly meaning: Meaning;
  readonly over: Over | null;
  /** The aggregate this is, where it is nothing but one. */
  readonly aggregate?: string;
}

/** True or false: 1 or 0 where its state is present. */
export interface CompiledCondition {
  readonly kind: "condition";
  readonly node: number;
  readonly state: number;
  readonly over: Over | null;
}

/** A text in quotation marks. */
export interface CompiledText {
  readonly kind: "text";
  readonly text: string;
}

/** A column of text. */
export interface CompiledLabels {
  readonly kind: "labels";
  readonly name: string;
  readonly text: readonly string[];
  readonly over: Over;
}

/** A leaf of the graph that has an uncertainty. */
export type Variable = ColumnVariable | OneVariable | ClassVariable;

/** A measured column: its errors are independent from sample to sample. */
export interface ColumnVariable {
  readonly sort: "column";
  readonly node: number;
  readonly table: Table;
  readonly column: QuantityColumn;
}

/** One and the same for all rows. */
export interface OneVariable {
  readonly sort: "common";
  readonly node: number;
  readonly variable: CommonVariable;
}

/** One for each class of a split, the same for all rows of the class. */
export interface ClassVariable {
  readonly sort: "class";
  readonly node: number;
  readonly split: Split;
  readonly variables: readonly CommonVariable[];
}

/** What was used on the way, for traces and for the results' notes. */
export interface Uses {
  /** Lines of formula blocks, in order of first use. */
  readonly lines: Map<string, { readonly block: string; readonly name: string }>;
  /** Alias or id as written → id of the compilation. */
  readonly bodies: Map<string, string>;
  /** "Mg = MgO × 0.603036", by the name it is for. */
  readonly conversions: Map<string, string[]>;
  /** Sentences that every result must say: disagreeing columns, declared substitutions … */
  readonly warnings: Map<string, string>;
}
