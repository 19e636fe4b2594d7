"use client";

import { useEffect, useState, type ReactNode } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { Dialog } from "@/app/_ui/Dialog";
import { tableOf } from "@/app/_blocks/shared/tableOf";
import type { Nearest, NearestOne } from "@/cells";
import { missingInWords, nearestInWords } from "./nearestWords";

export interface NearestDialogProps {
  readonly block: string;
  /** Index of the row in the table. */
  readonly index: number;
  readonly sample: string;
  readonly view: PageView;
  readonly onClose: () => void;
}

type Answer = "asked" | Nearest | null;

/** Bodies and samples whose ratios of elements are most like those of one sample. */
export function NearestDialog({ block, index, sample, view, onClose }: NearestDialogProps) {
  const [answer, setAnswer] = useState<Answer>("asked");
  // Asked once, of the page as it was when the sheet opened: what it shows does not jump while somebody reads it.
  const [nearest] = useState(() => view.nearest);
  useEffect(() => {
    let mine = true;
    const ask = nearest?.({ block, index }) ?? Promise.resolve(null);
    ask.then(
      (found) => mine && setAnswer(found),
      () => mine && setAnswer(null),
    );
    return () => {
      mine = false;
    };
  }, [nearest, block, index]);
  return (
    <Dialog open onClose={onClose} size="wide" title={`Nearest to ${sample}`} says={nearestInWords(answer)}>
      {answer === "asked" || answer === null ? null : (
        <div className="grid gap-8 min-[720px]:grid-cols-2">
          <List title="Bodies" all={answer.bodies} said={(one) => one.of} />
          <List
            title="Samples"
            all={answer.samples}
            said={(one) => <OfTable one={one} view={view} />}
            onShow={(one) => {
              onClose();
              if (one.row !== undefined) view.show?.({ block: one.of, row: one.row });
            }}
          />
        </div>
      )}
    </Dialog>
  );
}

/** The class of a sample, with its marker, and the table that it is of. */
function OfTable({ one: { of, row }, view }: { readonly one: NearestOne; readonly view: PageView }) {
  const table = tableOf(view.results, of);
  const name = row === undefined ? "" : (table?.classes[table.rowIds.indexOf(row)] ?? "");
  return (
    <>
      {name === "" ? null : (
        <span className="mr-2">
          <ClassMarker index={view.classIndex(name)} className="mr-1.5" />
          {name}
        </span>
      )}
      <span className="font-mono">{of}</span>
    </>
  );
}

interface ListProps {
  readonly title: string;
  readonly all: readonly NearestOne[];
  /** What stands beside a name. */
  readonly said: (one: NearestOne) => ReactNode;
  readonly onShow?: (one: NearestOne) => void;
}

function List({ title, all, said, onShow }: ListProps) {
  return (
    <section>
      <h3 className="border-b border-hairline pb-1 font-medium">{title}</h3>
      {all.length === 0 ? <p className="py-2 text-margin text-second">None has three of these elements.</p> : null}
      <ol className="text-margin">
        {all.map((one) => (
          <li key={`${one.of} ${one.row ?? ""} ${one.name}`} className="grid grid-cols-[1fr_auto] gap-x-4 border-b border-hairline py-1">
            <span className="min-w-0">
              {onShow === undefined ? (
                <span className="font-mono">{one.name}</span>
              ) : (
                <Button onClick={() => onShow(one)}>{one.name === "" ? `row ${one.row ?? ""}` : one.name}</Button>
              )}
              <span className="ml-2 text-second">{said(one)}</span>
            </span>
            <span className="font-mono">{one.distance.toFixed(3)}</span>
            {one.missing.length === 0 ? null : <span className="col-span-2 text-second">{missingInWords(one)}</span>}
          </li>
        ))}
      </ol>
    </section>
  );
}
