import { formatNumber, formatValue, type UncertaintyForm } from "@/app/_ui/concise";
import { padded } from "@/app/_blocks/shared/scale";
import type { BudgetResult } from "@/cells";
import { compilationName } from "./budgetWords";

/** The solved amount for each pair of compilations at hand: the choice alone moves the answer. */
export function CompilationChart({
  result,
  bodies,
  form,
}: {
  readonly result: BudgetResult;
  readonly bodies: Readonly<Record<string, string>>;
  readonly form: UncertaintyForm;
}) {
  const rows = result.byCompilation;
  const solved = rows.flatMap((r) => (r.solved === null ? [] : [r.solved - (r.sigma ?? 0), r.solved + (r.sigma ?? 0)]));
  if (rows.length < 2 || solved.length === 0) return null;
  const [from, to] = padded(Math.min(...solved), Math.max(...solved), 0.12);
  const at = (v: number): string => (((v - from) / (to - from)) * 100).toFixed(2);
  return (
    <table className="mt-3 w-full text-margin">
      <caption className="sr-only">Solved amount by compilation of the bodies</caption>
      <thead>
        <tr className="text-second">
          <th scope="col" className="w-px pr-4 text-left font-normal whitespace-nowrap">
            by compilation
          </th>
          <th scope="col" className="font-normal">
            <span className="flex justify-between">
              <span>{formatNumber(from, 2)}</span>
              <span>
                {result.solved?.unit === "1" ? "" : result.solved?.unit} {result.solved?.of}
              </span>
              <span>{formatNumber(to, 2)}</span>
            </span>
          </th>
          <td className="pl-4 text-right whitespace-nowrap">{rows.some((row) => row.sigmaIs !== undefined) ? "† 1σ at least" : ""}</td>
        </tr>
      </thead>
      <tbody>
        {rows.map((row) => {
          const name = Object.values(row.bodies).map(compilationName).join(" × ");
          const isPresent = Object.entries(row.bodies).every(([alias, id]) => (bodies[alias] ?? result.bodiesUsed[alias] ?? alias) === id);
          return (
            <tr key={name}>
              <th scope="row" className="pr-4 text-left font-mono text-[11.5px] font-normal whitespace-nowrap">
                {name}
                {isPresent && <span className="sr-only">, used on this page</span>}
              </th>
              <td>
                <svg viewBox="0 0 100 16" preserveAspectRatio="none" width="100%" height="16" aria-hidden="true" className="block overflow-visible">
                  <path d="M0 8.5H100" stroke="var(--hairline)" vectorEffect="non-scaling-stroke" />
                  {row.solved !== null && (
                    <>
                      {row.sigma !== null && (
                        <path
                          d={`M${at(row.solved - row.sigma)} 8.5H${at(row.solved + row.sigma)}`}
                          stroke="var(--ink)"
                          strokeWidth={1.2}
                          vectorEffect="non-scaling-stroke"
                        />
                      )}
                      <path
                        d={`M${at(row.solved)} 3V14`}
                        stroke={isPresent ? "var(--indigo)" : "var(--ink)"}
                        strokeWidth={3}
                        vectorEffect="non-scaling-stroke"
                      />
                    </>
                  )}
                </svg>
              </td>
              <td className="w-px pl-4 text-right font-mono whitespace-nowrap text-second">
                {row.solved === null ? "no answer" : formatValue(row.solved, row.sigma, { form, unknown: "" })}
                {row.sigmaIs !== undefined && "†"}
              </td>
            </tr>
          );
        })}
      </tbody>
    </table>
  );
}
