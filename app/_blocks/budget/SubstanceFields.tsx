"use client";

import type { PageView } from "@/app/_page/contract";
import { Select } from "@/app/_ui/Select";
import { handleChoices, withCurrent } from "@/app/_blocks/shared/choices";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import { tableOf } from "@/app/_blocks/shared/tableOf";
import type { Substance } from "@/cells";
import { readComposition, writeComposition } from "./compositionText";

type Sort = "body" | "phase" | "element" | "sample" | "class" | "composition";

const sorts: readonly { value: Sort; label: string }[] = [
  { value: "body", label: "a body" },
  { value: "phase", label: "a phase" },
  { value: "element", label: "an element" },
  { value: "sample", label: "a sample of a table" },
  { value: "class", label: "the mean of a class" },
  { value: "composition", label: "a composition typed in" },
];

function sortOf(what: Substance): Sort {
  if ("body" in what) return "body";
  if ("phase" in what) return "phase";
  if ("element" in what) return "element";
  if ("composition" in what) return "composition";
  return "class" in what ? "class" : "sample";
}

export interface SubstanceFieldsProps {
  readonly label: string;
  readonly what: Substance;
  readonly view: PageView;
  readonly problem?: string | null;
  onChange(next: Substance): void;
}

/** Which composition is meant: a body, phase, element, sample, class mean, or one typed in. */
export function SubstanceFields({ label, what, view, problem = null, onChange }: SubstanceFieldsProps) {
  const tables = handleChoices(view, "data");
  const data = "data" in what ? what.data : (tables[0]?.value ?? "");
  const table = tableOf(view.results, data);
  const samples = Array.from(new Set(table?.samples.filter((s) => s !== "") ?? [])).slice(0, 2000);
  const classes = Array.from(new Set(table?.classes.filter((c) => c !== "") ?? []));
  const start = (sort: Sort): Substance => {
    switch (sort) {
      case "body":
        return { body: Object.keys(view.bodies)[0] ?? "CI_PLJ14" };
      case "phase":
        return { phase: "forsterite" };
      case "element":
        return { element: "Si" };
      case "sample":
        return { data, sample: samples[0] ?? "sample" };
      case "class":
        return { data, class: classes[0] ?? "class" };
      case "composition":
        return { composition: { "SiO2 wt%": 45 } };
    }
  };
  const sort = sortOf(what);
  const bodies = Object.entries(view.bodies);
  return (
    <div className="grid gap-3">
      <Select
        label={label}
        value={sort}
        options={tables.length === 0 ? sorts.filter((s) => s.value !== "sample" && s.value !== "class") : sorts}
        onChoose={(next) => onChange(start(next))}
      />
      {"body" in what && (
        <CommitField
          label="Body"
          mono
          value={what.body}
          problem={problem}
          hint={
            bodies.length === 0
              ? "A compilation's name, as CI_PLJ14."
              : `On this page ${bodies.map(([a, id]) => `${a} is ${id}`).join(", ")}; or a compilation's own name.`
          }
          onCommit={(body) => onChange({ body: body.trim() })}
        />
      )}
      {"phase" in what && (
        <CommitField
          label="Phase, or its formula"
          mono
          value={what.phase}
          placeholder="forsterite"
          problem={problem}
          onCommit={(phase) => onChange({ phase: phase.trim() })}
        />
      )}
      {"element" in what && (
        <CommitField label="Element" mono value={what.element} problem={problem} onCommit={(element) => onChange({ element: element.trim() })} />
      )}
      {"data" in what && (
        <>
          <Select label="Table" value={what.data} options={withCurrent(tables, what.data)} onChoose={(next) => onChange({ ...what, data: next })} />
          {"sample" in what && (
            <Select
              label="Sample"
              value={what.sample}
              options={withCurrent(
                samples.map((s) => ({ value: s, label: s })),
                what.sample,
              )}
              onChoose={(sample) => onChange({ data: what.data, sample })}
            />
          )}
          {"class" in what && (
            <Select
              label="Class"
              value={what.class}
              options={withCurrent(
                classes.map((c) => ({ value: c, label: c })),
                what.class,
              )}
              onChoose={(name) => onChange({ data: what.data, class: name })}
            />
          )}
        </>
      )}
      {"composition" in what && (
        <CommitField
          label="Composition"
          mono
          value={writeComposition(what.composition)}
          placeholder="SiO2 45.0(4) wt%, MgO 37.8 wt%"
          hint="Species, value with its σ if known, unit; parted by commas."
          problem={problem}
          onCommit={(text) => {
            const read = readComposition(text);
            if ("composition" in read) onChange({ composition: read.composition });
          }}
        />
      )}
    </div>
  );
}
