/** Rows of the published reference tables, as their files have them. The values stand in the generated files beside this one. */
export interface AtomicWeightRow {
  readonly element: string;
  readonly atomicWeight: number;
  readonly kind: string;
  readonly source: string;
  readonly checked: string;
}

export interface BodyRow {
  readonly body: string;
  readonly kind: string;
  readonly species: string;
  readonly value: number;
  readonly unit: string;
  /** null where the source gives none. */
  readonly uncertainty: number | null;
  readonly uncertaintyKind: string;
  readonly source: string;
  readonly checked: string;
  readonly note: string;
}

export interface SolarRow {
  readonly element: string;
  /** A(El) = log10(N/N_H) + 12. */
  readonly dex: number;
  readonly uncertainty: number;
  readonly kind: string;
  readonly source: string;
  readonly checked: string;
}

export interface ChondriteGroupRow {
  readonly group: string;
  /** wt% by element. */
  readonly values: Readonly<Record<string, number>>;
  readonly source: string;
  readonly checked: string;
}

export interface CondensationRow {
  readonly element: string;
  /** 50 % condensation temperature in K. */
  readonly t50: number;
  readonly source: string;
  readonly checked: string;
}

export interface PhaseRow {
  readonly phase: string;
  readonly formula: string;
}

export interface ReferenceMaterialRow {
  readonly material: string;
  readonly quantity: string;
  readonly value: number;
  readonly uncertainty: number | null;
  readonly unit: string;
  readonly source: string;
  readonly checked: string;
}
