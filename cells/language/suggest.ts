import { parseSpecies } from "../species";
import type { Frame } from "./frame";
import type { Tree } from "./tree";

/**
 * An expression by mass rewritten by atoms (`Mg / SiO2` → `atoms(Mg) / atoms(Si)`), for the sentence of an error. Undefined
 * where a name in it is not a species.
 */
export function byAtoms(tree: Tree, frame: Frame): string | undefined {
  // Only what a sentence can hold; it also bounds the descent into long chains.
  if (tree.span[1] - tree.span[0] > 120) return undefined;
  switch (tree.kind) {
    case "number":
      return frame.text.slice(tree.span[0], tree.span[1]);
    case "name": {
      const species = tree.member === undefined ? parseSpecies(tree.name) : undefined;
      return species === undefined ? undefined : `atoms(${species.element})`;
    }
    case "binary": {
      const left = byAtoms(tree.left, frame);
      const right = byAtoms(tree.right, frame);
      const bracket = (text: string, part: Tree): string => (part.kind === "binary" ? `(${text})` : text);
      return left === undefined || right === undefined ? undefined : `${bracket(left, tree.left)} ${tree.operator} ${bracket(right, tree.right)}`;
    }
    case "unary": {
      const of = byAtoms(tree.of, frame);
      return of === undefined ? undefined : `${tree.operator}${of}`;
    }
    default:
      return undefined;
  }
}
