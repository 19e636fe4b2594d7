import type { TraceNode } from "../page/results";
import { byShare, listed, scaled } from "./node";

/** One input of a number, and what it has in common with the others. */
export interface Branch<Input> {
  readonly node: TraceNode;
  readonly inputs: readonly Input[];
}

/**
 * Branches in order of their shares, which sum to 1 and are never below 0: where a covariance would take a branch's own part
 * below 0, that branch is put together with those it is correlated with, and the whole has the share.
 *
 * @param correlated whether the errors of two inputs have a covariance
 */
export function joinedBranches<Input>(branches: readonly Branch<Input>[], correlated: (a: Input, b: Input) => boolean): { from: TraceNode[]; notes: string[] } {
  const related = (a: Branch<Input>, b: Branch<Input>): boolean => a.inputs.some((x) => b.inputs.some((y) => x !== y && correlated(x, y)));
  const names = new Set<string>();
  branches.forEach((a, i) =>
    branches.slice(i + 1).forEach((b) => {
      if (related(a, b)) names.add(a.node.label).add(b.node.label);
    }),
  );
  let joined: Branch<Input>[] = [...branches];
  for (;;) {
    const below = joined.find(({ node }) => node.share !== null && node.share < 0);
    const others = below === undefined ? [] : joined.filter((other) => other !== below && related(below, other));
    if (below === undefined || others.length === 0) break;
    const parts = joined.filter((branch) => branch === below || others.includes(branch));
    joined = [...joined.filter((branch) => !parts.includes(branch)), together(parts)];
  }
  const notes =
    names.size === 0
      ? []
      : [`The errors of ${listed([...names])} are correlated; what a pair of them adds to the variance or takes from it is counted half to each.`];
  return { from: byShare(joined.map(({ node }) => node)), notes };
}

function together<Input>(parts: readonly Branch<Input>[]): Branch<Input> {
  const inside = parts.flatMap(({ node }) => (node.kind === "conversion" && node.value === null && node.from.length > 0 ? node.from : [node]));
  const node: TraceNode = {
    kind: "conversion",
    label: listed(inside.map(({ label }) => label)),
    value: null,
    sigma: null,
    unit: "",
    share: parts.reduce((sum, { node }) => sum + (node.share ?? 0), 0),
    notes: ["Their errors are correlated and partly cancel, so their share is given for all of them together."],
    from: scaled(inside, null),
  };
  return { node, inputs: parts.flatMap(({ inputs }) => inputs) };
}
