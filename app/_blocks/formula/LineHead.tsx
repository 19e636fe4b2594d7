"use client";

import { useDeferredValue } from "react";
import type { PageView } from "@/app/_page/contract";
import { classNames } from "@/app/_ui/classNames";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { formatValue, withUnit } from "@/app/_ui/concise";
import type { LineResult, Table } from "@/cells";
import { Asked } from "@/app/_blocks/trace/Asked";
import { countsText, natureText, rangeText } from "./headWords";
import { lineSimulated } from "@/app/_blocks/shared/simulatedWords";
import type { FormulaLine } from "./lines";
import { LineStrip } from "./LineStrip";

export interface LineHeadProps {
  readonly block: string;
  readonly line: FormulaLine;
  /** undefined for a line the engine has not seen yet. */
  readonly result: LineResult | undefined;
  readonly table: Table | undefined;
  readonly picked: readonly number[];
  readonly view: PageView;
  readonly reachesMargin: boolean;
  /** True while the line says something newer than its result. */
  readonly isStale: boolean;
}

/** The small heading over a formula line: its result first, the reasoning stands under it. */
export function LineHead({ block, line, result, table, picked, view, reachesMargin, isStale }: LineHeadProps) {
  const form = view.settings.uncertainty;
  // A strip of many samples may come a moment after its words: typing goes first.
  const drawn = useDeferredValue(result);
  const isSingle = result !== undefined && result.ok && !result.perSample && result.byClass === undefined;
  const range = result === undefined ? "" : rangeText(result, form);
  return (
    <div className={classNames("pt-3 font-sans text-ui text-ink", line.ordinal > 0 && "mt-4 border-t border-hairline")}>
      <div className={classNames("flex flex-wrap items-baseline gap-x-4 leading-6 transition-opacity delay-300 duration-200", isStale && "opacity-60")}>
        <b className="font-mono text-result font-medium">{line.name}</b>
        {isSingle ? (
          <Asked label={`${line.name}, ${range}`} className="font-mono text-result" onAsk={() => view.trace({ block, name: line.name })}>
            {range}
          </Asked>
        ) : (
          <span className={classNames("font-mono text-result", result !== undefined && !result.ok && "text-vermilion")}>{range}</span>
        )}
        <span className="text-margin text-second max-[719px]:basis-full">
          {result === undefined ? (view.mode === "edit" ? "calculating" : "") : natureText(result)}
        </span>
        <span className="ml-auto text-margin text-second max-[719px]:ml-0 max-[719px]:basis-full">{result === undefined ? "" : countsText(result)}</span>
      </div>
      {result !== undefined && lineSimulated(result) !== "" && <p className="pb-1.5 text-margin text-second">{lineSimulated(result)}</p>}
      {result?.ok && drawn?.ok && (drawn.perSample || drawn.byClass !== undefined) && (
        <LineStrip block={block} line={drawn} table={table} picked={picked} view={view} reachesMargin={reachesMargin} />
      )}
      {result?.ok && result.byClass !== undefined && (
        <dl className="flex flex-wrap gap-x-6 text-margin">
          {result.byClass.map((name, index) => (
            <div key={name} className="flex items-baseline gap-1.5">
              <dt className="text-second">
                <ClassMarker index={name === "" ? -1 : view.classIndex(name)} className="mr-1.5" />
                {name === "" ? "no class" : name}
              </dt>
              <dd className="font-mono">
                <ClassValue
                  label={`${line.name} of ${name === "" ? "no class" : name}`}
                  text={withUnit(formatValue(result.value[index] ?? NaN, result.sigma[index] ?? NaN, { form }), result.unit)}
                  onAsk={() => view.trace({ block, name: line.name, index })}
                />
              </dd>
            </div>
          ))}
        </dl>
      )}
    </div>
  );
}

function ClassValue({ label, text, onAsk }: { readonly label: string; readonly text: string; onAsk(): void }) {
  return (
    <Asked label={`${label}, ${text}`} onAsk={onAsk}>
      {text}
    </Asked>
  );
}
