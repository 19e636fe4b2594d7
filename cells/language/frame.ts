import type { Body } from "../species/body";
import type { Compiled } from "./compiled";
import type { Scope } from "./scope";
import type { Tree } from "./tree";

/** Where a tree stands: what its names mean, and the text its places are in. */
export interface Frame {
  readonly scope: Scope;
  readonly text: string;
  /** What species are taken from: the scope's table, a body, or a composition that comes later. */
  readonly on: "table" | { readonly body: Body } | { readonly composition: CompositionSpecies };
}

/** Makes the node of an element's mass fraction in a composition that comes later. */
export type CompositionSpecies = (element: string) => number;

/** The text of a part as it was written, shortened where it is long. */
export function sourceOf(tree: Tree, frame: Frame): string {
  const text = frame.text.slice(tree.span[0], tree.span[1]).replace(/\s+/gu, " ");
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
}

/** Why something is no number, and what to write. */
export function notANumber(made: Compiled, source: string): string {
  if (made.kind === "condition") return `${source} is a condition, not a number. To count with it, write condition ? 1 : 0.`;
  if (made.kind === "labels") return `${source} is a column of text. Compare it, as in ${source} == "CI", or use it to take means class by class.`;
  return `A text stands only in a comparison with a column of text, as in Group == "CI", or as the name of a class.`;
}

/** Tells apart what one tree comes to on different things. */
export function placeKey(frame: Frame): string {
  return frame.on === "table" ? "table" : "body" in frame.on ? `body ${frame.on.body.id}` : "composition";
}
