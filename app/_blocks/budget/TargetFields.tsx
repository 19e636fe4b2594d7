"use client";

import type { PageView } from "@/app/_page/contract";
import { Select } from "@/app/_ui/Select";
import { handleChoices, withCurrent } from "@/app/_blocks/shared/choices";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import type { Target } from "@/cells";
import { UncertainField } from "./AmountFields";

type Sort = "none" | "body" | "value" | "sample" | "trend";

const sorts: readonly { value: Sort; label: string }[] = [
  { value: "none", label: "nothing" },
  { value: "body", label: "a ratio of a body" },
  { value: "value", label: "a ratio of a given value" },
  { value: "sample", label: "a ratio of a sample" },
  { value: "trend", label: "a trend" },
];

function sortOf(target: Target | undefined): Sort {
  if (target === undefined) return "none";
  if ("trend" in target) return "trend";
  if ("body" in target.equals) return "body";
  return "value" in target.equals ? "value" : "sample";
}

export interface TargetFieldsProps {
  readonly target: Target | undefined;
  readonly view: PageView;
  readonly problem?: string | null;
  onChange(next: Target | undefined): void;
}

/** What the solved amount must reach. */
export function TargetFields({ target, view, problem = null, onChange }: TargetFieldsProps) {
  const expression = target !== undefined && "expression" in target ? target.expression : "Mg / Si";
  const tables = handleChoices(view, "data");
  const trends = handleChoices(view, "trend");
  const start = (sort: Sort): Target | undefined => {
    switch (sort) {
      case "none":
        return undefined;
      case "body":
        return { expression, equals: { body: Object.keys(view.bodies)[0] ?? "CI_PLJ14" } };
      case "value":
        return { expression, equals: { value: 1, basis: "mass" } };
      case "sample":
        return { expression, equals: { data: tables[0]?.value ?? "d", sample: "sample" } };
      case "trend":
        return { trend: trends[0]?.value ?? "t" };
    }
  };
  return (
    <div className="grid gap-3">
      <Select label="Reaches" value={sortOf(target)} options={sorts} onChoose={(sort) => onChange(start(sort))} />
      {target !== undefined && "expression" in target && (
        <>
          <CommitField label="Ratio" mono value={target.expression} problem={problem} onCommit={(text) => onChange({ ...target, expression: text.trim() })} />
          {"body" in target.equals && (
            <CommitField label="Of the body" mono value={target.equals.body} onCommit={(text) => onChange({ ...target, equals: { body: text.trim() } })} />
          )}
          {"value" in target.equals && <ValueTarget target={target} onChange={onChange} />}
          {"sample" in target.equals && <SampleTarget target={target} view={view} onChange={onChange} />}
        </>
      )}
      {target !== undefined && "trend" in target && (
        <Select label="Trend" value={target.trend} options={withCurrent(trends, target.trend)} onChoose={(trend) => onChange({ trend })} />
      )}
    </div>
  );
}

type ExpressionTarget = Extract<Target, { expression: string }>;

function ValueTarget({ target, onChange }: { readonly target: ExpressionTarget; onChange(next: Target): void }) {
  const { equals } = target;
  if (!("value" in equals)) return null;
  return (
    <>
      <UncertainField label="Value" value={equals} onChange={(next) => onChange({ ...target, equals: { ...next, basis: equals.basis } })} />
      <Select
        label="Basis"
        value={equals.basis}
        options={[
          { value: "mass", label: "by mass" },
          { value: "atoms", label: "by atoms" },
        ]}
        onChoose={(basis) => onChange({ ...target, equals: { ...equals, basis } })}
      />
    </>
  );
}

function SampleTarget({ target, view, onChange }: { readonly target: ExpressionTarget; readonly view: PageView; onChange(next: Target): void }) {
  const { equals } = target;
  if (!("sample" in equals)) return null;
  return (
    <>
      <Select
        label="Table"
        value={equals.data}
        options={withCurrent(handleChoices(view, "data"), equals.data)}
        onChoose={(data) => onChange({ ...target, equals: { ...equals, data } })}
      />
      <CommitField label="Sample" mono value={equals.sample} onCommit={(sample) => onChange({ ...target, equals: { ...equals, sample: sample.trim() } })} />
    </>
  );
}
