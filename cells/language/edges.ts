import type { Variable } from "./compiled";
import { partialsOf, type Links } from "./derivatives";
import type { Graph } from "./graph";
import { uncertaintyNodes } from "./uncertainty";

/**
 * A value near whose zero a result turns sharply: a denominator, the argument of a logarithm or root. Where its σ is large
 * against it, first-order propagation is not to be trusted (JCGM 101:2008, 5.11).
 */
export interface Edge {
  /** As it is written. */
  readonly source: string;
  /** Relative σ up to which the linear law holds well enough. */
  readonly tolerated: number;
}

/** A denominator may have 10 % σ. */
export const DENOMINATOR = 0.1;
/** The argument of a logarithm or root must lie 3σ from 0. */
export const NEAR_DOMAIN_EDGE = 1 / 3;

/** More edges than these are not watched: the calculation would be mostly that. */
const MOST = 24;

/** A node that is 1 where any edge is too near, else 0. */
export function tooNearNode(graph: Graph, edges: ReadonlyMap<number, Edge>, variables: ReadonlyMap<number, Variable>, links: Links): number {
  let near = graph.constant(0);
  const leaves = new Set(variables.keys());
  for (const [node, { tolerated }] of [...edges].slice(0, MOST)) {
    const partials = partialsOf(graph, node, leaves, links);
    if (partials.size === 0) continue;
    const { sigma } = uncertaintyNodes(graph, partials, variables);
    near = graph.max(near, graph.compare("lt", graph.mul(graph.constant(tolerated), graph.apply("abs", node)), graph.apply("orZero", sigma)));
  }
  return near;
}
