import { createEngine, readPageDocument } from "@/cells";
import { wholePage, wholeSources } from "../../support/wholePage";

type Next = () => number;
type Json = null | boolean | number | string | Json[] | { [key: string]: Json };

const sources = Object.entries(wholeSources()).filter(([file]) => file !== "many.csv");
const whole = JSON.stringify(wholePage()).replaceAll("many.csv", "few.csv");
const values: readonly Json[] = [null, true, -1, 0, 1e308, 1.5, "", "Mg / Si", "d", "t", "__proto__", "CI", "\u0000", [], {}, [[]], "1 sigma"];

/** A whole page with some of its parts put elsewhere, taken away or turned into nonsense. */
export function spoiltPage(next: Next): unknown {
  const page = JSON.parse(whole) as Json;
  for (let n = 1 + Math.floor(next() * 4); n > 0; n--) spoil(page, next);
  return page;
}

function spoil(within: Json, next: Next): void {
  if (typeof within !== "object" || within === null) return;
  const keys = Object.keys(within);
  const key = keys[Math.floor(next() * keys.length)];
  if (key === undefined) return;
  const parts = within as Record<string, Json>;
  const part = parts[key] ?? null;
  if (typeof part === "object" && part !== null && next() < 0.85) return spoil(part, next);
  const kind = next();
  if (kind < 0.25) Reflect.deleteProperty(parts, key);
  else if (kind < 0.4) parts[`${key}s`] = part;
  else if (kind < 0.6 && Array.isArray(within)) within.push(structuredClone(part));
  else if (typeof part === "string" && kind < 0.8) parts[key] = part.slice(0, Math.floor(next() * part.length)) + part.slice(Math.floor(next() * part.length));
  else parts[key] = values[Math.floor(next() * values.length)] ?? null;
}

/** A page is read and calculated, or it is unreadable and says why. @throws Error with the page and what went wrong */
export function tryPage(page: unknown): "calculated" | "unreadable" {
  const wrong = (what: string): Error => new Error(`${what}: ${JSON.stringify(page)}`);
  try {
    readPageDocument(page);
  } catch (error) {
    if (!(error instanceof Error) || error.name !== "UnreadablePageError" || error.message.length < 12) throw wrong(`reading broke (${String(error)})`);
    return "unreadable";
  }
  const engine = createEngine();
  for (const [file, text] of sources) engine.setSource(file, new TextEncoder().encode(text));
  const began = process.cpuUsage();
  try {
    engine.evaluate(readPageDocument(page));
  } catch (error) {
    throw wrong(`calculating broke (${error instanceof Error ? (error.stack ?? error.message) : String(error)})`);
  }
  if (process.cpuUsage(began).user > 10_000_000) throw wrong("took more than ten seconds");
  return "calculated";
}
