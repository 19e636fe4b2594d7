"use client";

import { memo } from "react";
import { controlLook } from "@/app/_ui/TextField";
import { Select } from "@/app/_ui/Select";
import type { Column } from "@/cells";
import { columnName, inRole, kindOptions, roleOptions, unitOptions, unitSymbol } from "./columnWords";

export interface MappingRowProps {
  readonly index: number;
  readonly column: Column;
  readonly header: string;
  /** Why the program guessed so; "" once a person has changed it. */
  readonly reason: string;
  /** First values of the column as the file writes them. */
  readonly sample: readonly string[];
  /** Names of the quantities, for uncertainties to belong to; joined, so that rows compare cheaply. */
  readonly quantities: string;
  readonly problem: string | null;
  readonly onChange: (index: number, column: Column) => void;
}

const basisOptions = [
  { value: "", label: "no basis said" },
  { value: "mass", label: "by mass" },
  { value: "atoms", label: "by atoms" },
] as const;

/** One column of a file: its header, what it is taken for and why, all of it to be changed. */
export const MappingRow = memo(function MappingRow({ index, column, header, reason, sample, quantities, problem, onChange }: MappingRowProps) {
  const names = quantities === "" ? [] : quantities.split("\n");
  const set = (next: Column) => onChange(index, next);
  const unit = unitSymbol(column.unit);
  const units = unitOptions.some((o) => o.value === unit) ? unitOptions : [{ value: unit, label: `${unit} (not known)` }, ...unitOptions];
  const of = column.of ?? "";
  return (
    <tr className="border-b border-hairline align-top phone:grid phone:grid-cols-[minmax(0,1fr)_136px] phone:gap-x-4 phone:pb-2">
      <th scope="row" className="max-w-48 py-1.5 pr-4 phone:max-w-none phone:pr-0 text-left font-normal">
        <div className="truncate font-mono text-[12.5px]" title={header}>
          {header === "" ? <span className="text-second">no header, column {index + 1}</span> : header}
        </div>
        <div className="truncate font-mono text-tick text-second" title={sample.join(", ")}>
          {sample.join("  ")}
        </div>
      </th>
      <td className="w-36 py-1 pr-4 phone:w-auto phone:pr-0">
        <Select
          aria-label={`Role of ${header}`}
          value={column.role}
          options={roleOptions}
          onChoose={(role) =>
            set(
              inRole(
                column,
                role,
                names.filter((n) => n !== columnName(column)),
              ),
            )
          }
        />
      </td>
      <td className="py-1 pr-4 phone:col-span-2 phone:pr-0 phone:empty:hidden">
        {column.role === "quantity" ? (
          <div className="grid grid-cols-[84px_108px_96px] gap-3">
            <input
              aria-label={`Species of ${header}`}
              className={`${controlLook} font-mono text-cell`}
              placeholder="species"
              maxLength={40}
              value={column.species ?? ""}
              onChange={(event) => {
                const { species: _, ...rest } = column;
                set(event.target.value === "" ? rest : { ...rest, species: event.target.value });
              }}
            />
            <Select aria-label={`Unit of ${header}`} mono value={unit} options={units} onChoose={(next) => set({ ...column, unit: next })} />
            {unit === "1" ? (
              <Select
                aria-label={`Basis of ${header}`}
                value={column.basis ?? ""}
                options={basisOptions}
                onChoose={(basis) => {
                  const { basis: _, ...rest } = column;
                  set(basis === "" ? rest : { ...rest, basis });
                }}
              />
            ) : null}
          </div>
        ) : null}
        {column.role === "uncertainty" ? (
          <div className="grid grid-cols-[108px_132px] gap-3">
            <Select
              aria-label={`${header} is the uncertainty of`}
              mono
              value={of}
              options={[
                ...(names.includes(of) ? [] : [{ value: of, label: of === "" ? "choose" : `${of} (gone)` }]),
                ...names.map((name) => ({ value: name, label: name })),
              ]}
              onChoose={(next) => set({ ...column, of: next })}
            />
            <Select aria-label={`${header} is given as`} value={column.as ?? "1 sigma"} options={kindOptions} onChoose={(as) => set({ ...column, as })} />
          </div>
        ) : null}
      </td>
      <td className="w-24 py-1 pr-4 phone:w-auto phone:pr-0">
        <input
          aria-label={`Name of ${header} in formulas`}
          className={`${controlLook} font-mono text-cell`}
          maxLength={80}
          value={columnName(column)}
          onChange={(event) => set({ ...column, name: event.target.value })}
        />
      </td>
      <td className={`py-1.5 text-margin phone:py-2 ${problem === null ? "text-second" : "text-vermilion"}`}>{problem ?? reason}</td>
    </tr>
  );
});
