"use client";

import { useState } from "react";
import { Select } from "@/app/_ui/Select";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import { readNumber, readUncertain } from "@/app/_blocks/shared/readNumber";
import type { Amount } from "@/cells";

type Sort = "fixed" | "swept" | "solve";
const sorts: readonly { value: Sort; label: string }[] = [
  { value: "solve", label: "solved for" },
  { value: "fixed", label: "fixed" },
  { value: "swept", label: "swept over a range" },
];

export interface AmountFieldsProps {
  readonly label: string;
  readonly amount: Amount;
  readonly unit: string;
  onChange(next: Amount): void;
}

/** An amount that is fixed with its σ, swept, or solved for. */
export function AmountFields({ label, amount, unit, onChange }: AmountFieldsProps) {
  const sort: Sort = amount === "solve" ? "solve" : "from" in amount ? "swept" : "fixed";
  const value = amount === "solve" ? 0.1 : "from" in amount ? amount.to : amount.value;
  const ends = amount !== "solve" && "from" in amount ? amount : null;
  return (
    <div className="grid gap-3">
      <Select
        label={`${label}${unit === "" ? "" : `, ${unit}`}`}
        value={sort}
        options={sorts}
        onChoose={(next) => onChange(next === "solve" ? "solve" : next === "fixed" ? { value } : { from: 0, to: value === 0 ? 1 : value })}
      />
      {amount !== "solve" && !("from" in amount) && <UncertainField label="Amount" value={amount} onChange={onChange} />}
      {ends !== null && (
        <div className="grid grid-cols-2 gap-3">
          {(["from", "to"] as const).map((end) => (
            <CommitField
              key={end}
              label={end}
              mono
              inputMode="decimal"
              value={String(ends[end])}
              onCommit={(text) => {
                const read = readNumber(text);
                if ("value" in read) onChange({ ...ends, [end]: read.value });
              }}
            />
          ))}
        </div>
      )}
    </div>
  );
}

/** One number with its σ in one field: `32.3 ± 0.5`, `32.3(5)`. `factor` is what the shown number is multiplied by against the kept one. */
export function UncertainField({
  label,
  value,
  factor = 1,
  onChange,
}: {
  readonly label: string;
  readonly value: { readonly value: number; readonly sigma?: number | undefined };
  readonly factor?: number;
  onChange(next: { value: number; sigma?: number }): void;
}) {
  const [problem, setProblem] = useState<string | null>(null);
  const clean = (n: number): number => Number(n.toPrecision(12));
  const text = String(clean(value.value * factor)) + (value.sigma === undefined ? "" : ` ± ${clean(value.sigma * factor)}`);
  return (
    <CommitField
      label={label}
      mono
      value={text}
      hint="With its 1σ, as 9.6 ± 0.9 or 9.6(9)."
      problem={problem}
      onCommit={(typed) => {
        const read = readUncertain(typed);
        if ("value" in read) {
          setProblem(null);
          onChange({ value: clean(read.value / factor), ...(read.sigma === undefined ? {} : { sigma: clean(read.sigma / factor) }) });
        } else setProblem("problem" in read ? read.problem : "Write a number.");
      }}
    />
  );
}
