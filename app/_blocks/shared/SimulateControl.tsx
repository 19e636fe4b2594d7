"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { Progress } from "@/app/_ui/Progress";
import { USUAL_WISH, type SimulationWish } from "@/cells";
import { CommitField } from "./CommitField";
import { readNumber } from "./readNumber";
import { wishInWords } from "./simulatedWords";
import { useRefusal } from "./useRefusal";

export interface SimulateControlProps {
  readonly blockKey: string;
  readonly handle: string;
  readonly wish: SimulationWish | undefined;
  readonly view: PageView;
}

/** A field within a sentence: its label before it. */
const inline = "flex items-baseline gap-2 [&_input]:py-0";

/** Whether a block draws its inputs as well, with how many draws and which seed, and how far that is. */
export function SimulateControl({ blockKey, handle, wish, view }: SimulateControlProps) {
  const { edits } = view;
  const [run, refusal] = useRefusal();
  const [problem, setProblem] = useState<string | null>(null);
  const progress = view.simulating?.get(handle);
  const set = (simulate: SimulationWish | undefined): void => void run(() => edits?.setField(blockKey, "simulate", simulate));
  const put = (part: keyof SimulationWish, text: string): void => {
    const read = readNumber(text);
    if (!("value" in read) || !Number.isInteger(read.value)) return setProblem("Write a whole number.");
    setProblem(null);
    set({ ...USUAL_WISH, ...wish, [part]: read.value });
  };
  const share = progress === undefined || progress.total === 0 ? 0 : progress.done / progress.total;
  return (
    <div className="mt-3 text-margin text-second">
      {progress !== undefined && !progress.isStopped && (
        <Progress label="Simulating; what stands here is of first order" done={share} onStop={() => view.stopSimulation?.(handle, true)} />
      )}
      {progress?.isStopped === true && (
        <p>
          The simulation was stopped at {Math.floor(share * 100)} %; what stands here is of first order.{" "}
          <Button className="text-margin" onClick={() => view.stopSimulation?.(handle, false)}>
            Go on
          </Button>
        </p>
      )}
      {edits === null && wish !== undefined && <p>Simulated beside first order: {wishInWords(wish)}.</p>}
      {edits !== null && wish === undefined && (
        <Button className="text-margin" onClick={() => set(USUAL_WISH)}>
          Simulate
        </Button>
      )}
      {edits !== null && wish !== undefined && (
        <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
          <span>Simulation:</span>
          <CommitField
            className={`${inline} [&_input]:w-12`}
            label="draws"
            mono
            inputMode="decimal"
            value={String(wish.draws)}
            onCommit={(text) => put("draws", text)}
          />
          <CommitField
            className={`${inline} [&_input]:w-20`}
            label="seed"
            mono
            inputMode="decimal"
            value={String(wish.seed)}
            onCommit={(text) => put("seed", text)}
          />
          <Button look="quiet" className="text-margin" onClick={() => set(undefined)}>
            Do not simulate
          </Button>
        </div>
      )}
      {(problem ?? refusal) !== null && (
        <p role="alert" className="mt-1 text-vermilion">
          {problem ?? refusal}
        </p>
      )}
    </div>
  );
}
