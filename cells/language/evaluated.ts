import type { Problem } from "../errors";
import type { Basis } from "../page/schema";
import type { Unit } from "../quantity/unit";
import type { Table } from "../table/table";
import type { ColumnVariable, Uses } from "./compiled";
import { commonCovariance, perSampleCovariance } from "./covariance";
import type { Measurement } from "./measure";
import type { CommonVariable } from "./scope";
import type { CommonPart } from "./uncertainty";

/** What an expression is apart from its numbers. */
export interface EvaluatedMeaning {
  /** The unit of `value` and `sigma`. Products such as Mg × Al have a unit that no table knows, made up of canonical ones. */
  readonly unit: Unit;
  readonly basis: Basis | "formula units" | null;
  /** Says what a number without basis is: "normalised to CI (CI_PLJ14)", "logarithm", "mean of ratios" … */
  readonly remark: string | null;
}

export interface CommonInput {
  readonly variable: CommonVariable;
  readonly partial: Float64Array;
  /** Place of the class it is of, for what is common to one class alone. */
  readonly place?: number;
}

/**
 * An expression, calculated. Arrays hold one entry for each row of the table, or each class, or one only (`perSample` false);
 * where the state is not "present" every number is NaN.
 */
export class Evaluated implements EvaluatedMeaning {
  readonly unit: Unit;
  readonly basis: Basis | "formula units" | null;
  readonly remark: string | null;
  /** Entries of the arrays. */
  readonly rows: number;
  readonly value: Float64Array;
  /** 1σ of both sorts of inputs together; NaN where unknown. */
  readonly sigma: Float64Array;
  /** 1σ from what was measured on each sample alone: what fits and means weigh by. */
  readonly sigmaPerSample: Float64Array;
  /** 1σ from what is common to all samples. */
  readonly sigmaCommon: Float64Array;
  readonly state: Uint8Array;
  /** 1 where an input's σ is unknown and the σ given is that of the others. */
  readonly lowerBound: Uint8Array;
  readonly assumed: Uint8Array;
  readonly assumedCount: number;
  /** 1 where first-order propagation is not to be trusted: a denominator with more than 10 % σ, a domain's edge within 3σ. */
  readonly nearEdge: Uint8Array;
  /** True where there is one entry for each row of `table`. */
  readonly perSample: boolean;
  /** Classes, where there is one entry for each. */
  readonly byClass?: readonly string[];
  /** Name of the column that the classes are of. */
  readonly splitColumn?: string;
  /** The table the entries belong to; null where there is one for all. */
  readonly table: Table | null;
  /** Warnings: species that disagree, declared substitutions … */
  readonly problems: readonly Problem[];
  /** Alias or id as written → id of the compilation. */
  readonly bodiesUsed: Readonly<Record<string, string>>;
  /** Sentences of the conversions made: "Mg = MgO × 0.603042". */
  readonly conversions: readonly string[];
  /** Lines of formula blocks that the expression went through. */
  readonly lines: readonly { readonly block: string; readonly name: string }[];
  readonly #measured: Measurement;

  constructor(
    meaning: EvaluatedMeaning,
    measured: Measurement,
    of: {
      readonly table: Table | null;
      readonly byClass?: readonly string[];
      readonly splitColumn?: string;
      readonly problems: readonly Problem[];
      readonly uses: Uses;
    },
  ) {
    this.unit = meaning.unit;
    this.basis = meaning.basis;
    this.remark = meaning.remark;
    this.rows = measured.length;
    this.value = measured.value;
    this.sigma = measured.sigma;
    this.sigmaPerSample = measured.sigmaPerSample;
    this.sigmaCommon = measured.sigmaCommon;
    this.state = measured.state;
    this.lowerBound = measured.lowerBound;
    this.assumed = measured.assumed;
    this.nearEdge = measured.nearEdge;
    this.assumedCount = measured.assumedCount;
    this.table = of.table;
    this.perSample = of.table !== null && of.byClass === undefined;
    if (of.byClass !== undefined) this.byClass = of.byClass;
    if (of.splitColumn !== undefined) this.splitColumn = of.splitColumn;
    this.problems = of.problems;
    this.bodiesUsed = Object.fromEntries(of.uses.bodies);
    this.conversions = [...of.uses.conversions.values()].flat();
    this.lines = [...of.uses.lines.values()];
    this.#measured = measured;
  }

  /** Measured columns the result depends on, in order of first appearance. */
  get inputs(): readonly { readonly variable: ColumnVariable; readonly partial: Float64Array }[] {
    return this.#measured.columns.map((variable) => ({ variable, partial: this.#measured.partial(variable) }));
  }

  /** Common variables with the partial derivative of each entry (display unit per canonical unit), in order of first appearance. */
  get common(): readonly CommonInput[] {
    return this.#measured.commons.flatMap((part) => this.#expand(part));
  }

  /** The calculation behind the numbers, for drawing its inputs anew. */
  get measured(): Measurement {
    return this.#measured;
  }

  #expand(part: CommonPart): readonly CommonInput[] {
    const partial = this.#measured.partial(part);
    if (part.sort === "common") return [{ variable: part.variable, partial }];
    return part.variables.map((variable, place) => ({
      variable,
      place,
      partial: partial.map((value, i) => ((this.byClass === undefined ? part.split.classOf[i] : i) === place ? value : 0)),
    }));
  }

  /** Covariance with another result, entry by entry, from what was measured on each sample alone. In both display units. */
  covariance(other: Evaluated): Float64Array {
    return perSampleCovariance(this.#measured, other.#measured);
  }

  /** Covariance with another result, entry by entry, through what is common to all samples. */
  covarianceCommon(other: Evaluated): Float64Array {
    return commonCovariance(this.#measured, other.#measured);
  }

  /** Correlation of the errors with those of another result, both sorts together; NaN where either σ is unknown or 0. */
  correlation(other: Evaluated): Float64Array {
    const [own, common] = [this.covariance(other), this.covarianceCommon(other)];
    const { sigma } = this;
    const [step, otherStep] = [sigma.length === 1 ? 0 : 1, other.sigma.length === 1 ? 0 : 1];
    const found = new Float64Array(own.length);
    for (let i = 0; i < found.length; i++) {
      const sigmas = (sigma[i * step] as number) * (other.sigma[i * otherStep] as number);
      const correlation = ((own[i] as number) + (common[i] as number)) / sigmas;
      found[i] = sigmas > 0 ? Math.max(-1, Math.min(1, correlation)) : Number.NaN;
    }
    return found;
  }
}
