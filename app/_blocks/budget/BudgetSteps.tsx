"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { IconButton } from "@/app/_ui/IconButton";
import { IconClose, IconDown, IconUp } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";
import { Popover } from "@/app/_ui/Popover";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import { changeEntry, dropEntry, shiftEntry } from "@/app/_blocks/shared/entries";
import { useRefusal } from "@/app/_blocks/shared/useRefusal";
import type { BudgetBlock, BudgetResult, Step } from "@/cells";
import { phraseText, sharedBasis, stepPhrase, substanceName, targetPhrase, type Phrase } from "./budgetWords";
import { newStep, stepKinds } from "./newStep";
import { StepFields } from "./StepFields";
import { SubstanceFields } from "./SubstanceFields";
import { TargetFields } from "./TargetFields";

function Words({ phrase }: { readonly phrase: Phrase }) {
  return phrase.map((part, i) =>
    typeof part === "string" ? (
      <span key={i}>{part}</span>
    ) : (
      <b key={i} className="font-medium text-ink">
        {part.name}
      </b>
    ),
  );
}

export interface BudgetStepsProps {
  readonly blockKey: string;
  readonly block: BudgetBlock;
  readonly result: BudgetResult | undefined;
  readonly view: PageView;
}

/** Start, steps and target as one line of words; each phrase opens its fields where the page may be edited. */
export function BudgetSteps({ blockKey, block, result, view }: BudgetStepsProps) {
  const [run, refusal] = useRefusal();
  const [open, setOpen] = useState<number | null>(null);
  const edits = view.mode === "edit" ? view.edits : null;
  const form = view.settings.uncertainty;
  const problem = (field: string): string | null =>
    result?.problems.find((p) => p.field === field || p.field?.startsWith(`${field}.`) === true || p.field?.startsWith(`${field}[`) === true)?.text ?? null;
  const start: Phrase = ["start ", { name: substanceName(block.start, view.bodies) }];
  const target: Phrase =
    block.target === undefined
      ? ["no target"]
      : targetPhrase(block.target, view.bodies, sharedBasis(result?.report.filter((r) => r.target !== null) ?? []), form);
  const phrases = block.steps.map((step) => stepPhrase(step, view.bodies, form));
  if (edits === null) {
    return (
      <p className="flex flex-wrap gap-x-5 text-margin leading-5 text-second">
        {[start, ...phrases, ...(block.target === undefined ? [] : [target])].map((phrase, i) => (
          <span key={i}>
            <Words phrase={phrase} />
          </span>
        ))}
      </p>
    );
  }
  const words = "text-margin !inline text-second hover:text-indigo";
  const change = (index: number, shown: Step, next: Step): void => {
    run(() => changeEntry(edits, blockKey, "steps", index, shown, next));
  };
  const mayAlsoSolve = !block.steps.some((s) => s.amount === "solve" || (typeof s.amount === "object" && "from" in s.amount));
  return (
    <div className="text-margin leading-5">
      <ul className="flex flex-wrap items-baseline gap-x-5">
        <li>
          <Popover
            label="Start"
            trigger={
              <Button look="quiet" className={words} aria-label={`Change: ${phraseText(start)}`}>
                <Words phrase={start} />
              </Button>
            }
          >
            <SubstanceFields
              label="The budget starts at"
              what={block.start}
              view={view}
              problem={problem("start")}
              onChange={(next) => run(() => edits.setField(blockKey, "start", next))}
            />
          </Popover>
        </li>
        {block.steps.map((step, index) => {
          const phrase = phrases[index] ?? [];
          const said = phraseText(phrase);
          return (
            <li key={index}>
              <Popover
                label={said}
                open={open === index}
                onOpenChange={(next) => setOpen(next ? index : null)}
                trigger={
                  <Button look="quiet" className={words} aria-label={`Change: ${said}`}>
                    <Words phrase={phrase} />
                  </Button>
                }
              >
                <StepFields
                  step={step}
                  view={view}
                  problem={problem(`steps.${index}`) ?? problem(`steps[${index}]`)}
                  onChange={(next) => change(index, step, next)}
                />
                <div className="mt-3 flex gap-3 border-t border-hairline pt-2">
                  <IconButton
                    look="quiet"
                    label="Earlier"
                    disabled={index === 0}
                    onClick={() => run(() => shiftEntry(edits, blockKey, "steps", index, step, -1))}
                  >
                    <IconUp />
                  </IconButton>
                  <IconButton
                    look="quiet"
                    label="Later"
                    disabled={index === block.steps.length - 1}
                    onClick={() => run(() => shiftEntry(edits, blockKey, "steps", index, step, 1))}
                  >
                    <IconDown />
                  </IconButton>
                  <IconButton
                    look="danger"
                    label="Take this step away"
                    className="ml-auto"
                    onClick={() => {
                      setOpen(null);
                      run(() => dropEntry(edits, blockKey, "steps", index, step));
                    }}
                  >
                    <IconClose />
                  </IconButton>
                </div>
              </Popover>
            </li>
          );
        })}
        <li>
          <Popover
            label="Target"
            trigger={
              <Button look="quiet" className={words} aria-label={`Change: ${phraseText(target)}`}>
                <Words phrase={target} />
              </Button>
            }
          >
            <TargetFields
              target={block.target}
              view={view}
              problem={problem("target")}
              onChange={(next) => run(() => edits.setField(blockKey, "target", next))}
            />
          </Popover>
        </li>
      </ul>
      <div className="mt-1 mb-2 flex flex-wrap gap-x-5">
        <Menu
          align="start"
          items={stepKinds.map(({ kind, label }) => ({
            label,
            opens: true,
            disabled: kind === "share with metal" && block.steps.some((s) => s.do === kind),
            onChoose: () => {
              if (run(() => edits.putEntry(blockKey, "steps", newStep(kind, mayAlsoSolve && block.target !== undefined)))) setOpen(block.steps.length);
            },
          }))}
        >
          <Button className="text-margin">Add a step</Button>
        </Menu>
        <Popover label="Reported ratios" trigger={<Button className="text-margin">Reported ratios</Button>}>
          <CommitField
            label="Reported, parted by commas"
            mono
            placeholder="Mg / Si, Al / Si"
            value={(block.report ?? []).join(", ")}
            problem={problem("report")}
            onCommit={(text) => run(() => edits.setField(blockKey, "report", splitExpressions(text)))}
          />
        </Popover>
      </div>
      {refusal !== null && (
        <p role="alert" className="text-vermilion">
          {refusal}
        </p>
      )}
    </div>
  );
}

/** Parts a list of expressions at its commas, but not at those inside brackets: `norm(Na / Si, CI), Mg / Si` is two. */
export function splitExpressions(text: string): string[] {
  const parts: string[] = [];
  let depth = 0;
  let current = "";
  for (const c of text) {
    if (c === "(") depth++;
    if (c === ")") depth--;
    if (c === "," && depth <= 0) {
      parts.push(current);
      current = "";
    } else current += c;
  }
  return [...parts, current].map((p) => p.trim()).filter((p) => p !== "");
}
