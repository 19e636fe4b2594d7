import type { Graph } from "./graph";

/** What a graph's variables lean on in turn: the mean of a column on the body that normalised it. */
export type Links = ReadonlyMap<number, readonly { readonly to: number; readonly partial: number }[]>;

const LOG10_E = 0.4342944819032518;

/**
 * Partial derivatives of node `y` with respect to every variable it reaches, as nodes of the same graph (reverse mode).
 *
 * A choice passes derivatives on as choices between those of its two sides, so that the side not chosen, which may not even
 * have a value, takes no part.
 *
 * @param variables nodes that are measured values or common variables
 * @returns partial by variable, in the order in which variables first appeared in the formula
 */
export function partialsOf(graph: Graph, y: number, variables: ReadonlySet<number>, links: Links): Map<number, number> {
  const found = reverse(graph, y, variables, links, new Map());
  return new Map([...found].sort(([a], [b]) => a - b));
}

type Partials = Map<number, number>;

function reverse(graph: Graph, y: number, variables: ReadonlySet<number>, links: Links, choices: Map<number, Partials>): Partials {
  const adjoints = new Map<number, number>([[y, graph.constant(1)]]);
  const found: Partials = new Map();
  const add = (to: number, amount: number): void => {
    if (graph.constantOf(to) !== undefined || graph.constantOf(amount) === 0) return;
    const before = adjoints.get(to);
    adjoints.set(to, before === undefined ? amount : graph.add(before, amount));
  };
  for (let i = y; i >= 0; i--) {
    const g = adjoints.get(i);
    if (g === undefined) continue;
    if (variables.has(i)) {
      found.set(i, g);
      for (const { to, partial } of links.get(i) ?? []) add(to, graph.mul(g, partial));
      continue;
    }
    const { op, a, b } = graph.at(i);
    switch (op) {
      case "add":
        add(a, g);
        add(b, g);
        break;
      case "sub":
        add(a, g);
        add(b, graph.negate(g));
        break;
      case "mul":
        if (a === b) add(a, graph.mul(graph.constant(2), graph.mul(g, a)));
        else {
          add(a, graph.mul(g, b));
          add(b, graph.mul(g, a));
        }
        break;
      case "div": {
        const overB = graph.div(g, b);
        add(a, overB);
        add(b, graph.negate(graph.mul(overB, i)));
        break;
      }
      case "log":
        add(a, graph.div(g, a));
        break;
      case "log10":
        add(a, graph.mul(g, graph.div(graph.constant(LOG10_E), a)));
        break;
      case "exp":
        add(a, graph.mul(g, i));
        break;
      case "sqrt":
        add(a, graph.mul(g, graph.div(graph.constant(0.5), i)));
        break;
      case "abs":
        add(a, graph.mul(g, graph.apply("sign", a)));
        break;
      case "pow":
        add(a, graph.mul(g, graph.mul(b, graph.pow(a, graph.sub(b, graph.constant(1))))));
        add(b, graph.constantOf(b) === undefined ? graph.mul(g, graph.mul(i, graph.apply("log", a))) : graph.constant(0));
        break;
      case "select":
        for (const [variable, partial] of ofChoice(graph, i, variables, links, choices)) add(variable, graph.mul(g, partial));
        break;
      // Flags, states and steps are flat wherever they have a derivative.
      default:
        break;
    }
  }
  return found;
}

function ofChoice(graph: Graph, choice: number, variables: ReadonlySet<number>, links: Links, choices: Map<number, Partials>): Partials {
  const known = choices.get(choice);
  if (known !== undefined) return known;
  const { a, b, c } = graph.at(choice);
  // Links are followed once, by whoever asked; here they would count twice.
  const none: Links = new Map();
  const yes = reverse(graph, b, variables, none, choices);
  const no = reverse(graph, c, variables, none, choices);
  const zero = graph.constant(0);
  const found: Partials = new Map();
  for (const variable of [...new Set([...yes.keys(), ...no.keys()])].sort((x, y) => x - y)) {
    found.set(variable, graph.select(a, yes.get(variable) ?? zero, no.get(variable) ?? zero));
  }
  choices.set(choice, found);
  return found;
}
