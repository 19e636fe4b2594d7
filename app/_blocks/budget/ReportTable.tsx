import { Fragment } from "react";
import { classNames } from "@/app/_ui/classNames";
import { formatValue, type UncertaintyForm } from "@/app/_ui/concise";
import { Value } from "@/app/_ui/Value";
import { Asked } from "@/app/_blocks/trace/Asked";
import { quantilesInWords } from "@/app/_blocks/shared/simulatedWords";
import { basisInWords, compactExpression } from "@/app/_blocks/shared/words";
import type { BudgetBlock, BudgetReport, BudgetResult } from "@/cells";
import { isSolvedFor, sharedBasis, targetName } from "./budgetWords";

/** Half the width of the scale of misses, in σ: wide enough for the worst one, in whole steps of 1.5. */
export function missScale(reports: readonly BudgetReport[]): number {
  const worst = reports.reduce((most, r) => Math.max(most, Math.abs(r.miss ?? 0)), 0);
  return Math.min(30, Math.max(4.5, Math.ceil((worst * 1.1) / 1.5) * 1.5));
}

function Miss({ miss, half }: { readonly miss: number; readonly half: number }) {
  const at = (sigma: number): number => 50 + (Math.max(-half, Math.min(half, sigma)) / half) * 50;
  return (
    <svg viewBox="0 0 100 20" preserveAspectRatio="none" width={120} height={20} aria-hidden="true" className="inline-block overflow-visible align-middle">
      <path d="M0 10.5H100" stroke="var(--axis)" vectorEffect="non-scaling-stroke" />
      <path d={`M${at(-2)} 10.5H${at(2)}`} stroke="var(--ink)" strokeWidth={3} vectorEffect="non-scaling-stroke" />
      <path d="M50 5V16" stroke="var(--ink)" vectorEffect="non-scaling-stroke" />
      <path d={`M${at(miss)} 2V19`} stroke={Math.abs(miss) > 2 ? "var(--vermilion)" : "var(--indigo)"} strokeWidth={3} vectorEffect="non-scaling-stroke" />
    </svg>
  );
}

function missText(miss: number): string {
  return `${miss < 0 ? "−" : "+"}${Math.abs(miss).toFixed(1)}σ`;
}

interface SideProps {
  readonly report: BudgetReport;
  readonly side: "start" | "end" | "target";
  readonly sigma: number | null;
  readonly form: UncertaintyForm;
  onTrace(name: string): void;
}

/** One side of a reported expression, to be asked where it comes from. */
function Side({ report, side, sigma, form, onTrace }: SideProps) {
  const value = report[side];
  const shown = <Value value={value} sigma={sigma} form={form} unknown="" />;
  if (value === null) return shown;
  return (
    <Asked
      label={`${report.expression} at the ${side}, ${formatValue(value, sigma, { form, unknown: "" })}`}
      onAsk={() => onTrace(`${report.expression}.${side}`)}
    >
      {shown}
    </Asked>
  );
}

export interface ReportTableProps {
  readonly block: BudgetBlock;
  readonly result: BudgetResult;
  readonly form: UncertaintyForm;
  /** Asks for a reported expression, with its side behind it. */
  onTrace(name: string): void;
}

/** Every reported ratio at the start, at the end and at the target, and by how many σ it misses. */
export function ReportTable({ block, result, form, onTrace }: ReportTableProps) {
  if (result.report.length === 0) return null;
  const half = missScale(result.report);
  const basis = sharedBasis(result.report);
  const hasTarget = result.report.some((r) => r.target !== null);
  const isWhole = block.steps.some((s) => s.do === "share with metal");
  const head = "border-b border-ink pb-1 pl-3 text-right text-margin font-normal text-second max-[719px]:pl-2";
  const plain = "h-7 pl-3 text-right text-cell leading-[23px] max-[719px]:pl-2 max-[719px]:text-[11.5px]";
  // Half a page has no room for the scale of misses; its figures stay.
  const scale = block.width === 4 || block.width === 6 ? "hidden" : "max-[719px]:hidden";
  const columns = hasTarget ? 6 : 3;
  return (
    <table className="mt-3 w-full border-collapse">
      <thead>
        <tr>
          <th scope="col" className={classNames(head, "!pl-0 !text-left")}>
            {basis === "" ? "reported" : basis}
          </th>
          <th scope="col" className={head}>
            start
          </th>
          <th scope="col" className={head}>
            {isWhole ? "whole" : "end"}
          </th>
          {hasTarget && (
            <>
              <th scope="col" className={head}>
                {targetName(block.target)}
              </th>
              <th scope="col" className={classNames(head, scale)}>
                miss, −{half}σ to +{half}σ
              </th>
              <th scope="col" className={head}>
                <span className="sr-only">miss in σ</span>
              </th>
            </>
          )}
        </tr>
      </thead>
      <tbody>
        {result.report.map((r, i) => {
          const drawn = result.simulated?.report[i];
          const said = [drawn == null ? "" : quantilesInWords(drawn, ""), r.note ?? ""].filter((text) => text !== "");
          // What is said of a ratio stands under it, over the whole width, and the line under both.
          const cell = said.length === 0 ? classNames(plain, "border-b border-hairline") : plain;
          return (
            <Fragment key={r.expression}>
              <tr>
                <th scope="row" className={classNames(cell, "!pl-0 !text-left font-sans !text-ui font-normal")}>
                  {compactExpression(r.expression)}
                  {basis === "" && r.basis !== null && <span className="ml-2 text-margin text-second">{basisInWords(r.basis)}</span>}
                </th>
                <td className={cell}>
                  <Side report={r} side="start" sigma={r.startSigma} form={form} onTrace={onTrace} />
                </td>
                <td className={cell}>
                  <button
                    type="button"
                    className="border-b border-transparent hover:border-indigo focus-visible:border-indigo"
                    onClick={() => onTrace(r.expression)}
                    title="Where this number comes from"
                  >
                    <Value value={r.end} sigma={r.sigma} form={form} unknown="" />
                  </button>
                </td>
                {hasTarget && (
                  <>
                    <td className={cell}>
                      <Side report={r} side="target" sigma={r.targetSigma} form={form} onTrace={onTrace} />
                    </td>
                    <td className={classNames(cell, scale)}>
                      {(r.miss !== null || isSolvedFor(r, block.target)) && <Miss miss={isSolvedFor(r, block.target) ? 0 : (r.miss ?? 0)} half={half} />}
                    </td>
                    <td className={classNames(cell, "font-mono whitespace-nowrap")}>
                      {isSolvedFor(r, block.target) && result.solved !== undefined ? (
                        <span className="text-second">solved for</span>
                      ) : r.miss === null ? (
                        <span className="text-second">–</span>
                      ) : (
                        <Asked
                          label={`the miss of ${r.expression}, ${missText(r.miss)}`}
                          className={Math.abs(r.miss) > 2 ? "text-vermilion" : "text-second"}
                          onAsk={() => onTrace(`${r.expression}.miss`)}
                        >
                          {missText(r.miss)}
                        </Asked>
                      )}
                    </td>
                  </>
                )}
              </tr>
              {said.length === 0 ? null : (
                <tr>
                  <td colSpan={columns} className="border-b border-hairline pb-1.5 text-margin text-second">
                    {said.map((text) => (
                      <p key={text}>{text}</p>
                    ))}
                  </td>
                </tr>
              )}
            </Fragment>
          );
        })}
      </tbody>
    </table>
  );
}
