"use client";

import { use, useDeferredValue, useId, useMemo, useState } from "react";
import { addBody } from "@/app/_server/actions/bodies";
import { ActionForm } from "@/app/_site/ActionForm";
import { FormField } from "@/app/_site/FormField";
import { SentValues } from "@/app/_site/formContext";
import { Chemical } from "@/app/_ui/Chemical";
import { Field } from "@/app/_ui/Field";
import { Select } from "@/app/_ui/Select";
import { controlLook } from "@/app/_ui/TextField";
import { formatNumber } from "@/app/_ui/concise";
import { ownBodyId, readOwnTable, saysFromMemory, type OwnBody, type OwnSigmaKind } from "@/cells";

export interface AddBodyProps {
  readonly groupId: string;
  /** The newest version of the body that gets another one; null for a new body. */
  readonly corrected: { readonly code: string; readonly version: number; readonly body: OwnBody } | null;
}

const units = ["wt%", "mg/g", "µg/g", "ng/g", "kg/kg"].map((unit) => ({ value: unit, label: unit }));
const kinds: readonly { readonly value: OwnSigmaKind; readonly label: string }[] = [
  { value: "1 sigma", label: "1σ" },
  { value: "2 sigma", label: "2σ" },
  { value: "1 sigma relative %", label: "1σ in % of the value" },
];

/** The form for a body of the group's own: what it is, from where, and its composition as a pasted table, read as one types. */
export function AddBody({ groupId, corrected }: AddBodyProps) {
  const body = corrected?.body;
  return (
    <ActionForm
      action={addBody}
      submit={corrected ? `Save as ${ownBodyId(corrected.code, corrected.version + 1)}` : "Add this body"}
      look="act"
      label={corrected ? `A new version of ${corrected.code}` : "Add a body"}
      className="[&_[role=alert]]:whitespace-pre-line"
    >
      <input type="hidden" name="groupId" value={groupId} />
      <input type="hidden" name="after" value={corrected?.version ?? 0} />
      {corrected ? (
        <input type="hidden" name="code" value={corrected.code} />
      ) : (
        <FormField
          name="code"
          label="Short name"
          required
          maxLength={28}
          autoComplete="off"
          spellCheck={false}
          hint="Letters, digits and _. Mantle becomes OWN_Mantle_1 in formulas, and OWN_Mantle_2 once it is corrected."
        />
      )}
      <FormField
        name="name"
        label="What it is"
        required
        maxLength={120}
        defaultValue={body?.name}
        hint="Called as a built-in body is, CI chondrite for instance, it is compared with the other compilations of that body."
      />
      <Source source={body?.source ?? ""} fromMemory={body?.fromMemory ?? false} />
      <FormField name="description" label="Remarks, if any" maxLength={2000} defaultValue={body?.description ?? ""} />
      <Composition body={body} />
    </ActionForm>
  );
}

function Source({ source, fromMemory }: { readonly source: string; readonly fromMemory: boolean }) {
  const sent = use(SentValues);
  const id = useId();
  const was = sent["source"] ?? source;
  const [typed, setTyped] = useState(was);
  const [ticked, setTicked] = useState(sent["source"] === undefined ? fromMemory : sent["memory"] === "on");
  const without = saysFromMemory(typed);
  return (
    <div>
      <Field label="Source" hint="A citation or a DOI. Where there is none, write: from memory.">
        {({ "aria-invalid": _, ...ids }) => (
          <input
            name="source"
            {...ids}
            required
            maxLength={500}
            key={was}
            defaultValue={was}
            className={controlLook}
            onChange={(event) => setTyped(event.target.value)}
          />
        )}
      </Field>
      <label htmlFor={id} className="mt-2 flex items-baseline gap-3">
        <input
          id={id}
          type="checkbox"
          name="memory"
          className="accent-indigo"
          checked={ticked || without}
          disabled={without}
          onChange={(event) => setTicked(event.target.checked)}
        />
        <span>The values were written down from memory, not read in a copy of the source</span>
      </label>
    </div>
  );
}

function Composition({ body }: { readonly body: OwnBody | undefined }) {
  const sent = use(SentValues);
  const [unit, setUnit] = useState(sent["unit"] ?? "wt%");
  const [sigma, setSigma] = useState(kinds.find(({ value }) => value === sent["sigma"])?.value ?? "1 sigma");
  const was = sent["table"] ?? (body === undefined ? "" : tableText(body));
  const [text, setText] = useState(was);
  const shown = useDeferredValue(text);
  const { values, without, problems } = useMemo(() => readOwnTable(shown, unit, sigma), [shown, unit, sigma]);
  return (
    <>
      <div className="flex flex-wrap gap-x-8 gap-y-4">
        <div className="w-36">
          <Select name="unit" label="Unit of the values" value={unit} options={units} onChoose={setUnit} />
        </div>
        <div className="w-44">
          <Select name="sigma" label="Uncertainties are" value={sigma} options={kinds} onChoose={setSigma} />
        </div>
      </div>
      <Field
        label="Composition"
        hint="Paste it: species, value and, where known, its uncertainty, one species a line. A line may have a unit of its own, as in La µg/g. Iron is the total."
      >
        {({ "aria-invalid": _, ...ids }) => (
          <textarea
            name="table"
            {...ids}
            required
            rows={10}
            spellCheck={false}
            key={was}
            defaultValue={was}
            className={`${controlLook} font-mono text-cell`}
            onChange={(event) => setText(event.target.value)}
          />
        )}
      </Field>
      <div aria-live="polite">
        {values.length === 0 && problems.length === 0 ? null : (
          <p className="text-second">
            Read: {values.length === 0 ? "nothing" : null}
            {values.map(({ species, value, unit: of, sigma: one }, n) => (
              <span key={n}>
                {n > 0 ? ", " : ""}
                <Chemical name={species} /> <span className="font-mono text-cell">{String(value)}</span>
                {one === undefined ? "" : one === 0 ? " exact" : ` ± ${formatNumber(one)}`} {of}
              </span>
            ))}
            {"."}
            {without.length > 0 ? ` Left out, since no value is given: ${without.join(", ")}.` : ""}
            {values.some(({ sigma: one }) => one === undefined) ? " Where no σ is given it stays unknown." : ""}
          </p>
        )}
        {problems.length === 0 ? null : (
          <ul className="mt-2 text-vermilion" aria-label="What is wrong in the composition">
            {problems.map(({ row, text: says }, n) => (
              <li key={`${row} ${n}`}>{says}</li>
            ))}
          </ul>
        )}
      </div>
    </>
  );
}

/** A composition as the form takes it. */
function tableText({ values }: OwnBody): string {
  return values
    .map(({ species, unit, value, sigma }) => [`${species} ${unit}`, String(value), ...(sigma === undefined ? [] : [String(sigma)])].join("\t"))
    .join("\n");
}
