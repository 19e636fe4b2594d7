import { readFileSync } from "node:fs";
import { expect } from "vitest";
import { createEngine, type Engine, type PageResults } from "@/cells";
import { pageOf } from "../cells/page/pages";

/** Cases of a recording that `npm run check:reference` makes again: tests/reference/recorded/NAME.json. */
export function recorded<Case>(name: string): readonly Case[] {
  const file = JSON.parse(readFileSync(new URL(`recorded/${name}.json`, import.meta.url), "utf8")) as { readonly cases: readonly Case[] };
  return file.cases;
}

export type Columns = Readonly<Record<string, readonly (number | string)[]>>;

/** Evaluates a page whose one source, `given.csv`, is a table of plain columns. */
export function evaluateTable(columns: Columns, blocks: readonly object[]): PageResults {
  return engineOver(columns).evaluate(pageOf(blocks, {}));
}

export function engineOver(columns: Columns): Engine {
  const headers = Object.keys(columns);
  const rows = Array.from({ length: columns[headers[0] ?? ""]?.length ?? 0 }, (_, i) => headers.map((header) => String(columns[header]?.[i])).join(","));
  const engine = createEngine();
  engine.setSource("given.csv", new TextEncoder().encode([headers.join(","), ...rows].join("\n")));
  return engine;
}

/** Columns of a data block: plain numbers without unit, each with the header of its 1σ where it has one. */
export function numberColumns(of: Readonly<Record<string, string | null>>): object[] {
  return Object.entries(of).flatMap(([name, sigma]) => [
    { header: name, name, role: "quantity", unit: "1" },
    ...(sigma === null ? [] : [{ header: sigma, role: "uncertainty", of: name, as: "1 sigma" }]),
  ]);
}

/** Keeps the largest difference over what is allowed, so that a test can print how near all came, not only that they did. */
export class Nearness {
  private readonly worst = new Map<string, { share: number; at: string }>();

  /** @param allowed in the unit of the values */
  add(what: string, at: string, got: number | null | undefined, expected: number, allowed: number): void {
    const away = Math.abs((got ?? Number.NaN) - expected);
    const share = away === 0 ? 0 : away / allowed;
    const known = this.worst.get(what);
    if (known === undefined || !(share <= known.share)) this.worst.set(what, { share, at: `${at}: got ${got}, recorded ${expected}` });
  }

  relative(what: string, at: string, got: number | null | undefined, expected: number, tolerance: number): void {
    this.add(what, at, got, expected, tolerance * Math.abs(expected));
  }

  /** Fails with the worst of each kind that is beyond its tolerance. */
  hold(): void {
    console.log([...this.worst].map(([what, { share }]) => `${what}: at most ${share.toPrecision(2)} of its tolerance`).join("\n"));
    expect(this.worst.size).toBeGreaterThan(0);
    for (const [what, { share, at }] of this.worst) expect(share, `${what}, ${at}`).toBeLessThanOrEqual(1);
  }
}
