"use client";

import { useMemo, useState } from "react";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { Select } from "@/app/_ui/Select";
import { controlLook } from "@/app/_ui/TextField";
import { handleSchema, listBodies } from "@/cells";
import { usePage } from "../pageContext";

/** Which compilation each name means on this page. An unnamed CI is a wrong number waiting. */
export function BodiesDialog({ onClose }: { readonly onClose: () => void }) {
  const bodies = usePage((s) => s.bodies);
  const edits = usePage((s) => s.edits);
  const [rows, setRows] = useState(() => Object.entries(bodies).map(([alias, id]) => ({ alias, id })));
  const [fault, setFault] = useState<string | null>(null);
  const known = useMemo(
    () =>
      listBodies()
        .filter((body) => body.kind !== "phase")
        .map((body) => ({ value: body.id, label: `${body.id}, ${body.what}${body.fromMemory ? " (from memory)" : ""}` })),
    [],
  );
  const save = () => {
    const wrong = rows.find((row) => !handleSchema.safeParse(row.alias).success);
    if (wrong !== undefined) return setFault(`“${wrong.alias}” cannot be a name: letters, digits and _ only, and no digit first.`);
    const twice = rows.find((row, i) => rows.some((other, j) => j < i && other.alias === row.alias));
    if (twice !== undefined) return setFault(`Two bodies are called ${twice.alias}.`);
    try {
      edits?.setBodies(Object.fromEntries(rows.map((row) => [row.alias, row.id])));
      onClose();
    } catch (error) {
      setFault(error instanceof Error ? error.message : "This could not be changed.");
    }
  };
  const set = (i: number, change: Partial<{ alias: string; id: string }>) => {
    setFault(null);
    setRows((old) => old.map((row, j) => (j === i ? { ...row, ...change } : row)));
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title="Bodies of this page"
      says="Which compilation a name means in every formula, plot, trend and budget here. Changing one recalculates the page."
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="main" onClick={save}>
            Use these
          </Button>
        </>
      }
    >
      <ul className="flex flex-col gap-2">
        {rows.map((row, i) => (
          <li key={i} className="grid grid-cols-[88px_auto_1fr_auto] items-center gap-3">
            <input
              aria-label={`Name ${i + 1}`}
              className={`${controlLook} font-mono`}
              value={row.alias}
              maxLength={40}
              onChange={(event) => set(i, { alias: event.target.value })}
            />
            <span className="text-second">is</span>
            <Select
              aria-label={`Compilation that ${row.alias} means`}
              value={row.id}
              options={known.some((k) => k.value === row.id) ? known : [{ value: row.id, label: `${row.id} (not known)` }, ...known]}
              onChoose={(id) => set(i, { id })}
            />
            <Button look="quiet" aria-label={`Take off ${row.alias}`} onClick={() => setRows((old) => old.filter((_, j) => j !== i))}>
              Take off
            </Button>
          </li>
        ))}
      </ul>
      <Button
        className="mt-3"
        onClick={() =>
          setRows((old) => [
            ...old,
            {
              alias: old.some((r) => r.alias === "CI") ? (old.some((r) => r.alias === "BSE") ? "" : "BSE") : "CI",
              id: old.some((r) => r.alias === "CI") ? "BSE_MS95" : "CI_PLJ14",
            },
          ])
        }
      >
        Add a body
      </Button>
      {fault === null ? null : (
        <p role="alert" className="mt-3 text-vermilion">
          {fault}
        </p>
      )}
    </Dialog>
  );
}
