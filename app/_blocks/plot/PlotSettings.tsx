"use client";

import { Button } from "@/app/_ui/Button";
import { Popover } from "@/app/_ui/Popover";
import { Select } from "@/app/_ui/Select";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import { readNumber } from "@/app/_blocks/shared/readNumber";
import { useRefusal } from "@/app/_blocks/shared/useRefusal";
import type { Axis, PlotBlock, PlotResult } from "@/cells";
import type { PageEdits } from "@/realtime/document";

type AxisField = "xAxis" | "yAxis";

const kinds = [
  { value: "scatter", label: "ratio scatter" },
  { value: "distribution", label: "distribution by class" },
  { value: "pattern", label: "normalised pattern" },
  { value: "ternary", label: "ternary" },
] as const;

/** Kind of plot and its axes. An end left empty follows the data. */
export function PlotSettings({
  blockKey,
  block,
  result,
  edits,
}: {
  readonly blockKey: string;
  readonly block: PlotBlock;
  readonly result: PlotResult | undefined;
  readonly edits: PageEdits;
}) {
  const [run, refusal] = useRefusal();
  const setAxis = (field: AxisField, change: Partial<Record<keyof Axis, string | number | undefined>>): void => {
    const next = Object.fromEntries(Object.entries({ ...block[field], ...change }).filter(([, value]) => value !== undefined && value !== ""));
    run(() => edits.setField(blockKey, field, Object.keys(next).length === 0 ? undefined : next));
  };
  const end = (field: AxisField, which: "from" | "to") => (
    <CommitField
      label={which}
      mono
      inputMode="decimal"
      placeholder="follows"
      value={block[field]?.[which] === undefined ? "" : String(block[field]?.[which])}
      onCommit={(text) => {
        const read = readNumber(text);
        if ("value" in read) setAxis(field, { [which]: read.value });
        else if ("empty" in read) setAxis(field, { [which]: undefined });
        else run(() => fail(read.problem));
      }}
    />
  );
  return (
    <div className="pt-3 text-margin">
      <Popover label="Axes and kind" trigger={<Button>Axes and kind</Button>}>
        <div className="grid gap-3">
          <Select label="Kind" value={block.plot} options={kinds} onChoose={(plot) => run(() => edits.setField(blockKey, "plot", plot))} />
          {block.plot === "pattern" && (
            <CommitField
              label="Normalised to"
              mono
              placeholder="CI"
              value={block.normalise ?? ""}
              onCommit={(text) => run(() => edits.setField(blockKey, "normalise", text.trim() === "" ? undefined : text.trim()))}
            />
          )}
          {block.plot === "pattern" && (
            <CommitField
              label="Relative to"
              mono
              placeholder="Si"
              hint="Divides every value first. Left empty, concentrations are compared."
              value={block.per ?? ""}
              onCommit={(text) => run(() => edits.setField(blockKey, "per", text.trim() === "" ? undefined : text.trim()))}
            />
          )}
          {block.plot === "pattern" && (
            <Select
              label="Elements stand"
              value={Array.isArray(block.order) ? "typed" : (block.order ?? "condensation temperature")}
              options={orders}
              onChoose={(next) =>
                run(() =>
                  edits.setField(blockKey, "order", next === "typed" ? [...(result?.columns ?? []).map(({ of }) => of).filter((of) => of.length <= 3)] : next),
                )
              }
            />
          )}
          {block.plot === "pattern" && Array.isArray(block.order) && (
            <CommitField
              label="Order, parted by commas"
              mono
              placeholder="Al, Ca, Mg, Si"
              value={block.order.join(", ")}
              onCommit={(text) =>
                run(() =>
                  edits.setField(
                    blockKey,
                    "order",
                    text
                      .split(",")
                      .map((t) => t.trim())
                      .filter((t) => t !== ""),
                  ),
                )
              }
            />
          )}
          {axesOf(block).map((field) => (
            <fieldset key={field} className="grid grid-cols-2 gap-x-3 gap-y-2">
              <legend className="pb-1 font-medium">{field === "xAxis" ? "Across" : "Upwards"}</legend>
              <CommitField
                label="Label"
                className="col-span-2"
                placeholder="as the expression"
                value={block[field]?.label ?? ""}
                onCommit={(label) => setAxis(field, { label: label.trim() })}
              />
              {end(field, "from")}
              {end(field, "to")}
              {!(block.plot === "pattern" && field === "xAxis") && (
                <Select
                  label="Scale"
                  className="col-span-2"
                  value={block[field]?.scale ?? "linear"}
                  options={scales}
                  onChoose={(next) => setAxis(field, { scale: next === "linear" ? undefined : next })}
                />
              )}
            </fieldset>
          ))}
          {refusal !== null && (
            <p role="alert" className="text-vermilion">
              {refusal}
            </p>
          )}
        </div>
      </Popover>
    </div>
  );
}

/** Axes that have settings: a triangle's are its corners, and the rows of a distribution are its classes. */
function axesOf({ plot }: PlotBlock): readonly AxisField[] {
  if (plot === "ternary") return [];
  return plot === "distribution" ? ["xAxis"] : ["xAxis", "yAxis"];
}

const orders = [
  { value: "condensation temperature", label: "at their condensation temperature" },
  { value: "condensation order", label: "evenly, most refractory first" },
  { value: "typed", label: "in an order of your own" },
] as const;

const scales = [
  { value: "linear", label: "linear" },
  { value: "log", label: "logarithmic" },
] as const;

function fail(sentence: string): never {
  throw new Error(sentence);
}
