"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { classNames } from "@/app/_ui/classNames";
import { IconButton } from "@/app/_ui/IconButton";
import { IconClose, IconDown, IconEye, IconEyeClosed, IconUp } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";
import { Popover } from "@/app/_ui/Popover";
import { changeEntry, dropEntry, shiftEntry } from "@/app/_blocks/shared/entries";
import { useRefusal } from "@/app/_blocks/shared/useRefusal";
import type { Drawn, PlotBlock, PlotResult } from "@/cells";
import { DrawnEditor } from "./DrawnEditor";
import { newDrawn } from "./newDrawn";
import { drawnInWords } from "./plotWords";

export interface DrawnListProps {
  readonly blockKey: string;
  readonly block: PlotBlock;
  readonly result: PlotResult | undefined;
  readonly view: PageView;
  /** Where a new annotation stands. */
  readonly middle?: { readonly x: number; readonly y: number } | undefined;
}

/** What is drawn, top first: each line with its eye, its place, and what it is. */
export function DrawnList({ blockKey, block, result, view, middle }: DrawnListProps) {
  const [run, refusal] = useRefusal();
  const [open, setOpen] = useState<number | null>(null);
  const edits = view.mode === "edit" ? view.edits : null;
  const topFirst = block.drawn.map((drawn, index) => ({ drawn, index })).reverse();
  const problemOf = (index: number, field: string): string | null =>
    result?.problems.find((p) => p.field === `drawn[${index}].${field}` || p.field === `drawn.${index}.${field}`)?.text ?? null;
  const change = (index: number, shown: Drawn, next: Drawn): void => {
    if (edits !== null) run(() => changeEntry(edits, blockKey, "drawn", index, shown, next));
  };
  return (
    <div className="min-w-0 pt-3 text-margin">
      <h3 className="border-b border-ink pb-2 font-normal text-second">What is drawn, top first</h3>
      <ol>
        {topFirst.map(({ drawn, index }) => {
          const layer = result?.layers.find((l) => l.drawn === index);
          const words = drawnInWords(drawn, layer, block.plot);
          const toggled: Drawn = drawn.hidden === true ? ((({ hidden: _, ...rest }) => rest)(drawn) as Drawn) : { ...drawn, hidden: true };
          return (
            <li
              key={index}
              className={classNames(
                "group relative grid grid-cols-[28px_1fr_auto] gap-x-1 border-b border-hairline pt-1.5 pb-[5px]",
                drawn.hidden && "text-second",
              )}
            >
              {edits === null ? (
                <span className="text-second">{drawn.hidden ? <IconEyeClosed size={18} /> : <IconEye size={18} />}</span>
              ) : (
                <IconButton
                  look="quiet"
                  label={`${drawn.hidden ? "Show" : "Hide"} ${words.title}`}
                  aria-pressed={!drawn.hidden}
                  className="self-start"
                  onClick={() => change(index, drawn, toggled)}
                >
                  {drawn.hidden ? <IconEyeClosed size={18} /> : <IconEye size={18} />}
                </IconButton>
              )}
              <span className="min-w-0">
                {edits === null ? (
                  words.title
                ) : (
                  <Popover
                    label={words.title}
                    open={open === index}
                    onOpenChange={(next) => setOpen(next ? index : null)}
                    trigger={
                      <Button look="plain" className="text-margin hover:text-indigo">
                        {words.title}
                      </Button>
                    }
                  >
                    <DrawnEditor
                      drawn={drawn}
                      view={view}
                      plot={block.plot}
                      problemOf={(field) => problemOf(index, field)}
                      onChange={(next) => change(index, drawn, next)}
                    />
                  </Popover>
                )}
                <span className="block break-words text-second">{words.says}</span>
              </span>
              <span className="text-second">{words.count}</span>
              {edits !== null && (
                // Shown where the pointer or the focus is; always there for fingers.
                <span className="absolute top-0 right-0 flex gap-1 bg-paper pl-1 opacity-0 group-focus-within:opacity-100 group-hover:opacity-100 [@media(hover:none)]:static [@media(hover:none)]:col-start-2 [@media(hover:none)]:opacity-100">
                  <IconButton
                    look="quiet"
                    label={`Move ${words.title} up`}
                    disabled={index === block.drawn.length - 1}
                    onClick={() => run(() => shiftEntry(edits, blockKey, "drawn", index, drawn, 1))}
                  >
                    <IconUp />
                  </IconButton>
                  <IconButton
                    look="quiet"
                    label={`Move ${words.title} down`}
                    disabled={index === 0}
                    onClick={() => run(() => shiftEntry(edits, blockKey, "drawn", index, drawn, -1))}
                  >
                    <IconDown />
                  </IconButton>
                  <IconButton look="quiet" label={`Take ${words.title} away`} onClick={() => run(() => dropEntry(edits, blockKey, "drawn", index, drawn))}>
                    <IconClose />
                  </IconButton>
                </span>
              )}
            </li>
          );
        })}
      </ol>
      {edits !== null && (
        <div className="pt-2">
          <Menu
            align="start"
            items={newDrawn(
              block,
              view.blocks.map((b) => b.block),
              Object.keys(view.bodies),
              middle,
            ).map(({ label, drawn }) => ({
              label,
              opens: true,
              onChoose: () => {
                if (run(() => edits.putEntry(blockKey, "drawn", drawn))) setOpen(block.drawn.length);
              },
            }))}
          >
            <Button>Draw more</Button>
          </Menu>
        </div>
      )}
      {refusal !== null && (
        <p role="alert" className="mt-1 text-vermilion">
          {refusal}
        </p>
      )}
    </div>
  );
}
