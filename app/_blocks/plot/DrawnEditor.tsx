"use client";

import type { PageView } from "@/app/_page/contract";
import { Select } from "@/app/_ui/Select";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import { handleChoices, withCurrent } from "@/app/_blocks/shared/choices";
import { readNumber } from "@/app/_blocks/shared/readNumber";
import type { Drawn, Ellipses } from "@/cells";
import { ellipseChoices } from "./ellipse";

export interface DrawnEditorProps {
  readonly drawn: Drawn;
  readonly view: PageView;
  readonly plot: "scatter" | "ternary" | "pattern" | "distribution";
  /** Sentence for a field that cannot be understood, by the field's name. */
  problemOf(field: string): string | null;
  onChange(next: Drawn): void;
}

/** The fields of one line of a plot's list. */
export function DrawnEditor({ drawn, view, plot, problemOf, onChange }: DrawnEditorProps) {
  const ellipses = (value: Ellipses | undefined, fallback: Ellipses, change: (next: Ellipses) => void) => (
    <Select label="Ellipses" value={value ?? fallback} options={ellipseChoices} onChoose={change} />
  );
  if ("data" in drawn) {
    const expression = (field: "x" | "y" | "z", label: string) => (
      <CommitField
        label={label}
        mono
        placeholder="Mg / Si"
        value={drawn[field] ?? ""}
        problem={problemOf(field)}
        onCommit={(text) => {
          const { [field]: _, ...rest } = drawn;
          onChange(text.trim() === "" ? rest : { ...rest, [field]: text.trim() });
        }}
      />
    );
    return (
      <div className="grid gap-3">
        <Select
          label="Samples of"
          value={drawn.data}
          options={withCurrent(handleChoices(view, "data"), drawn.data)}
          onChoose={(data) => onChange({ ...drawn, data })}
        />
        {plot === "pattern" ? (
          <CommitField
            label="Values, parted by commas"
            mono
            placeholder="Al, Ca, Mg, Si"
            value={(drawn.values ?? []).join(", ")}
            problem={problemOf("values")}
            onCommit={(text) => {
              const { values: _, ...rest } = drawn;
              const values = text
                .split(",")
                .map((t) => t.trim())
                .filter((t) => t !== "");
              onChange(values.length === 0 ? rest : { ...rest, values });
            }}
          />
        ) : (
          <>
            {expression("x", plot === "ternary" ? "Corner at the lower right" : "Across")}
            {plot !== "distribution" && expression("y", plot === "ternary" ? "Corner at the top" : "Upwards")}
            {plot === "ternary" && expression("z", "Corner at the lower left")}
          </>
        )}
        <CommitField
          label="Only where"
          mono
          placeholder={'Group != "CI"'}
          hint="Left empty, all samples are drawn."
          value={drawn.where ?? ""}
          problem={problemOf("where")}
          onCommit={(text) => {
            const { where: _, ...rest } = drawn;
            onChange(text.trim() === "" ? rest : { ...rest, where: text.trim() });
          }}
        />
        {plot === "pattern" && (
          <Select
            label="A line through"
            value={drawn.join ?? "sample"}
            options={[
              { value: "sample", label: "each sample" },
              { value: "class", label: "the means of classes" },
              { value: "none", label: "nothing" },
            ]}
            onChoose={(join) => onChange({ ...drawn, join })}
          />
        )}
        {plot === "ternary" && ellipses(drawn.ellipses, "none", (next) => onChange({ ...drawn, ellipses: next }))}
        {plot === "scatter" && ellipses(drawn.ellipses, "1 sigma", (next) => onChange({ ...drawn, ellipses: next }))}
      </div>
    );
  }
  if ("trend" in drawn) {
    return (
      <div className="grid gap-3">
        <Select
          label="Trend"
          value={drawn.trend}
          options={withCurrent(handleChoices(view, "trend"), drawn.trend)}
          onChoose={(trend) => onChange({ ...drawn, trend })}
        />
        <Select
          label="Band"
          value={drawn.band === false ? "none" : "95 %"}
          options={[
            { value: "95 %", label: "95 %" },
            { value: "none", label: "none" },
          ]}
          onChoose={(band) => onChange({ ...drawn, band: band !== "none" })}
        />
      </div>
    );
  }
  if ("crossing" in drawn)
    return (
      <Select
        label="Crossing of the trend"
        hint="With the trend that it is set to cross."
        value={drawn.crossing}
        options={withCurrent(handleChoices(view, "trend"), drawn.crossing)}
        onChoose={(crossing) => onChange({ ...drawn, crossing })}
      />
    );
  if ("budget" in drawn)
    return (
      <Select
        label="Path of the budget"
        value={drawn.budget}
        options={withCurrent(handleChoices(view, "budget"), drawn.budget)}
        onChoose={(budget) => onChange({ ...drawn, budget })}
      />
    );
  if ("bodies" in drawn) {
    return (
      <div className="grid gap-3">
        <CommitField
          label="Bodies, parted by commas"
          mono
          placeholder="CI, BSE"
          hint={
            Object.keys(view.bodies).length === 0 ? "This page has no short names for bodies yet." : `On this page: ${Object.keys(view.bodies).join(", ")}.`
          }
          value={drawn.bodies.join(", ")}
          problem={problemOf("bodies")}
          onCommit={(text) =>
            onChange({
              ...drawn,
              bodies: text
                .split(",")
                .map((t) => t.trim())
                .filter((t) => t !== ""),
            })
          }
        />
        {ellipses(drawn.ellipses, "1 sigma", (next) => onChange({ ...drawn, ellipses: next }))}
      </div>
    );
  }
  const coordinate = (field: "x" | "y", label: string) => (
    <CommitField
      label={label}
      mono
      inputMode="decimal"
      value={String(drawn[field])}
      onCommit={(text) => {
        const read = readNumber(text);
        if ("value" in read) onChange({ ...drawn, [field]: read.value });
      }}
    />
  );
  return (
    <div className="grid gap-3">
      <CommitField label="Text" value={drawn.annotation} onCommit={(annotation) => onChange({ ...drawn, annotation })} />
      <div className="grid grid-cols-2 gap-3">
        {coordinate("x", "Across")}
        {coordinate("y", "Upwards")}
      </div>
    </div>
  );
}
