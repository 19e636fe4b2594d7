import { formatNumber, formatValue, withUnit, type UncertaintyForm } from "@/app/_ui/concise";
import { basisInWords, compactExpression, elementName, listed, sentence } from "@/app/_blocks/shared/words";
import type { Amount, BudgetBlock, BudgetReport, BudgetResult, Step, Substance, Target } from "@/cells";

/** What the parts of a sentence are: words, or a name that is set off from them. */
export type Phrase = readonly (string | { readonly name: string })[];

/** A phrase as one plain text, for labels and for those who listen. */
export function phraseText(phrase: Phrase): string {
  return phrase.map((part) => (typeof part === "string" ? part : part.name)).join("");
}

/** What a substance is, by the name people know it under. */
export function substanceName(what: Substance, bodies: Readonly<Record<string, string>>): string {
  if ("body" in what) return bodies[what.body] ?? what.body;
  if ("phase" in what) return what.phase;
  if ("element" in what) return what.element;
  if ("class" in what) return `mean of ${what.class} in ${what.data}`;
  if ("sample" in what) return `${what.sample} of ${what.data}`;
  if ("data" in what) return `row ${what.row} of ${what.data}`;
  const parts = Object.entries(what.composition);
  return parts.length === 0
    ? "an empty composition"
    : parts.map(([species, v]) => `${species} ${formatNumber(typeof v === "number" ? v : v.value, 4)}`).join(", ");
}

/** A number as a person typed it: no zeros added, none of the noise of a factor. */
function asTyped(value: number): string {
  return String(Number(value.toPrecision(10))).replace("-", "−");
}

function fixed(amount: { readonly value: number; readonly sigma?: number | undefined }, factor: number, form: UncertaintyForm): string {
  return amount.sigma === undefined || amount.sigma === 0
    ? asTyped(amount.value * factor)
    : formatValue(amount.value * factor, amount.sigma * factor, { form });
}

/** Unit in which a step's amount is written. */
export function amountUnit(step: Step): string {
  if (step.do === "share with metal") return "wt%";
  return step.do === "mix" || step.do === "extract melt" ? "" : "kg/kg of the start";
}

/** A step's amount: a value, a range that is swept, or solved for. */
export function amountPhrase(amount: Amount, unit: string, form: UncertaintyForm): Phrase {
  if (amount === "solve") return ["amount ", { name: "solved" }];
  if ("from" in amount) return ["from ", { name: asTyped(amount.from) }, " to ", { name: withUnit(asTyped(amount.to), unit) }];
  return [{ name: withUnit(fixed(amount, 1, form), unit) }];
}

/** A step in words: `share Si with metal, 32.3 % of the whole, amount solved`. */
export function stepPhrase(step: Step, bodies: Readonly<Record<string, string>>, form: UncertaintyForm): Phrase {
  const amount = amountPhrase(step.amount, amountUnit(step), form);
  if (step.do === "share with metal") {
    const species = typeof step.species === "string" ? step.species : listed(step.species);
    const rest: Phrase = step.rest === undefined ? [] : [", rest of the metal ", { name: bodies[step.rest.body] ?? step.rest.body }];
    return ["share ", { name: species }, " with metal, ", { name: `${fixed(step.metalFraction, 100, form)} %` }, " of the whole, ", ...amount, ...rest];
  }
  if (step.do === "extract melt") {
    const elements = Object.keys(step.coefficients);
    const melt: Phrase = step.melt === undefined ? [] : [" of ", { name: substanceName(step.melt, bodies) }];
    return [
      `extract melt, ${step.model}, fraction `,
      ...amount,
      ...melt,
      elements.length === 0 ? "" : `, D of ${listed(elements.slice(0, 4))}${elements.length > 4 ? " …" : ""}`,
    ];
  }
  const verb = step.do === "mix" ? "mix in " : `${step.do} `;
  return [verb, { name: substanceName(step.what, bodies) }, ", ", ...amount];
}

/** What the budget aims at: `so that Mg/Si equals CI_PLJ14`. */
export function targetPhrase(target: Target, bodies: Readonly<Record<string, string>>, basis: string, form: UncertaintyForm): Phrase {
  if ("trend" in target) return ["so that the path reaches the trend ", { name: target.trend }];
  const { equals } = target;
  const left: Phrase = ["so that ", { name: compactExpression(target.expression) }, " equals "];
  if ("body" in equals) return [...left, { name: bodies[equals.body] ?? equals.body }, basis === "" ? "" : `, ${basis}`];
  if ("value" in equals) return [...left, { name: fixed(equals, 1, form) }, `, by ${equals.basis}`];
  return [...left, { name: `${equals.sample} of ${equals.data}` }, basis === "" ? "" : `, ${basis}`];
}

/** Name of the column of targets: the body aimed at, or plainly the target. */
export function targetName(target: Target | undefined): string {
  if (target === undefined || "trend" in target) return "target";
  if ("body" in target.equals) return target.equals.body;
  return "sample" in target.equals ? target.equals.sample : "target";
}

/** Whether a report is the expression that was solved for: spaces do not tell two expressions apart. */
export function isSolvedFor(report: BudgetReport, target: Target | undefined): boolean {
  return target !== undefined && "expression" in target && compactExpression(target.expression) === compactExpression(report.expression);
}

/** Beyond this many σ a reported ratio contradicts the explanation. */
const tooFar = 2;

/** The verdict of the second ratios on the explanation that the first one asked for. */
export interface Verdict {
  /** Before the part that is set off. */
  readonly before: string;
  /** What contradicts the explanation; "" where nothing does. */
  readonly against: string;
  readonly after: string;
}

/**
 * What the other ratios say about the solved explanation; null where there is nothing to compare. One mechanism is never
 * presented as enough when a second ratio rules it out.
 */
export function verdictOf(block: BudgetBlock, result: BudgetResult): Verdict | null {
  if (!result.ok) return null;
  const solvedFor = result.report.find((r) => isSolvedFor(r, block.target));
  const others = result.report.filter((r) => r !== solvedFor && r.miss !== null);
  if (others.length === 0) return null;
  const metal = block.steps.find((s) => s.do === "share with metal");
  const subject =
    metal?.do === "share with metal" && metal.amount === "solve" && typeof metal.species === "string"
      ? sentence(`${elementName(metal.species)} in the metal`)
      : result.solved === undefined
        ? "This balance"
        : "The solved amount";
  const aim = targetName(block.target);
  const opening = solvedFor === undefined ? subject : `${subject} brings ${compactExpression(solvedFor.expression)} to ${aim}`;
  const missed = others.filter((r) => Math.abs(r.miss ?? 0) > tooFar);
  if (missed.length === 0) {
    const names = listed(others.map((r) => `${compactExpression(r.expression)} within ${Math.max(0.1, Math.abs(r.miss ?? 0)).toFixed(1)}σ`));
    return {
      before: solvedFor === undefined ? `${subject} leaves ${names} of ${aim}.` : `${opening} and leaves ${names}.`,
      against: "",
      after: " Nothing reported here speaks against it.",
    };
  }
  const parts = missed.map((r) => `${compactExpression(r.expression)} ${Math.abs(r.miss ?? 0).toFixed(1)}σ too ${(r.miss ?? 0) > 0 ? "high" : "low"}`);
  return { before: `${opening}${solvedFor === undefined ? " leaves " : " but leaves "}`, against: listed(parts), after: ". One mechanism is not enough." };
}

/** What the head of a budget says. */
export function stateInWords(result: BudgetResult | undefined): { readonly text: string; readonly problem: boolean } {
  if (result === undefined) return { text: "", problem: false };
  if (!result.ok) return { text: result.problems.some((p) => p.code.includes("physical")) ? "no physical answer" : "no answer", problem: true };
  if (result.problems.some((p) => p.severity === "error")) return { text: "has a problem", problem: true };
  const worst = result.report.reduce<BudgetReport | null>((most, r) => (r.miss !== null && Math.abs(r.miss) > Math.abs(most?.miss ?? 0) ? r : most), null);
  if (worst !== null && Math.abs(worst.miss ?? 0) > 3) return { text: `${compactExpression(worst.expression)} rules it out alone`, problem: true };
  return { text: result.solved === undefined ? "calculated" : "solved", problem: false };
}

/** Basis that all reports share, for the table's head; "" where they differ. */
export function sharedBasis(reports: readonly BudgetReport[]): string {
  const words = new Set(reports.map((r) => basisInWords(r.basis)));
  const [only] = words;
  return words.size === 1 && only !== undefined ? only : "";
}

/** A compilation's short name: `CI_PLJ14` is PLJ14. */
export function compilationName(id: string): string {
  const cut = id.indexOf("_");
  return cut < 0 ? id : id.slice(cut + 1);
}
