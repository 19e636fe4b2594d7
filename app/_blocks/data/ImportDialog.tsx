"use client";

import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import type { FileProposal, Preview } from "@/app/_page/engineProtocol";
import type { PageServices, Uploaded } from "@/app/_page/services";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { counted } from "@/app/_ui/concise";
import { Progress } from "@/app/_ui/Progress";
import type { Column } from "@/cells";
import { changedMapping, columnFault, mappingFault, proposedMapping, quantityNames, storedColumns, type Mapping } from "./mapping";
import { MappingRow } from "./MappingRow";
import { PreviewTable } from "./PreviewTable";

export interface ImportDialogProps {
  readonly bytes: Uint8Array;
  readonly fileName: string;
  readonly services: PageServices;
  /** Columns of a table that is mapped anew; none for a new file. */
  readonly known?: readonly Column[] | undefined;
  /** The source is kept already. */
  readonly kept: boolean;
  /** Saves the table: `uploaded` is null where the source was kept before. A sentence where it is refused. */
  readonly onSave: (uploaded: Uploaded | null, columns: readonly Column[]) => string | null;
  readonly onClose: () => void;
}

function message(error: unknown): string {
  return error instanceof Error ? error.message : "This file could not be read.";
}

/** How a file is read, as a proposal that can be changed, before anything of it is saved. */
export function ImportDialog({ bytes, fileName, services, known, kept, onSave, onClose }: ImportDialogProps) {
  const [proposal, setProposal] = useState<FileProposal | null>(null);
  const [mapping, setMapping] = useState<Mapping | null>(null);
  const [preview, setPreview] = useState<Preview | null>(null);
  const [refused, setRefused] = useState<string | null>(null);
  const [sent, setSent] = useState<number | null>(null);
  const stop = useRef<AbortController | null>(null);

  useEffect(() => {
    let isOpen = true;
    services.propose(bytes, fileName).then(
      (read) => {
        if (!isOpen) return;
        setProposal(read);
        setMapping(proposedMapping(read, known));
      },
      (error: unknown) => isOpen && setRefused(message(error)),
    );
    return () => {
      isOpen = false;
      stop.current?.abort();
    };
  }, [services, bytes, fileName, known]);

  const columns = mapping?.columns;
  const fault = columns === undefined ? null : mappingFault(columns);
  useEffect(() => {
    if (columns === undefined || fault !== null) return;
    let isNewest = true;
    // Typing a name must not ask for a preview with every letter.
    const timer = setTimeout(() => {
      services.preview(bytes, fileName, storedColumns(columns)).then(
        (read) => isNewest && setPreview(read),
        (error: unknown) => isNewest && setRefused(message(error)),
      );
    }, 250);
    return () => {
      isNewest = false;
      clearTimeout(timer);
    };
  }, [services, bytes, fileName, columns, fault]);

  const onChange = useCallback((index: number, column: Column) => setMapping((old) => (old === null ? old : changedMapping(old, index, column))), []);
  const quantities = useMemo(() => quantityNames(columns ?? []).join("\n"), [columns]);

  const save = async () => {
    if (columns === undefined) return;
    setRefused(null);
    try {
      let uploaded: Uploaded | null = null;
      if (!kept) {
        stop.current = new AbortController();
        setSent(0);
        uploaded = await services.upload(bytes, fileName, setSent, stop.current.signal);
      }
      const fault = onSave(uploaded, storedColumns(columns));
      if (fault !== null) setRefused(fault);
    } catch (error) {
      setRefused(message(error));
    } finally {
      setSent(null);
    }
  };

  const rows = proposal?.rows ?? 0;
  return (
    <Dialog
      open
      size="full"
      onClose={onClose}
      title={<span>How {fileName} is read</span>}
      says={
        proposal === null
          ? refused === null
            ? "Reading the file."
            : undefined
          : `${counted(rows, "row")}, ${counted(proposal.headers.length, "column")}. Each column is taken for what its header and first rows suggest; change what is wrong. ${kept ? "The source itself is not changed." : "Nothing is saved yet; the file will be kept byte for byte."}`
      }
      actions={
        <>
          {fault === null ? null : <span className="mr-auto text-vermilion">{fault}</span>}
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="main" disabled={columns === undefined || fault !== null || sent !== null} onClick={() => void save()}>
            {kept ? "Save the mapping" : "Save this table"}
          </Button>
        </>
      }
    >
      {sent === null ? null : <Progress label={`Sending ${fileName}`} done={sent} onStop={() => stop.current?.abort()} />}
      {refused === null ? null : (
        <p role="alert" className="mb-4 text-vermilion">
          {refused}
        </p>
      )}
      {mapping === null || proposal === null ? null : (
        <>
          <div className="overflow-x-auto">
            <table className="w-full min-w-[860px] border-collapse phone:block phone:min-w-0">
              <thead className="phone:sr-only">
                <tr className="border-b border-ink text-left text-margin text-second">
                  <th className="pb-1 font-normal">in the file</th>
                  <th className="pb-1 font-normal">is taken as</th>
                  <th className="pb-1 font-normal">of, in</th>
                  <th className="pb-1 font-normal">name</th>
                  <th className="pb-1 font-normal">because</th>
                </tr>
              </thead>
              <tbody className="phone:block phone:border-t phone:border-ink">
                {mapping.columns.map((column, i) => (
                  <MappingRow
                    key={i}
                    index={i}
                    column={column}
                    header={proposal.headers[i] ?? ""}
                    reason={mapping.reasons[i] ?? ""}
                    sample={proposal.samples[i] ?? noSample}
                    quantities={quantities}
                    problem={columnFault(mapping.columns, i)}
                    onChange={onChange}
                  />
                ))}
              </tbody>
            </table>
          </div>
          <PreviewTable preview={preview} problems={proposal.problems} rows={rows} />
        </>
      )}
    </Dialog>
  );
}

const noSample: readonly string[] = [];
