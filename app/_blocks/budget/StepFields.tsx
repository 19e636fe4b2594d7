"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Select } from "@/app/_ui/Select";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import { readNumber } from "@/app/_blocks/shared/readNumber";
import type { Step } from "@/cells";
import { AmountFields, UncertainField } from "./AmountFields";
import { amountUnit } from "./budgetWords";
import { SubstanceFields } from "./SubstanceFields";

const models = [
  { value: "batch", label: "batch" },
  { value: "fractional", label: "fractional" },
  { value: "aggregated", label: "aggregated" },
] as const;

export interface StepFieldsProps {
  readonly step: Step;
  readonly view: PageView;
  readonly problem?: string | null;
  onChange(next: Step): void;
}

/** Coefficients as one text: `La 0.05, Sm 0.2`. */
function coefficientsText(coefficients: Readonly<Record<string, number>>): string {
  return Object.entries(coefficients)
    .map(([element, d]) => `${element} ${d}`)
    .join(", ");
}

/** The fields of one step. */
export function StepFields({ step, view, problem = null, onChange }: StepFieldsProps) {
  const [misread, setMisread] = useState<string | null>(null);
  if (step.do === "share with metal") {
    return (
      <div className="grid gap-3">
        <CommitField
          label="Species in the metal"
          mono
          value={typeof step.species === "string" ? step.species : step.species.join(", ")}
          problem={problem}
          onCommit={(text) => {
            const species = text
              .split(",")
              .map((t) => t.trim())
              .filter((t) => t !== "");
            const [first] = species;
            if (first !== undefined) onChange({ ...step, species: species.length === 1 ? first : species });
          }}
        />
        <UncertainField
          label="Metal, % of the whole"
          factor={100}
          value={step.metalFraction}
          onChange={(metalFraction) => onChange({ ...step, metalFraction })}
        />
        <AmountFields label="In the metal" unit="wt%" amount={step.amount} onChange={(amount) => onChange({ ...step, amount })} />
        <CommitField
          label="The rest of the metal is"
          mono
          value={step.rest?.body ?? ""}
          placeholder="not said"
          hint="A body; without it, elements that metal may hold are not reported."
          onCommit={(text) => {
            const { rest: _, ...without } = step;
            onChange(text.trim() === "" ? without : { ...without, rest: { body: text.trim() } });
          }}
        />
      </div>
    );
  }
  if (step.do === "extract melt") {
    return (
      <div className="grid gap-3">
        <Select label="Melting" value={step.model} options={models} onChoose={(model) => onChange({ ...step, model })} />
        <AmountFields label="Melt fraction" unit="" amount={step.amount} onChange={(amount) => onChange({ ...step, amount })} />
        <CommitField
          label="Bulk coefficients D"
          mono
          placeholder="La 0.05, Sm 0.2"
          value={coefficientsText(step.coefficients)}
          problem={misread ?? problem}
          onCommit={(text) => {
            const coefficients: Record<string, number> = {};
            for (const part of text.split(",")) {
              const [element, d] = part.trim().split(/\s+/u);
              if (element === undefined || element === "") continue;
              const read = readNumber(d ?? "");
              if (!("value" in read) || read.value < 0) {
                setMisread(`D of ${element} is no number of zero or more. Write, for example, La 0.05, Sm 0.2.`);
                return;
              }
              coefficients[element] = read.value;
            }
            setMisread(null);
            onChange({ ...step, coefficients });
          }}
        />
        <SubstanceFields
          label="Major elements of the melt"
          what={step.melt ?? { composition: {} }}
          view={view}
          onChange={(melt) => {
            const { melt: _, ...without } = step;
            onChange("composition" in melt && Object.keys(melt.composition).length === 0 ? without : { ...without, melt });
          }}
        />
      </div>
    );
  }
  return (
    <div className="grid gap-3">
      <SubstanceFields
        label={step.do === "add" ? "What is added" : step.do === "remove" ? "What is removed" : "What is mixed in"}
        what={step.what}
        view={view}
        problem={problem}
        onChange={(what) => onChange({ ...step, what })}
      />
      <AmountFields
        label={step.do === "mix" ? "Its mass fraction in the mixture" : "Amount"}
        unit={amountUnit(step)}
        amount={step.amount}
        onChange={(amount) => onChange({ ...step, amount })}
      />
    </div>
  );
}
