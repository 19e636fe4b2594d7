"use client";

import Link from "next/link";
import { useState } from "react";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { formatNumber, withUnit } from "@/app/_ui/concise";
import { Progress } from "@/app/_ui/Progress";
import { TextArea } from "@/app/_ui/TextField";
import { countPage } from "../counts";
import { usePage } from "../pageContext";
import { groupedHash } from "../times";
import { request } from "./request";

interface Frozen {
  readonly snapshotId: string;
  readonly number: number;
  readonly hash: string;
}

interface MemoryValue {
  readonly body: string;
  readonly species: string;
  readonly value: number;
  readonly unit: string;
  readonly source: string;
}

/** Nothing was frozen yet: these values must be taken knowingly first. */
interface Question {
  readonly detail: string;
  readonly fromMemory: readonly MemoryValue[];
}

export interface FreezeDialogProps {
  readonly pageId: string;
  /** Yjs state vector of what is on the screen, base64. */
  readonly stateVector: () => string;
  readonly onClose: () => void;
  readonly onFrozen: (frozen: Frozen) => void;
  readonly onReadingLink: () => void;
}

/** Freezes the page as it is on the screen. Values from memory go in only when a lead ticks each of them knowingly. */
export function FreezeDialog({ pageId, stateVector, onClose, onFrozen, onReadingLink }: FreezeDialogProps) {
  const blocks = usePage((s) => s.blocks);
  const results = usePage((s) => s.results);
  const waiting = usePage((s) => s.save?.kind !== "saved");
  const [note, setNote] = useState("");
  const [memory, setMemory] = useState<readonly MemoryValue[]>([]);
  const [ticked, setTicked] = useState<ReadonlySet<number>>(new Set());
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const [frozen, setFrozen] = useState<Frozen | null>(null);
  const problems = countPage(blocks, results).problems;
  const allTicked = memory.every((_, i) => ticked.has(i));

  const freeze = async () => {
    setBusy(true);
    setFault(null);
    try {
      const made = await request<Frozen | Question>("POST", `/api/pages/${pageId}/freeze`, {
        stateVector: stateVector(),
        asks: true,
        ...(note.trim() === "" ? {} : { note: note.trim() }),
        ...(memory.length > 0 && allTicked ? { acceptFromMemory: true } : {}),
      });
      if ("fromMemory" in made) {
        setMemory(made.fromMemory);
        setTicked(new Set());
        setFault(made.detail);
        return;
      }
      setFrozen(made);
      onFrozen(made);
    } catch (error) {
      setFault(error instanceof Error ? error.message : "The page could not be frozen.");
    } finally {
      setBusy(false);
    }
  };

  if (frozen !== null)
    return (
      <Dialog
        open
        onClose={onClose}
        title={`Frozen as no. ${frozen.number}`}
        says="Nobody can change it, not even the database. Its hash stands for every file in it."
        actions={
          <>
            <Button onClick={onReadingLink}>Hand out a reading link</Button>
            <Link className="border-b-2 border-indigo font-semibold" href={`/snapshots/${frozen.snapshotId}`}>
              Open snapshot {frozen.number}
            </Link>
          </>
        }
      >
        <p className="font-mono text-[12px] leading-5">{groupedHash(frozen.hash)}</p>
      </Dialog>
    );
  return (
    <Dialog
      open
      onClose={onClose}
      title="Freeze this page"
      says="Document, data and results as they are now become an immutable, numbered snapshot. The live page goes on."
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="main" disabled={busy || (memory.length > 0 && !allTicked)} onClick={() => void freeze()}>
            Freeze
          </Button>
        </>
      }
    >
      {busy ? <Progress label="Calculating everything anew and hashing it" done={null} /> : null}
      {problems > 0 ? (
        <p className="mb-3 text-vermilion">
          {problems === 1 ? "One problem is" : `${problems} problems are`} still open on this page; the snapshot will show {problems === 1 ? "it" : "them"}.
        </p>
      ) : null}
      {waiting ? <p className="mb-3 text-second">Some edits are still on their way to the database. The snapshot waits for what you see here.</p> : null}
      <TextArea
        label="What this snapshot is for"
        value={note}
        maxLength={2000}
        autoFocus
        onText={setNote}
        hint="For instance: as submitted, table 2 and figure 3. Left empty, nothing is said."
      />
      {fault === null ? null : (
        <p role="alert" className="mt-3 text-vermilion">
          {fault}
        </p>
      )}
      {memory.length > 0 ? (
        <fieldset className="mt-3">
          <legend className="text-margin text-second">Tick each value you take knowingly</legend>
          <ul className="max-h-72 overflow-y-auto border-t border-ink">
            {memory.map((value, i) => (
              <li key={`${value.body} ${value.species}`} className="border-b border-hairline">
                <label className="flex items-baseline gap-3 py-1.5">
                  <input
                    type="checkbox"
                    className="accent-indigo"
                    checked={ticked.has(i)}
                    onChange={() =>
                      setTicked((old) => {
                        const next = new Set(old);
                        if (!next.delete(i)) next.add(i);
                        return next;
                      })
                    }
                  />
                  <span className="font-mono text-[12px]">
                    {value.body} {value.species}
                  </span>
                  <span className="font-mono text-[12px]">{withUnit(formatNumber(value.value), value.unit)}</span>
                  <span className="flex-1 text-right text-margin text-second">{value.source}</span>
                </label>
              </li>
            ))}
          </ul>
          {memory.length > 3 ? (
            <Button className="mt-2" onClick={() => setTicked(new Set(memory.map((_, i) => i)))}>
              I have looked at all {memory.length}
            </Button>
          ) : null}
        </fieldset>
      ) : null}
    </Dialog>
  );
}
