"use client";

import type { BlockViewProps } from "@/app/_page/contract";
import { formatNumber, formatValue, withUnit } from "@/app/_ui/concise";
import { quantilesInWords } from "@/app/_blocks/shared/simulatedWords";
import { SimulateControl } from "@/app/_blocks/shared/SimulateControl";
import { resultOf } from "@/app/_blocks/shared/tableOf";
import { Asked } from "@/app/_blocks/trace/Asked";
import type { BudgetBlock, BudgetResult } from "@/cells";
import { BudgetBars } from "./BudgetBars";
import { BudgetSteps } from "./BudgetSteps";
import { verdictOf } from "./budgetWords";
import { CompilationChart } from "./CompilationChart";
import { ReportTable } from "./ReportTable";

export { stateInWords } from "./budgetWords";

function LeftBehind({ left, onTrace }: { readonly left: NonNullable<BudgetResult["left"]>; onTrace(name: string): void }) {
  const parts = Object.entries(left.composition)
    .filter(([, v]) => v > 0)
    .sort((a, b) => b[1] - a[1]);
  return (
    <details className="mt-2 text-margin">
      <summary className="cursor-pointer">
        <span className="text-second">Left behind: </span>
        {left.what}, <span className="font-mono">{formatNumber(left.mass, 3)}</span> kg per kg
      </summary>
      <dl className="grid grid-cols-[repeat(auto-fill,minmax(120px,1fr))] gap-x-4 pt-1">
        <div className="flex justify-between">
          <dt className="text-second">mass</dt>
          <dd className="font-mono">
            <Asked label={`the mass left behind, ${formatNumber(left.mass, 3)} kg per kg`} onAsk={() => onTrace("left.mass")}>
              {formatNumber(left.mass, 3)}
            </Asked>
          </dd>
        </div>
        {parts.map(([species, v]) => (
          <div key={species} className="flex justify-between">
            <dt className="text-second">{species}</dt>
            <dd className="font-mono">
              <Asked label={`${species} of what was left behind, ${formatNumber(v * 100, 3)} wt%`} onAsk={() => onTrace(`left.${species}`)}>
                {formatNumber(v * 100, 3)} wt%
              </Asked>
            </dd>
          </div>
        ))}
      </dl>
    </details>
  );
}

/** A mass balance: its answer, its steps, where mass and elements went, and what the other ratios say to it. */
export function BudgetView({ blockKey, block, view }: BlockViewProps<BudgetBlock>) {
  const result = resultOf(view.results, block.id, "budget");
  const form = view.settings.uncertainty;
  const solved = result?.ok ? result.solved : undefined;
  const verdict = result === undefined ? null : verdictOf(block, result);
  const problems = (result?.problems ?? []).filter((p) => p.severity !== "note");
  const otherRoots = solved === undefined ? [] : (result?.roots ?? []).filter((root) => root !== solved.value);
  return (
    <div className="min-w-0">
      {result === undefined && <p className="text-second">Calculating for the first time.</p>}
      {solved !== undefined && (
        <p className="font-mono text-solved font-medium max-[719px]:text-trace">
          <Asked
            label={`the solved amount, ${withUnit(formatValue(solved.value, solved.sigma, { form }), solved.unit)}`}
            onAsk={() => view.trace({ block: block.id, name: "solved" })}
          >
            {formatValue(solved.value, solved.sigma, { form })}
          </Asked>
          <small className="ml-2 font-sans text-[14px] font-normal">
            {solved.unit === "1" ? "" : solved.unit} {solved.of}
            {solved.sigma === null ? ", σ unknown" : solved.sigmaIs === undefined ? ", 1σ" : ", 1σ at least"}
          </small>
        </p>
      )}
      {solved !== undefined && result?.simulated?.solved != null && (
        <p className="pb-1.5 text-margin text-second">{quantilesInWords(result.simulated.solved, solved.unit)}</p>
      )}
      {otherRoots.length > 0 && (
        <p className="text-margin text-second">
          Also reached at {otherRoots.map((root) => formatNumber(root, 4)).join(", ")}; the smallest physical amount is taken.
        </p>
      )}
      <BudgetSteps blockKey={blockKey} block={block} result={result} view={view} />
      {block.steps.length > 0 && <SimulateControl blockKey={blockKey} handle={block.id} wish={block.simulate} view={view} />}
      {problems.map((p, index) => (
        <p key={index} className={p.severity === "error" ? "mt-2 text-vermilion" : "mt-2 text-margin text-second"}>
          {p.text}
        </p>
      ))}
      {result?.ok && (
        <>
          <BudgetBars block={block} result={result} />
          <ReportTable block={block} result={result} form={form} onTrace={(name) => view.trace({ block: block.id, name })} />
          {verdict !== null && (
            <p className="mt-2">
              {verdict.before}
              {verdict.against !== "" && <span className="text-vermilion">{verdict.against}</span>}
              {verdict.after}
            </p>
          )}
          <CompilationChart result={result} bodies={view.bodies} form={form} />
          {result.left !== undefined && <LeftBehind left={result.left} onTrace={(name) => view.trace({ block: block.id, name })} />}
        </>
      )}
      {block.steps.length === 0 && (
        <p className="mt-2 text-second">{view.mode === "edit" ? "No step yet. Add one, and say what it must reach." : "This budget has no steps."}</p>
      )}
    </div>
  );
}
