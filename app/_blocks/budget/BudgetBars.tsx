import { elementName } from "@/app/_blocks/shared/words";
import type { BudgetBlock, BudgetPart, BudgetResult } from "@/cells";

/** Names of the two sides of a balance, by what the budget does. */
export function sidesOf(block: BudgetBlock): { readonly kept: string; readonly left: string; readonly moved: string } {
  const metal = block.steps.find((s) => s.do === "share with metal");
  if (metal?.do === "share with metal") {
    const species = typeof metal.species === "string" ? metal.species : metal.species.join(", ");
    return { kept: "silicate", left: "metal", moved: `${elementName(species)} in metal` };
  }
  if (block.steps.some((s) => s.do === "extract melt")) return { kept: "residue", left: "melt", moved: "" };
  return { kept: "result", left: "taken out", moved: "" };
}

/** The balance as the engine gives it, or of the mass alone, from what was left behind. */
export function balanceOf(result: BudgetResult): readonly BudgetPart[] {
  if (result.balance !== undefined) return result.balance;
  if (result.left === undefined || result.closure === undefined || !(result.left.mass > 0)) return [];
  const both = result.closure.end + result.left.mass;
  return both > 0 ? [{ of: "mass", kept: result.closure.end / both, left: result.left.mass / both }] : [];
}

const hatch = "repeating-linear-gradient(0deg, var(--pattern) 0 1px, transparent 1px 3px)";
const share = (part: number): string => (part * 100).toFixed(part > 0.9995 || part < 0.0005 ? 0 : 1);

/** Where mass and elements lie at the end, as bars of one length. */
export function BudgetBars({ block, result }: { readonly block: BudgetBlock; readonly result: BudgetResult }) {
  const parts = balanceOf(result);
  if (parts.length === 0) return null;
  const sides = sidesOf(block);
  const hasMoved = parts.some((p) => (p.moved ?? 0) > 0);
  return (
    <>
      <dl className="mt-3 mb-1 grid grid-cols-[80px_1fr_auto] items-center gap-x-4 gap-y-1 text-margin max-[719px]:grid-cols-[72px_1fr_auto] max-[719px]:gap-x-2">
        {parts.map((p) => (
          <div key={p.of} className="contents">
            <dt>{elementName(p.of)}</dt>
            <dd aria-hidden="true" className="flex h-4 border border-ink">
              <span style={{ width: `${p.kept * 100}%` }} />
              {p.left > 0 && (
                <span className="relative border-l border-ink" style={{ width: `${p.left * 100}%`, backgroundImage: hatch }}>
                  {(p.moved ?? 0) > 0 && (
                    <span
                      className="absolute inset-y-0 right-0 border-l border-ink bg-indigo"
                      style={{ width: `${Math.min(100, ((p.moved ?? 0) / p.left) * 100)}%` }}
                    />
                  )}
                </span>
              )}
            </dd>
            <dd className="text-right font-mono whitespace-nowrap text-second">
              {share(p.kept)} / {share(p.left)} %
            </dd>
          </div>
        ))}
      </dl>
      <p className="flex flex-wrap gap-x-6 text-margin text-second">
        <Key label={sides.kept} />
        <Key label={sides.left} background={hatch} />
        {hasMoved && sides.moved !== "" && <Key label={sides.moved} background="linear-gradient(var(--indigo), var(--indigo))" />}
      </p>
    </>
  );
}

function Key({ label, background }: { readonly label: string; readonly background?: string }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <span
        aria-hidden="true"
        className="inline-block h-2.5 w-5 border border-ink"
        style={background === undefined ? undefined : { backgroundImage: background }}
      />
      {label}
    </span>
  );
}
