"use client";

import { Fragment, useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { kindWords } from "@/app/_page/kindWords";
import { EditableText } from "@/app/_ui/EditableText";
import { KindSwatch } from "@/app/_ui/KindSwatch";
import type { Block } from "@/cells";
import { stateOf } from "./index";
import { readsInWords } from "./headWords";

export interface BlockHeadProps {
  readonly blockKey: string;
  readonly block: Block;
  readonly view: PageView;
  readonly loading: boolean;
  /** Which of its two names is being changed. */
  readonly renaming: "name" | "handle" | null;
  readonly onRenamed: () => void;
  /** Runs an edit; says why where it is refused. */
  readonly run: (edit: () => void) => boolean;
}

/** One line over a block: pattern, name, handle, what it reads from, and at the right its state in words. */
export function BlockHead({ blockKey, block, view, loading, renaming, onRenamed, run }: BlockHeadProps) {
  // Remounting the field throws away what was typed and refused.
  const [round, setRound] = useState(0);
  const result = view.results?.blocks.get(block.id);
  const state = loading
    ? { text: "reading its source", problem: false }
    : view.results !== null && result === undefined
      ? { text: "calculating", problem: false }
      : stateOf(result);
  const others = view.present.filter((p) => p.block === blockKey && !p.isMe);
  const edits = view.edits;
  const title = kindWords[block.kind].title;
  return (
    <div className="block-head-box">
      <header className="block-head">
        <KindSwatch kind={block.kind} />
        <h2 className="block-name text-block font-semibold">
          <EditableText
            key={`name ${renaming === "name"}`}
            text={block.name ?? ""}
            placeholder={title}
            label={`Name of the block ${block.id}`}
            autoFocus={renaming === "name"}
            onDone={onRenamed}
            onCommit={edits ? (name) => run(() => edits.setField(blockKey, "name", name === "" ? undefined : name)) : undefined}
          />
        </h2>
        <span className="shrink-0 font-mono text-[12px] leading-5 text-second">
          <EditableText
            key={`handle ${renaming === "handle"} ${round}`}
            text={block.id}
            label={`Handle of the block ${block.name ?? title}: what formulas call it`}
            maxLength={40}
            autoFocus={renaming === "handle"}
            onDone={onRenamed}
            onCommit={
              edits
                ? (handle) => {
                    if (!run(() => edits.renameHandle(blockKey, handle))) setRound((r) => r + 1);
                  }
                : undefined
            }
          />
        </span>
        <span className="block-reads">
          {readsInWords(block, view.results?.readsFrom.get(block.id) ?? [], result).map((part, i) =>
            typeof part === "string" ? <Fragment key={i}>{part}</Fragment> : <b key={i}>{part.name}</b>,
          )}
        </span>
        <span className={`block-state ${state.problem ? "!text-vermilion" : ""}`}>
          {state.text}
          {others.length > 0 && view.mode !== "frozen" ? (
            <span className="ml-3">
              {others.map((p) => (
                <span key={p.clientId} className="ml-2 inline-flex items-center gap-1">
                  <i className="inline-block h-3 w-[3px]" style={{ background: p.color }} />
                  {p.name}
                </span>
              ))}
            </span>
          ) : null}
        </span>
      </header>
    </div>
  );
}
