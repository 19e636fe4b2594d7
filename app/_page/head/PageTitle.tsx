"use client";

import Link from "next/link";
import { EditableText } from "@/app/_ui/EditableText";
import { Button } from "@/app/_ui/Button";
import { usePage } from "../pageContext";
import type { LastSnapshot } from "../props";
import { dayOf } from "../times";

export interface PageTitleProps {
  readonly lastSnapshot?: LastSnapshot | null | undefined;
  readonly onBodies?: (() => void) | undefined;
}

/** The title, editable in place, and one sentence: which compilations the page's bodies mean, how σ is written, when it was frozen last. */
export function PageTitle({ lastSnapshot, onBodies }: PageTitleProps) {
  const title = usePage((s) => s.title);
  const edits = usePage((s) => s.edits);
  const bodies = usePage((s) => s.bodies);
  const form = usePage((s) => s.settings.uncertainty);
  const aliases = Object.entries(bodies);
  return (
    <div className="span-12">
      <h1 className="font-serif text-title font-medium tracking-[-0.008em] phone:text-title-phone">
        <EditableText
          text={title}
          label="Title of the page"
          placeholder="A page without a title"
          maxLength={300}
          className="w-full"
          onCommit={edits ? (next) => edits.setTitle(next) : undefined}
        />
      </h1>
      <p className="mt-2 text-second">
        {aliases.map(([alias, id], i) => (
          <span key={alias}>
            {i > 0 ? ", " : ""}
            <b className="font-medium text-ink">{alias}</b> is <span className="font-mono text-[12px]">{id}</span>
          </span>
        ))}
        {aliases.length > 0 ? ". " : ""}
        {edits !== null && onBodies ? (
          <>
            <Button className="chrome" onClick={onBodies}>
              {aliases.length > 0 ? "Change bodies" : "Choose bodies"}
            </Button>
            {". "}
          </>
        ) : null}
        Uncertainties 1σ as <span className="font-mono text-[12px]">{form === "concise" ? "1.086(12)" : "1.086\u2009±\u20090.012"}</span>.
        {lastSnapshot ? (
          <>
            {" "}
            Frozen last as <Link href={`/snapshots/${lastSnapshot.id}`}>no. {lastSnapshot.number}</Link> on {dayOf(lastSnapshot.frozenAt)}.
          </>
        ) : null}
      </p>
    </div>
  );
}
