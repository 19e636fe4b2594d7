import { CellError } from "../errors";
import type { PatternColumn } from "../page/results";
import { condensationTemperature, elementsByCondensation, parseSpecies, resolveSpecies } from "../species";
import type { Drawing } from "./drawing";
import type { SamplesDrawn } from "./samplesLayer";

/** One element, or other expression, of a line of a pattern: where it stands across. */
export interface Column {
  readonly text: string;
  /** The element's symbol, or the expression where it is no element. */
  readonly of: string;
  readonly place: number;
  readonly field: string;
}

/** Where the values of a pattern stand across: at a temperature in K, or at a place in an order, counted from 1. */
export class PatternOrder {
  readonly #places: Map<string, number> | null;

  /** Reads all lines first: where values stand evenly, the place of each depends on all of them. */
  constructor(drawing: Drawing) {
    const { order, drawn } = drawing.block;
    if (order === undefined || order === "condensation temperature") {
      this.#places = null;
      return;
    }
    const shown = drawn.filter((line): line is SamplesDrawn => "data" in line && line.hidden !== true);
    const met = [...new Set(shown.flatMap((line) => textsOf(drawing, line)).map(nameOf))];
    const names = Array.isArray(order)
      ? [...new Set([...order, ...met])]
      : elementsByCondensation().filter((element) => met.length === 0 || met.includes(element));
    this.#places = new Map(names.map((name, i) => [name, i + 1]));
  }

  get isByTemperature(): boolean {
    return this.#places === null;
  }

  /** Names in the order they stand in; undefined at temperatures. */
  get names(): readonly string[] | undefined {
    return this.#places === null ? undefined : [...this.#places.keys()];
  }

  /** @throws CellError where a place needs a condensation temperature and none is listed */
  placeOf(text: string): number {
    const name = nameOf(text);
    const known = this.#places?.get(name);
    if (known !== undefined) return known;
    if (elementOf(text) === undefined)
      throw new CellError(
        "no-condensation-temperature",
        `${text} is no element or oxide, so it has no condensation temperature. Give the plot an order instead.`,
      );
    const row = condensationTemperature(name);
    if (row === undefined)
      throw new CellError("no-condensation-temperature", `No condensation temperature is listed for ${name}. Leave it out, or give the plot an order instead.`);
    return row.t50;
  }

  /** What stands across, from the left: the most refractory first, or the order. */
  columns(used: ReadonlySet<string>): PatternColumn[] {
    const names = this.names ?? elementsByCondensation().filter((element) => used.has(element));
    return names.map((of, i) => {
      const temperature = condensationTemperature(of)?.t50 ?? null;
      return { of, x: this.#places === null ? (temperature ?? Number.NaN) : i + 1, temperature };
    });
  }
}

/** The element a value is of: `Al` of Al, of Al2O3 and of a column of either. */
export function elementOf(text: string): string | undefined {
  return parseSpecies(text.trim().replace(/^`|`$/gu, ""))?.element;
}

export function nameOf(text: string): string {
  return elementOf(text) ?? text.trim();
}

/** The values a line of samples draws: its own list, else the plot's order, else every element the table gives that condenses. */
export function textsOf(drawing: Drawing, drawn: SamplesDrawn): readonly string[] {
  const { order } = drawing.block;
  const given = drawn.values ?? (Array.isArray(order) ? order : undefined);
  if (given !== undefined) return given;
  if (drawing.context.block(drawn.data)?.kind !== "data") return [];
  const { table } = drawing.context.scope(drawn.data);
  return elementsByCondensation().filter((element) => table !== null && resolveSpecies(table, element)?.ok === true);
}

/** A line's values with their places, from the left. What has no place is a problem of its own field. */
export function columnsOf(drawing: Drawing, drawn: SamplesDrawn, line: number, order: PatternOrder): Column[] {
  const texts = textsOf(drawing, drawn);
  const found = texts.flatMap((text): Column[] => {
    const field = drawn.values === undefined ? `drawn[${line}]` : `drawn[${line}].values[${drawn.values.indexOf(text)}]`;
    const column = drawing.attempt(field, () => ({ text, of: nameOf(text), place: order.placeOf(text), field }));
    return column === undefined ? [] : [column];
  });
  return order.isByTemperature ? found : found.sort((a, b) => a.place - b.place);
}
