import { listed } from "@/app/_blocks/shared/words";
import type { Nearest, NearestOne } from "@/cells";

/** What was compared, by what distance, and in which order. */
export function nearestInWords(answer: Nearest | null | "asked"): string {
  if (answer === "asked") return "Comparing.";
  if (answer === null) return "This sample has fewer than three elements that are present, above 0 and known as a mass, so there is nothing to compare.";
  const left = answer.tooFew === 0 ? "" : ` ${answer.tooFew} bodies and samples have fewer than three of these and are not compared.`;
  return `Log-ratio distance (Aitchison 1986) over ${listed(answer.components)}, as far as the other has them; the order is by distance for each element. It compares ratios alone, without errors.${left}`;
}

/** Which elements a comparison rests on, where some are missing; "" where it has all. */
export function missingInWords({ used, missing }: NearestOne): string {
  return missing.length === 0 ? "" : `${used.length} elements, without ${listed(missing)}`;
}
