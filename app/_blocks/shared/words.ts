import { counted } from "@/app/_ui/concise";
import type { Basis, StateName } from "@/cells";

/** `a`, `a and b`, `a, b and c`. */
export function listed(parts: readonly string[]): string {
  if (parts.length < 2) return parts.join("");
  return `${parts.slice(0, -1).join(", ")} and ${parts[parts.length - 1] ?? ""}`;
}

/** What kind of ratio a number is, in words; `""` where there is nothing to say. */
export function basisInWords(basis: Basis | "formula units" | null | undefined): string {
  if (basis === "mass") return "by mass";
  if (basis === "atoms") return "by atoms";
  if (basis === "formula units") return "by formula units";
  return "";
}

/** Symbols that stand for what is not drawn on a strip, in the order of the words. */
export const stateSymbols: Readonly<Record<Exclude<StateName, "present">, string>> = {
  missing: "–",
  "below detection": "<",
  "out of domain": "∅",
  "set aside": "×",
};

const stateOrder = ["below detection", "missing", "out of domain", "set aside"] as const;

/** The states other than present that occur, with their counts, in the order in which words and strips name them. */
export function absent(states: Partial<Record<StateName, number>>): readonly { readonly state: Exclude<StateName, "present">; readonly count: number }[] {
  return stateOrder.flatMap((state) => {
    const count = states[state] ?? 0;
    return count > 0 ? [{ state, count }] : [];
  });
}

/** `11 samples, 1 below detection, 17 missing, 1 set aside`. */
export function samplesInWords(n: number, states: Partial<Record<StateName, number>>): string {
  return [counted(n, "sample"), ...absent(states).map(({ state, count }) => `${count} ${state}`)].join(", ");
}

/** Plain text of an expression as a label: `Mg / Si` becomes `Mg/Si`. */
export function compactExpression(text: string): string {
  return text.trim().replace(/\s*\/\s*/gu, "/");
}

/** First letter as a capital; for sentences put together from parts. */
export function sentence(text: string): string {
  const first = text.codePointAt(0);
  if (first === undefined) return text;
  const head = String.fromCodePoint(first);
  return head.toUpperCase() + text.slice(head.length);
}

const elementNames: Readonly<Record<string, string>> = {
  Si: "silicon",
  Mg: "magnesium",
  Al: "aluminium",
  Ca: "calcium",
  Fe: "iron",
  Na: "sodium",
  K: "potassium",
  S: "sulphur",
  Ti: "titanium",
  O: "oxygen",
  C: "carbon",
  H: "hydrogen",
  P: "phosphorus",
  Ni: "nickel",
  Co: "cobalt",
  Cr: "chromium",
  Mn: "manganese",
};

/** Name of an element that rocks are mostly made of; the symbol itself for the others. */
export function elementName(symbol: string): string {
  return elementNames[symbol] ?? symbol;
}
