"use client";

import { useState } from "react";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { TextField } from "@/app/_ui/TextField";
import type { Column } from "@/cells";
import { columnName, columnsFromText, inRole, kindOptions, roleOptions } from "./columnWords";
import { columnFault, quantityNames } from "./mapping";
import { Select } from "@/app/_ui/Select";

export interface AddColumnDialogProps {
  readonly columns: readonly Column[];
  readonly onAdd: (column: Column) => string | null;
  readonly onClose: () => void;
}

/** A new column of a typed table, named as a header would be: "CaO (wt%)". */
export function AddColumnDialog({ columns, onAdd, onClose }: AddColumnDialogProps) {
  const [text, setText] = useState("");
  const [role, setRole] = useState<Column["role"] | "">("");
  const [of, setOf] = useState(quantityNames(columns)[0] ?? "");
  const [as, setAs] = useState<NonNullable<Column["as"]>>("1 sigma");
  const [fault, setFault] = useState<string | null>(null);
  const guess = columnsFromText(text)[0];
  const quantities = quantityNames(columns);
  const chosen = role === "" ? (guess?.role ?? "text") : role;
  const add = () => {
    if (guess === undefined) return setFault("Write a name, with its unit in brackets.");
    const shaped = inRole(guess, chosen, quantities);
    const column: Column = chosen === "uncertainty" ? { ...shaped, of, as } : shaped;
    const wrong = columns.some((c) => columnName(c) === columnName(column))
      ? `There is a column ${columnName(column)} already.`
      : columnFault([...columns, column], columns.length);
    const refused = wrong ?? onAdd(column);
    if (refused === null) onClose();
    else setFault(refused);
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title="Add a column"
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="main" onClick={add}>
            Add it
          </Button>
        </>
      }
    >
      <form
        className="flex flex-col gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          add();
        }}
      >
        <TextField
          label="Name, unit in brackets"
          mono
          value={text}
          autoFocus
          problem={fault}
          onText={(next) => (setText(next), setFault(null))}
          placeholder="Na2O (wt%)"
        />
        <Select label="is" value={chosen} options={roleOptions} onChoose={setRole} />
        {chosen === "uncertainty" ? (
          <div className="grid grid-cols-2 gap-4">
            <Select label="of" mono value={of} options={quantities.map((name) => ({ value: name, label: name }))} onChoose={setOf} />
            <Select label="given as" value={as} options={kindOptions} onChoose={setAs} />
          </div>
        ) : null}
      </form>
    </Dialog>
  );
}
