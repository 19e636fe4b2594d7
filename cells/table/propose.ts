import type { Problem } from "../errors";
import type { Column } from "../page/schema";
import { parseUnit, type Unit } from "../quantity/unit";
import { parseSpecies } from "../species";
import { readCell } from "./cell";
import { readHeader, type ReadHeader } from "./header";
import { majorElements, roleHeaders } from "./headerRules";
import type { RawTable } from "./raw";

/** The importer's guess: a column for every header, and beside each why. */
export interface Proposal {
  readonly columns: readonly Column[];
  /** As many as columns: what each guess rests on. */
  readonly reasons: readonly string[];
  readonly problems: readonly Problem[];
}

/** Rows that the guess looks at. */
const LOOK = 400;

interface Guess {
  readonly header: string;
  readonly at: number;
  readonly read: ReadHeader;
  readonly look: Look;
  role: Column["role"];
  reason: string;
  name?: string;
  unit?: Unit;
  of?: Guess;
  kind?: Column["as"];
}

/**
 * Proposes what each column of a source is, from its header and its first rows. Nothing is decided that a person cannot
 * change, and every guess says what it rests on.
 */
export function proposeMapping(raw: RawTable): Proposal {
  const problems: Problem[] = [];
  const guesses = raw.headers.map((header, at): Guess => {
    const read = readHeader(header);
    const look = lookAt(raw, at);
    const { role, reason } = roleOf(read, look);
    return { header, at, read, look, role, reason };
  });
  keepOne(guesses, "sample");
  keepOne(guesses, "class");
  if (!guesses.some((guess) => guess.role === "sample")) takeFirstText(guesses, problems);
  const used = new Set<string>();
  for (const guess of guesses) if (guess.role === "quantity") setUnit(guess, raw, problems);
  for (const guess of guesses) if (guess.role === "quantity" && guess.read.species === "Co") askForCobalt(guess, problems);
  for (const guess of guesses)
    if (guess.role !== "uncertainty")
      guess.name = freeName(guess.role === "quantity" ? (guess.read.species ?? guess.read.name ?? guess.header) : guess.header, used);
  for (const guess of guesses) if (guess.role === "uncertainty") attach(guess, guesses, problems);
  for (const guess of guesses) if (guess.role !== "uncertainty") guess.name ??= freeName(guess.header, used);
  if (!guesses.some((guess) => guess.role === "quantity"))
    problems.push({
      code: "mapping-no-quantity",
      severity: "warning",
      text: "No column of numbers was recognised. Give the columns that hold quantities their role, species and unit.",
    });
  return { columns: guesses.map((guess) => column(guess, raw)), reasons: guesses.map((guess) => guess.reason), problems };
}

function askForCobalt({ header }: Guess, problems: Problem[]): void {
  if (!/(?<![A-Za-z])CO(?![A-Za-z0-9])/u.test(header)) return;
  const text = `"${header}" may mean cobalt or carbon monoxide; it is read as cobalt. Please check.`;
  problems.push({ code: "species-assumed", severity: "warning", column: header, text });
}

interface Look {
  readonly filled: number;
  readonly numbers: number;
  readonly distinct: number;
  readonly largest: number;
}

function lookAt(raw: RawTable, at: number): Look {
  let filled = 0;
  let numbers = 0;
  let largest = 0;
  const distinct = new Set<string>();
  for (const row of raw.rows.slice(0, LOOK)) {
    const text = row[at] ?? "";
    const cell = readCell(text, raw.decimal);
    if (cell.kind === "missing") continue;
    filled++;
    distinct.add(text);
    if (cell.kind === "unreadable" && cell.code === "cell-not-a-number") continue;
    numbers++;
    if (cell.kind === "value") largest = Math.max(largest, Math.abs(cell.value));
  }
  return { filled, numbers, distinct: distinct.size, largest };
}

function roleOf(read: ReadHeader, look: Look): { readonly role: Column["role"]; readonly reason: string } {
  const numeric = look.filled > 0 && look.numbers >= 0.8 * look.filled;
  if (read.role === "quantity" || read.role === "uncertainty") {
    if (look.filled > 0 && look.numbers < 0.5 * look.filled) return { role: "text", reason: `${read.reason}, but most of its cells are no numbers` };
    return { role: read.role, reason: read.reason };
  }
  if (read.role !== undefined) return { role: read.role, reason: read.reason };
  if (numeric) return { role: "quantity", reason: `${read.reason}; its cells are numbers, read as plain numbers until its species and unit are given` };
  return { role: "text", reason: read.reason };
}

/** One column a role: the header nearest the front of the list of usual headers. */
function keepOne(guesses: readonly Guess[], role: "sample" | "class"): void {
  const order = roleHeaders.find(([name]) => name === role)?.[1] ?? [];
  const rank = (guess: Guess): number => order.indexOf(guess.header.toLowerCase().replace(/[\s._:-]+/gu, ""));
  const having = guesses.filter((guess) => guess.role === role).sort((a, b) => rank(a) - rank(b) || a.at - b.at);
  for (const guess of having.slice(1)) {
    guess.role = "text";
    guess.reason = `"${guess.header}" could give the ${role} too; "${having[0]?.header ?? ""}" does already`;
  }
}

function takeFirstText(guesses: readonly Guess[], problems: Problem[]): void {
  const first = guesses.find((guess) => guess.role === "text" && guess.look.filled > 0 && guess.look.distinct > 0.7 * guess.look.filled);
  if (first === undefined) {
    problems.push({ code: "mapping-no-sample", severity: "note", text: "No column gives sample names; rows are known by their number." });
    return;
  }
  first.role = "sample";
  first.reason = `the first column of text, nearly all of it different, taken for the sample names`;
}

function setUnit(guess: Guess, raw: RawTable, problems: Problem[]): void {
  const line = raw.units?.[guess.at] ?? "";
  const fromLine = line === "" ? undefined : parseUnit(line);
  if (guess.read.unit !== undefined) guess.unit = guess.read.unit;
  else if (fromLine !== undefined) {
    guess.unit = fromLine;
    guess.reason += `; in ${fromLine.symbol} by the line of units`;
  } else [guess.unit, guess.reason] = guessUnit(guess, problems);
  if (line !== "" && fromLine === undefined && guess.read.unit === undefined)
    problems.push({
      code: "unit-unknown",
      severity: "warning",
      column: guess.header,
      text: `"${line}" below "${guess.header}" is no unit we know. Set the unit of the column.`,
    });
}

function guessUnit(guess: Guess, problems: Problem[]): [Unit, string] {
  const { read } = guess;
  const wtpct = parseUnit("wt%") as Unit;
  const ugg = parseUnit("µg/g") as Unit;
  const one = parseUnit("1") as Unit;
  const bulk = read.name === "Total" || read.name === "LOI" || read.name === "H2O_plus" || read.name === "H2O_minus";
  const species = read.species === undefined ? undefined : parseSpecies(read.species);
  if (species === undefined && !bulk) return [one, guess.reason];
  if (bulk || (species !== undefined && (species.chemical.atoms.size > 1 || (species.iron !== undefined && species.name !== "Fe"))))
    return [wtpct, `${guess.reason}; no unit is given, and oxides are taken to be in wt%`];
  const unit = majorElements.has(species?.element ?? "") && guess.look.largest <= 100 ? wtpct : ugg;
  problems.push({
    code: "unit-assumed",
    severity: "warning",
    column: guess.header,
    text: `"${guess.header}" gives no unit; its values, up to ${guess.look.largest}, are taken to be in ${unit.symbol}. Please check.`,
  });
  return [unit, `${guess.reason}; no unit is given, ${unit.symbol} by the size of its values`];
}

/** Finds the quantity that an uncertainty belongs to: the one it names, else the last one before it. */
function attach(guess: Guess, guesses: readonly Guess[], problems: Problem[]): void {
  const before = guesses.filter((other) => other.role === "quantity" && other.at < guess.at).reverse();
  const named = guess.read.species ?? guess.read.name;
  const fits = (other: Guess): boolean =>
    named === undefined ||
    (guess.read.species !== undefined && other.read.species === guess.read.species) ||
    (guess.read.name !== undefined && (other.read.name === guess.read.name || other.name === identifier(guess.read.name) || other.header === guess.read.name));
  const free = (other: Guess): boolean => !guesses.some((taken) => taken !== guess && taken.of === other);
  const all = [...before, ...guesses.filter((other) => other.role === "quantity" && other.at > guess.at)];
  const of = named === undefined ? before[0] : (all.find((other) => fits(other) && free(other)) ?? sameElement(guess, all));
  if (of === undefined || !free(of)) {
    const why = named === undefined ? "no column of a quantity stands before it" : `no column gives ${named}`;
    problems.push({
      code: "mapping-uncertainty",
      severity: "warning",
      column: guess.header,
      text: `"${guess.header}" reads as an uncertainty, and ${of === undefined ? why : `${of.header} has one already`}. Say which quantity it belongs to.`,
    });
    guess.role = "text";
    guess.reason = `${guess.reason}, but ${of === undefined ? why : `${of.header} has one already`}`;
    return;
  }
  guess.of = of;
  guess.kind = guess.read.kind ?? "1 sigma";
  setSigmaUnit(guess, of, problems);
  if (guess.read.kindSaid === false)
    problems.push({
      code: "sigma-kind-assumed",
      severity: "warning",
      column: guess.header,
      text: `"${guess.header}" does not say whether it is 1σ or 2σ; it is read as 1σ. Please check.`,
    });
}

/** `FeO 2s` beside a column that turned out to be FeOt. */
function sameElement(guess: Guess, all: readonly Guess[]): Guess | undefined {
  const species = guess.read.species === undefined ? undefined : parseSpecies(guess.read.species);
  const same = all.filter((other) => other.read.species !== undefined && parseSpecies(other.read.species)?.chemical.formula === species?.chemical.formula);
  return same.length === 1 ? same[0] : undefined;
}

function setSigmaUnit(guess: Guess, of: Guess, problems: Problem[]): void {
  const unit = guess.read.unit;
  if (unit === undefined || unit.symbol === of.unit?.symbol) {
    const plainPercent =
      guess.read.unitText === "%" && of.read.unitText !== "%" && unit !== undefined && guess.kind !== undefined && !guess.kind.includes("relative");
    if (plainPercent)
      problems.push({
        code: "sigma-percent",
        severity: "warning",
        column: guess.header,
        text: `"${guess.header}" is in "%", which may mean wt% or per cent of the value; it is read as wt%. Please check.`,
      });
    return;
  }
  if (guess.read.unitText === "%" || guess.read.unitText === "pct") {
    if (guess.kind === "2 sigma") guess.kind = "2 sigma relative %";
    if (guess.kind === "1 sigma") guess.kind = "1 sigma relative %";
    guess.reason += `; in per cent of a value that is not in per cent itself`;
    return;
  }
  guess.unit = unit;
}

function column(guess: Guess, raw: RawTable): Column {
  const twice = raw.headers.indexOf(guess.header) !== raw.headers.lastIndexOf(guess.header);
  const base = { header: guess.header, ...(twice ? { position: guess.at + 1 } : {}) };
  if (guess.role === "uncertainty" && guess.of?.name !== undefined && guess.kind !== undefined)
    return { ...base, role: "uncertainty", of: guess.of.name, as: guess.kind, ...(guess.unit === undefined ? {} : { unit: guess.unit.symbol }) };
  const named = guess.name === undefined || guess.name === guess.header ? base : { ...base, name: guess.name };
  if (guess.role !== "quantity") return { ...named, role: guess.role };
  const { species, basis, kind } = guess.read;
  return {
    ...named,
    role: "quantity",
    ...(species === undefined ? {} : { species }),
    ...(guess.unit === undefined ? {} : { unit: guess.unit.symbol }),
    ...(basis === undefined ? {} : { basis }),
    ...(kind === undefined ? {} : { as: kind }),
  };
}

/** A name that formulas can write without backticks: letters, digits and `_`. */
export function identifier(text: string): string {
  const name = text
    .normalize("NFC")
    .replace(/[^\p{L}\p{N}_]+/gu, "_")
    .replace(/^_+|_+$/gu, "")
    .slice(0, 60);
  if (name === "") return "column";
  return /^\p{N}/u.test(name) ? `_${name}` : name;
}

function freeName(wanted: string, used: Set<string>): string {
  const base = identifier(wanted);
  let name = base;
  for (let n = 2; used.has(name); n++) name = `${base}_${n}`;
  used.add(name);
  return name;
}
