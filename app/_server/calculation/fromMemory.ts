import { bodyLookup, isFromMemory, keyElement, parseChemical, type PageDocument } from "@/cells";
import type { MemoryValue } from "./tasks";

/**
 * Reference values of the bodies in use that were written down from memory, as far as the page speaks of their element.
 *
 * Rather one too many than one too few: a value counts as used when its element stands in any expression, species or list
 * of the page, and all of a body's values count when a plot orders elements by condensation temperature.
 */
export function valuesFromMemory(page: PageDocument, bodies: Readonly<Record<string, string>>): MemoryValue[] {
  const elements = elementsNamed(page);
  const found: MemoryValue[] = [];
  const lookup = bodyLookup({}, page.ownBodies);
  for (const id of [...new Set(Object.values(bodies))].sort()) {
    for (const { species, value, unit, source, checked } of lookup(id)?.values ?? []) {
      const element = elementOf(species);
      if (isFromMemory(checked) && (elements === "all" || (element !== undefined && elements.has(element))))
        found.push({ body: id, species, value, unit, source });
    }
  }
  return found;
}

function elementsNamed(page: PageDocument): ReadonlySet<string> | "all" {
  const named = new Set<string>();
  const visit = (value: unknown): boolean => {
    if (typeof value === "string") {
      if (value === "condensation temperature") return true;
      for (const word of value.match(/[\p{L}_][\p{L}\p{N}_]*/gu) ?? []) {
        const element = elementOf(word);
        if (element !== undefined) named.add(element);
      }
      return false;
    }
    if (Array.isArray(value)) return value.some(visit);
    if (typeof value === "object" && value !== null) return Object.entries(value).some(([key, item]) => visit(key) || visit(item));
    return false;
  };
  // Notes are prose, and rows and reasons are no expressions; "In" is a word there and not indium.
  const all = page.blocks.some((block) => {
    if (block.kind === "note") return false;
    if (block.kind === "data") return visit((block.columns ?? []).map((column) => column.species ?? ""));
    return visit(block);
  });
  return all ? "all" : named;
}

function elementOf(text: string): string | undefined {
  const chemical = parseChemical(text);
  return chemical && keyElement(chemical);
}
