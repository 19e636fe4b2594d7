import { parseUnit } from "../quantity/unit";
import { parseSpecies } from "../species";
import { ownBodyFaults, type OwnBodyFault, type OwnValue } from "../species/ownBody";
import { readCell } from "./cell";
import { settleDecimal } from "./decimal";
import { readHeader } from "./header";

/** How the third column of a pasted composition says its uncertainty. */
export const ownSigmaKinds = ["1 sigma", "2 sigma", "1 sigma relative %"] as const;
export type OwnSigmaKind = (typeof ownSigmaKinds)[number];

/** A pasted composition, read. */
export interface OwnTable {
  readonly values: readonly OwnValue[];
  /** Species whose row has no value: said, and left out. */
  readonly without: readonly string[];
  /** What is wrong, by line of the text. */
  readonly problems: readonly OwnBodyFault[];
}

/**
 * Reads a composition of two or three columns as people paste it: species, value and, where known, its uncertainty, parted by
 * tabs, semicolons, commas or blanks, with or without a line of headings. A value may carry its uncertainty, `45.0 ± 0.4`,
 * and species or value a unit of its own, `La µg/g`; all others are in `unit`.
 *
 * @param unit unit of the values that say none
 * @param sigma what the uncertainties are; those of the result are 1σ in the unit of their value
 */
export function readOwnTable(text: string, unit: string, sigma: OwnSigmaKind = "1 sigma"): OwnTable {
  const lines = text.split(/\r\n|\r|\n/u).map((line, index) => ({ row: index + 1, cells: cellsOf(line, text) }));
  const filled = lines.filter(({ cells }) => cells.some((cell) => cell !== ""));
  const decimal = settleDecimal(filled.map(({ cells }) => cells));
  const problems: OwnBodyFault[] = [];
  const without: string[] = [];
  const values: OwnValue[] = [];
  const rows: number[] = [];
  let given = unit;
  filled.forEach(({ row, cells }, place) => {
    const say = (says: string): void => void problems.push({ row, text: `Row ${row}, ${cells[0] === "" ? "no species" : (cells[0] ?? "")}: ${says}` });
    const [first = "", valueText = "", sigmaText = "", ...rest] = cells;
    const named = speciesAndUnit(first);
    const value = readCell(valueText, decimal);
    if (place === 0 && named.species === undefined && value.kind === "unreadable") {
      const stated = /[([]\s*([^)\]]+)[)\]]/u.exec(valueText)?.[1] ?? valueText;
      if (parseUnit(stated)?.dimension === "mass fraction") given = stated;
      const kind = readHeader(sigmaText).kind;
      if (kind !== undefined && kind !== sigma) say(`the headings say that uncertainties are ${kind}, and ${sigma} is chosen. Choose what they are.`);
      return;
    }
    if (rest.some((cell) => cell !== "") && !(rest.length === 1 && parseUnit(rest[0] ?? "") !== undefined))
      return say("there are more than three columns. Give species, value and its uncertainty.");
    if (first === "") return say("a value stands here without its species.");
    if (value.kind === "missing") return void without.push(named.name);
    if (value.kind === "below") return say(`"${valueText}" is a detection limit, and a body holds values. Leave the row out.`);
    if (value.kind === "unreadable") return say(`"${valueText}" is not a number. Write it plainly, such as 45.02.`);
    const spread = readCell(sigmaText, decimal);
    if (sigmaText !== "" && spread.kind !== "value" && spread.kind !== "missing")
      return say(`the uncertainty "${sigmaText}" is not a number. Leave it out where it is unknown.`);
    const written = spread.kind === "value" ? spread.value : value.sigma;
    const relative = spread.kind === "value" ? sigma === "1 sigma relative %" : value.relative || sigma === "1 sigma relative %";
    const one = written === null ? undefined : (written * (relative ? Math.abs(value.value) / 100 : 1)) / (sigma === "2 sigma" ? 2 : 1);
    values.push({
      species: named.name,
      unit: rest[0] || (value.unit?.symbol ?? named.unit ?? given),
      value: value.value,
      ...(one === undefined ? {} : { sigma: one }),
    });
    rows.push(row);
  });
  problems.push(...ownBodyFaults(values, (index) => rows[index] ?? 0));
  return { values, without, problems: problems.sort((a, b) => a.row - b.row) };
}

/** The cells of a line. Which sign parts them, the whole text says: a tab before all others, blanks where there is none. */
function cellsOf(line: string, text: string): string[] {
  const sign =
    ["\t", ";", "|"].find((each) => text.includes(each)) ?? (/^[^\S\n]*[^\s,]+(?:[^\S\n]*[([][^)\]]*[)\]])?[^\S\n]*,/mu.test(text) ? "," : undefined);
  if (sign !== undefined) return line.split(sign).map((cell) => cell.trim().replace(/^"(.*)"$/u, "$1"));
  const words = line
    .trim()
    .replace(/\s*(?:±|\+\/-)\s*/gu, "±")
    .split(/\s+/u);
  // "La µg/g 0.68": the unit belongs to its species.
  const [species = "", second = ""] = words;
  return parseUnit(second)?.dimension === "mass fraction" ? [`${species} ${second}`, ...words.slice(2)] : words;
}

/** `La`, `La µg/g`, `SiO2 (wt%)`. */
function speciesAndUnit(cell: string): { readonly name: string; readonly species: string | undefined; readonly unit?: string } {
  const alone = parseSpecies(cell);
  if (alone !== undefined) return { name: alone.name, species: alone.name };
  const parts = /^(.+?)[\s,]*(?:[([]\s*([^)\]]+?)\s*[)\]]|\s(\S.*))$/u.exec(cell);
  const species = parts === null ? undefined : parseSpecies(parts[1] ?? "");
  const unit = parts?.[2] ?? parts?.[3] ?? "";
  return species !== undefined && parseUnit(unit) !== undefined ? { name: species.name, species: species.name, unit } : { name: cell, species: undefined };
}
