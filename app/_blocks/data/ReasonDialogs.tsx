"use client";

import { useState, type ReactNode } from "react";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { Select } from "@/app/_ui/Select";
import { TextArea, TextField } from "@/app/_ui/TextField";
import { readNumber } from "@/app/_blocks/shared/readNumber";

interface ReasonFormProps {
  readonly title: string;
  readonly says: ReactNode;
  readonly act: string;
  readonly children?: ReactNode;
  /** A sentence where the rest of the form cannot be taken. */
  readonly onAct: (reason: string) => string | null;
  readonly onClose: () => void;
}

/** A question whose answer always needs a reason, since somebody will read it years later. */
function ReasonForm({ title, says, act, children, onAct, onClose }: ReasonFormProps) {
  const [reason, setReason] = useState("");
  const [missing, setMissing] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const submit = () => {
    if (reason.trim() === "") return setMissing(true);
    const refused = onAct(reason.trim());
    if (refused === null) onClose();
    else setFault(refused);
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title={title}
      says={says}
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="main" onClick={submit}>
            {act}
          </Button>
        </>
      }
    >
      <form
        className="flex flex-col gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          submit();
        }}
      >
        {children}
        <TextArea
          label="Reason"
          value={reason}
          maxLength={2000}
          onText={(text) => {
            setReason(text);
            setMissing(false);
          }}
          problem={missing ? "A reason is needed: whoever checks this number will ask for it." : null}
          onKeyDown={(event) => {
            if (event.key === "Enter" && (event.ctrlKey || event.metaKey)) submit();
          }}
        />
        {fault === null ? null : (
          <p role="alert" className="text-vermilion">
            {fault}
          </p>
        )}
        <button type="submit" className="hidden" aria-hidden="true" tabIndex={-1} />
      </form>
    </Dialog>
  );
}

export interface AmendDialogProps {
  readonly sample: string;
  readonly column: string;
  /** Text as the source has it. */
  readonly was: string;
  /** Text as an earlier amendment has it. */
  readonly now: string;
  readonly onAmend: (value: string, reason: string) => string | null;
  readonly onClose: () => void;
}

/** Lays a correction over a value of the source. */
export function AmendDialog({ sample, column, was, now, onAmend, onClose }: AmendDialogProps) {
  const [value, setValue] = useState(now);
  return (
    <ReasonForm
      title={`Amend ${column} of ${sample}`}
      says={
        <>
          The source says <span className="font-mono">{was === "" ? "nothing" : was}</span>. It stays as it is and stays visible; your value is laid over it.
        </>
      }
      act="Amend"
      onAct={(reason) => (value.trim() === was.trim() ? "This is what the source says already. Write the value it should be." : onAmend(value.trim(), reason))}
      onClose={onClose}
    >
      <TextField
        label="Value"
        mono
        value={value}
        onText={setValue}
        maxLength={2000}
        autoFocus
        hint="As a table would have it: 24.1, 24.1 ± 0.2, <0.05, or nothing."
      />
    </ReasonForm>
  );
}

export interface SetAsideDialogProps {
  readonly what: string;
  readonly whole: boolean;
  readonly onSetAside: (reason: string) => string | null;
  readonly onClose: () => void;
}

/** Keeps a sample or a value in the table but out of every calculation. */
export function SetAsideDialog({ what, whole, onSetAside, onClose }: SetAsideDialogProps) {
  return (
    <ReasonForm
      title={`Set aside ${what}`}
      says={
        whole
          ? "The sample stays in the table and leaves every calculation. It is counted wherever it is missing."
          : "The value stays in the table and leaves every calculation; the rest of the sample stays in use."
      }
      act="Set aside"
      onAct={onSetAside}
      onClose={onClose}
    />
  );
}

export interface AssumeDialogProps {
  readonly column: string;
  readonly unit: string;
  readonly without: number;
  readonly onAssume: (assumed: { readonly relative: number } | { readonly absolute: number }, reason: string) => string | null;
  readonly onClose: () => void;
}

/** Assumes a σ where the source gives none. */
export function AssumeDialog({ column, unit, without, onAssume, onClose }: AssumeDialogProps) {
  const [kind, setKind] = useState<"relative" | "absolute">("relative");
  const [text, setText] = useState("");
  return (
    <ReasonForm
      title={`Assume a σ for ${column}`}
      says={`It applies only where the source gives none (${without} ${without === 1 ? "value" : "values"}), is counted, and is marked ° in every result that used it.`}
      act="Assume it"
      onAct={(reason) => {
        const read = readNumber(text);
        if ("problem" in read) return read.problem;
        if ("empty" in read || !(read.value > 0)) return "Write a number above 0, for instance 5.";
        return onAssume(kind === "relative" ? { relative: read.value / 100 } : { absolute: read.value }, reason);
      }}
      onClose={onClose}
    >
      <div className="grid grid-cols-2 gap-4">
        <TextField label="1σ" mono inputMode="decimal" value={text} onText={setText} autoFocus />
        <Select
          label="is"
          value={kind}
          options={[
            { value: "relative", label: "% of the value" },
            { value: "absolute", label: unit === "1" ? "in the ratio itself" : unit },
          ]}
          onChoose={setKind}
        />
      </div>
    </ReasonForm>
  );
}
