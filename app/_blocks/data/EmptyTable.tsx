"use client";

import { useRef, useState } from "react";
import { Button } from "@/app/_ui/Button";
import { TextArea } from "@/app/_ui/TextField";
import type { Column } from "@/cells";
import { pastedName } from "./clipboardTable";
import { columnsFromText } from "./columnWords";

export interface EmptyTableProps {
  readonly onFile: (bytes: Uint8Array, fileName: string) => void;
  readonly onColumns: (columns: readonly Column[]) => void;
  readonly onStack: () => void;
  /** Other tables there are to stack. */
  readonly tables: number;
}

const MOST_BYTES = 50 * 1024 * 1024;

/** A table that holds nothing yet: the four ways to fill it. */
export function EmptyTable({ onFile, onColumns, onStack, tables }: EmptyTableProps) {
  const file = useRef<HTMLInputElement>(null);
  const [way, setWay] = useState<"paste" | "type" | null>(null);
  const [pasted, setPasted] = useState("");
  const [heads, setHeads] = useState("Sample, Class, SiO2 (wt%), Al2O3 (wt%), FeOt (wt%), MgO (wt%), CaO (wt%)");
  const [refused, setRefused] = useState<string | null>(null);
  const [over, setOver] = useState(false);

  const take = async (chosen: File | undefined) => {
    if (chosen === undefined) return;
    if (chosen.size === 0) return setRefused(`${chosen.name} is empty. Choose a file with a header and rows.`);
    if (chosen.size > MOST_BYTES)
      return setRefused(
        `${chosen.name} has ${Math.round(chosen.size / 1048576)} MiB; a source holds at most 50 MiB. Leave out columns that are not needed, or part it into several tables and stack them.`,
      );
    setRefused(null);
    try {
      onFile(new Uint8Array(await chosen.arrayBuffer()), chosen.name);
    } catch {
      setRefused(`${chosen.name} could not be read from the disk. Choose it again.`);
    }
  };
  const takePasted = (text: string) => {
    if (text.trim() === "") return setRefused("Nothing was pasted yet. Copy the table in the spreadsheet, header included, and paste it here.");
    setRefused(null);
    onFile(new TextEncoder().encode(text), pastedName(new Date()));
  };
  return (
    <div
      className={`border border-dashed px-4 py-4 ${over ? "border-indigo bg-surface" : "border-axis"}`}
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={(event) => {
        event.preventDefault();
        setOver(false);
        void take(event.dataTransfer.files[0]);
      }}
      onPaste={(event) => {
        // Pasting anywhere here is meant as a table, unless a field has the focus.
        if (event.target instanceof HTMLTextAreaElement || event.target instanceof HTMLInputElement) return;
        takePasted(event.clipboardData.getData("text/plain"));
      }}
    >
      <p className="text-second">This table is empty. Bring data in by one of four ways; nothing is saved before you have seen how it is read.</p>
      <ul className="mt-2 grid grid-cols-2 gap-x-6 gap-y-1 phone:grid-cols-1">
        <li>
          <Button onClick={() => file.current?.click()}>Upload a file</Button> <span className="text-second">CSV or TSV, or drop it here</span>
        </li>
        <li>
          <Button aria-expanded={way === "paste"} onClick={() => setWay(way === "paste" ? null : "paste")}>
            Paste
          </Button>{" "}
          <span className="text-second">from a spreadsheet</span>
        </li>
        <li>
          <Button aria-expanded={way === "type"} onClick={() => setWay(way === "type" ? null : "type")}>
            Type
          </Button>{" "}
          <span className="text-second">by hand, up to 2,000 rows</span>
        </li>
        <li>
          <Button disabled={tables === 0} onClick={onStack}>
            Stack
          </Button>{" "}
          <span className="text-second">{tables === 0 ? "other tables: there are none on this page yet" : "other tables of this page into one"}</span>
        </li>
      </ul>
      <input
        ref={file}
        type="file"
        accept=".csv,.tsv,.txt,text/csv,text/tab-separated-values,text/plain"
        className="sr-only"
        aria-label="Choose a table to upload"
        tabIndex={-1}
        onChange={(event) => void take(event.target.files?.[0])}
      />
      {way === "paste" ? (
        <form
          className="mt-4"
          onSubmit={(event) => {
            event.preventDefault();
            takePasted(pasted);
          }}
        >
          <TextArea label="The table, header included" mono rows={5} value={pasted} autoFocus onText={setPasted} />
          <Button type="submit" look="main" className="mt-2">
            Read it
          </Button>
        </form>
      ) : null}
      {way === "type" ? (
        <form
          className="mt-4"
          onSubmit={(event) => {
            event.preventDefault();
            const columns = columnsFromText(heads);
            if (columns.length === 0) return setRefused("Name at least one column.");
            setRefused(null);
            onColumns(columns);
          }}
        >
          <TextArea
            label="Columns, parted by commas, units in brackets"
            mono
            rows={2}
            value={heads}
            autoFocus
            onText={setHeads}
            hint="An uncertainty can be typed with its value, 45.0 ± 0.4 or 45.0(4), below detection as <0.05."
          />
          <Button type="submit" look="main" className="mt-2">
            Start the table
          </Button>
        </form>
      ) : null}
      {refused === null ? null : (
        <p role="alert" className="mt-3 text-vermilion">
          {refused}
        </p>
      )}
    </div>
  );
}
