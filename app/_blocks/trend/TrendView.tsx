"use client";

import { Fragment, useMemo, type ReactNode } from "react";
import type { BlockViewProps } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { formatNumber, formatP, formatValue, powerOfTen } from "@/app/_ui/concise";
import { Popover } from "@/app/_ui/Popover";
import { pickedIndices } from "@/app/_blocks/shared/picks";
import { SimulateControl } from "@/app/_blocks/shared/SimulateControl";
import { resultOf, tableOf } from "@/app/_blocks/shared/tableOf";
import { useRefusal } from "@/app/_blocks/shared/useRefusal";
import { sentence } from "@/app/_blocks/shared/words";
import { Asked } from "@/app/_blocks/trace/Asked";
import type { BodyDistance, RowId, TrendBlock } from "@/cells";
import { LeaveOut } from "./LeaveOut";
import { MswdRuler } from "./MswdRuler";
import { ResidualStrip } from "./ResidualStrip";
import { TrendSettings } from "./TrendSettings";
import { equationOf, mswdPlace, probabilityInWords, samplesOfFit, trendSimulated } from "./trendWords";

export { stateInWords } from "./trendWords";

function Row({ head, children }: { readonly head: string; readonly children: ReactNode }) {
  return (
    <>
      <dt className="text-second">{head}</dt>
      <dd>{children}</dd>
    </>
  );
}

function AskedText({ text, label, onAsk }: { readonly text: string; readonly label: string; onAsk(): void }) {
  return (
    <Asked label={`${label}, ${text}`} onAsk={onAsk}>
      {text}
    </Asked>
  );
}

const grid = "grid grid-cols-[88px_1fr] gap-y-1 text-margin leading-5 max-[719px]:grid-cols-[72px_1fr]";

function small(value: number): string {
  if (value === 0 || (Math.abs(value) >= 1e-3 && Math.abs(value) < 1e4)) return formatNumber(value, 2);
  const [mantissa = "0", exponent = "0"] = value.toExponential(1).split("e");
  return mantissa.replace("-", "−") + powerOfTen(Number(exponent));
}

/** The nearest bodies, each distance to be asked where it comes from. */
function Distances({ all, from, onAsk }: { readonly all: readonly BodyDistance[]; readonly from: "line" | "crossing"; onAsk(name: string): void }) {
  const nearest = [...all].sort((a, b) => a.distance - b.distance).slice(0, 4);
  return nearest.map((b, i) => (
    <Fragment key={b.body}>
      {i > 0 && "; "}
      {b.body}{" "}
      <Asked
        label={`the distance of ${b.body} from the ${from}, ${b.distance.toFixed(1)}σ`}
        onAsk={() => onAsk(from === "line" ? `from_${b.body}` : `crossing.from_${b.body}`)}
      >
        {b.distance.toFixed(1)}σ
      </Asked>{" "}
      away, <span className="whitespace-nowrap">p {formatP(b.p)}</span>
    </Fragment>
  ));
}

/** A trend: its line, how well the points keep to it, where it crosses another, and each sample's residual. */
export function TrendView({ blockKey, block, view }: BlockViewProps<TrendBlock>) {
  const [run, refusal] = useRefusal();
  const result = resultOf(view.results, block.id, "trend");
  const table = tableOf(view.results, block.data);
  const picked = useMemo(() => pickedIndices(table, view.picked), [table, view.picked]);
  const edits = view.mode === "edit" ? view.edits : null;
  const form = view.settings.uncertainty;
  const equation = result === undefined ? null : equationOf(result);
  const ask = (name: string): void => view.trace({ block: block.id, name });
  const leaveOut = (samples: readonly { readonly row: RowId; readonly sample: string }[], reason: string): void => {
    if (edits === null) return;
    run(() => {
      for (const { row, sample } of samples) edits.putEntry(blockKey, "leaveOut", { row, ...(sample === "" ? {} : { sample }), reason });
    });
  };
  const pickedPoints = (result?.points ?? []).filter((p) => picked.includes(p.index));
  const errors = (result?.problems ?? []).filter((p) => p.severity !== "note");
  return (
    <div className="min-w-0">
      {result === undefined && <p className="text-second">Calculating for the first time.</p>}
      {equation !== null && result !== undefined && (
        <p className="py-1 font-serif text-equation max-[719px]:text-[19px]">
          {equation.y} = <AskedText label="the slope" text={formatValue(equation.slope.value, equation.slope.sigma, { form })} onAsk={() => ask("slope")} />{" "}
          {equation.x} {equation.sign}{" "}
          <AskedText label="the intercept" text={formatValue(equation.intercept.value, equation.intercept.sigma, { form })} onAsk={() => ask("intercept")} />
          {equation.withScatter && <span className="ml-2 text-[0.76em] text-second">{block.scatter === "root mswd" ? "σ × √MSWD" : "σ with scatter"}</span>}
        </p>
      )}
      {errors.map((p, index) => (
        <p key={index} className={p.severity === "error" ? "py-1 text-vermilion" : "pt-1 pb-2 text-margin text-second"}>
          {p.text}
        </p>
      ))}
      {result?.ok && result.mswd !== undefined && result.mswdExpected !== undefined && (
        <>
          <dl className={grid}>
            <Row head="MSWD">
              <span className="font-mono">
                <AskedText text={result.mswd.toFixed(2)} label="the MSWD" onAsk={() => ask("mswd")} />
              </span>{" "}
              {mswdPlace(result.mswd, result.mswdExpected)} the{" "}
              <span className="font-mono">{`${result.mswdExpected[0].toFixed(2)}–${result.mswdExpected[1].toFixed(2)}`}</span> expected of n = {result.n} (95 %)
            </Row>
          </dl>
          <MswdRuler mswd={result.mswd} expected={result.mswdExpected} />
        </>
      )}
      {result?.ok && (
        <dl className={grid}>
          {result.p !== undefined && (
            <Row head="p(χ²)">
              <AskedText text={formatP(result.p)} label="the probability" onAsk={() => ask("p")} />
              {probabilityInWords(result).slice(formatP(result.p).length)}
              {(result.scatter ?? 0) > 0 && (
                <>
                  {" "}
                  <Button className="text-margin" onClick={() => ask("scatter")}>
                    Trace the scatter
                  </Button>
                </>
              )}
            </Row>
          )}
          <Row head="n">
            <span className="font-mono">{result.n}</span>
            {samplesOfFit(result) === "" ? "" : `, ${samplesOfFit(result)}`}
          </Row>
          {result.usesScatter && result.slope !== undefined && (
            <Row head="errors alone">{`slope ${formatValue(result.slope.byErrorsAlone ?? result.slope.value, result.slope.sigma, { form })}`}</Row>
          )}
          {result.covariance !== undefined && (
            <Row head="covariance">
              <span className="font-mono">
                <AskedText
                  text={small(result.usesScatter ? (result.covarianceWithScatter ?? result.covariance) : result.covariance)}
                  label="the covariance"
                  onAsk={() => ask("covariance")}
                />
              </span>
              , slope with intercept
            </Row>
          )}
          {result.crossing !== undefined && (
            <Row head={`crosses ${result.crossing.with}`}>
              <span className="font-mono text-cell leading-5">
                <AskedText
                  text={formatValue(result.crossing.x.value, result.crossing.x.sigma, { form })}
                  label="the crossing across"
                  onAsk={() => ask("crossing.x")}
                />
                ,{" "}
                <AskedText
                  text={formatValue(result.crossing.y.value, result.crossing.y.sigma, { form })}
                  label="the crossing upwards"
                  onAsk={() => ask("crossing.y")}
                />
              </span>
              {result.crossing.fromBodies.length > 0 && (
                <>
                  ; <Distances all={result.crossing.fromBodies} from="crossing" onAsk={ask} />
                </>
              )}
              {result.crossing.region === "simulated" ? "; the slopes are too alike for an ellipse, its region is simulated" : ""}
            </Row>
          )}
          {(result.simulated === undefined ? [] : trendSimulated(result)).map(({ head, text }) => (
            <Row key={head} head={head}>
              {text}
            </Row>
          ))}
          {result.fromBodies.length > 0 && (
            <Row head="from line">
              <Distances all={result.fromBodies} from="line" onAsk={ask} />
            </Row>
          )}
        </dl>
      )}
      {result?.ok && (
        <ResidualStrip
          result={result}
          table={table}
          picked={picked}
          view={view}
          onLeaveOut={edits === null ? undefined : (point, reason) => leaveOut([point], reason)}
        />
      )}
      {result?.ok && <SimulateControl blockKey={blockKey} handle={block.id} wish={block.simulate} view={view} />}
      {(block.leaveOut ?? []).length > 0 && (
        <ul className="mt-2 text-margin text-second" aria-label="Left out of this fit">
          {(block.leaveOut ?? []).map((entry) => (
            <li key={String(entry.row)}>
              <b className="font-medium text-ink">{entry.sample ?? `row ${entry.row}`}</b> left out: {sentence(entry.reason)}{" "}
              {edits !== null && (
                <Button aria-label={`Put back ${entry.sample ?? `row ${entry.row}`}`} onClick={() => run(() => edits.removeEntry(blockKey, "leaveOut", entry))}>
                  Put back
                </Button>
              )}
            </li>
          ))}
        </ul>
      )}
      {edits !== null && (
        <div className="mt-2 flex flex-wrap gap-x-6 gap-y-1 text-margin">
          <TrendSettings block={block} result={result} view={view} onSet={(field, value) => run(() => edits.setField(blockKey, field, value))} />
          {pickedPoints.length > 0 && (
            <Popover label="Leave picked samples out" trigger={<Button>{`Leave ${pickedPoints.length} picked out`}</Button>}>
              <LeaveOut
                what={pickedPoints.length === 1 ? (pickedPoints[0]?.sample ?? "") : `each of the ${pickedPoints.length} picked`}
                onLeaveOut={(reason) => leaveOut(pickedPoints, reason)}
              />
            </Popover>
          )}
        </div>
      )}
      {refusal !== null && (
        <p role="alert" className="mt-1 text-margin text-vermilion">
          {refusal}
        </p>
      )}
    </div>
  );
}
