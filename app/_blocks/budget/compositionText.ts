import { formatValue } from "@/app/_ui/concise";
import { readUncertain } from "@/app/_blocks/shared/readNumber";
import type { Substance } from "@/cells";

export type Composition = Extract<Substance, { composition: unknown }>["composition"];

/** A typed composition as one text: `SiO2 45.0(4) wt%, MgO 37.8 wt%`. Numbers keep all their digits. */
export function writeComposition(composition: Composition): string {
  return Object.entries(composition)
    .map(([key, entry]) => {
      const cut = key.indexOf(" ");
      const species = cut < 0 ? key : key.slice(0, cut);
      const unit = cut < 0 ? "" : key.slice(cut);
      const sigma = typeof entry === "number" ? undefined : entry.sigma;
      const value = typeof entry === "number" ? entry : entry.value;
      const shown = formatValue(value, sigma ?? 0).replaceAll("−", "-");
      const exact = sigma === undefined ? String(value) : readsBack(shown, value, sigma) ? shown : `${value} ± ${sigma}`;
      return `${species} ${exact}${unit}`;
    })
    .join(", ");
}

function readsBack(shown: string, value: number, sigma: number): boolean {
  const read = readUncertain(shown);
  return "value" in read && read.value === value && read.sigma === sigma;
}

/** Reads what {@link writeComposition} writes, and what people type like it. */
export function readComposition(text: string): { readonly composition: Composition } | { readonly problem: string } {
  const composition: Record<string, number | { value: number; sigma: number }> = {};
  for (const part of text.split(",")) {
    if (part.trim() === "") continue;
    const match = /^\s*([A-Z][\p{L}\p{N}_]*)\s+(.*?)\s*([^\d\s().±+-][^\d()±]*)?\s*$/u.exec(part);
    const species = match?.[1];
    if (species === undefined) return { problem: `“${part.trim()}” is not a species with its amount. Write, for example, SiO2 45.0(4) wt%.` };
    const read = readUncertain(match?.[2] ?? "");
    if (!("value" in read)) return { problem: "problem" in read ? read.problem : `How much ${species}? Write a number after it.` };
    composition[`${species} ${(match?.[3] ?? "wt%").trim()}`] = read.sigma === undefined ? read.value : { value: read.value, sigma: read.sigma };
  }
  return { composition };
}
