import { Facet, StateEffect, StateField, type EditorState, type Extension, type Range } from "@codemirror/state";
import { Decoration, EditorView, WidgetType, type DecorationSet } from "@codemirror/view";
import type { Problem } from "@/cells";
import type { HeadHosts } from "./headHosts";
import { formulaLines } from "./lines";

/** A problem at a place in the text. */
export interface PlacedProblem {
  readonly from: number;
  readonly to: number;
  readonly severity: Problem["severity"];
  readonly text: string;
}

/** The problems of the results that have just arrived, to be drawn into the text. */
export const setProblems = StateEffect.define<readonly PlacedProblem[]>();

const hostsFacet = Facet.define<HeadHosts, HeadHosts | null>({ combine: (values) => values[0] ?? null });

class HeadWidget extends WidgetType {
  constructor(
    readonly ordinal: number,
    readonly hosts: HeadHosts,
  ) {
    super();
  }
  override eq(other: HeadWidget): boolean {
    return other.ordinal === this.ordinal && other.hosts === this.hosts;
  }
  override toDOM(): HTMLElement {
    const element = document.createElement("div");
    element.className = "cm-head";
    this.hosts.add(this.ordinal, element);
    return element;
  }
  override destroy(element: HTMLElement): void {
    this.hosts.remove(this.ordinal, element);
  }
  override ignoreEvent(): boolean {
    return true;
  }
  override get estimatedHeight(): number {
    return 92;
  }
}

class ProblemWidget extends WidgetType {
  constructor(
    readonly column: number,
    readonly severity: Problem["severity"],
    readonly text: string,
  ) {
    super();
  }
  override eq(other: ProblemWidget): boolean {
    return other.column === this.column && other.severity === this.severity && other.text === this.text;
  }
  override toDOM(): HTMLElement {
    const element = document.createElement("div");
    element.className = `cm-problem-text cm-problem-${this.severity}`;
    const lead = document.createElement("span");
    lead.className = "cm-problem-lead";
    lead.style.width = `${this.column + 0.5}ch`;
    lead.setAttribute("aria-hidden", "true");
    const text = document.createElement("span");
    text.className = "cm-problem-sentence";
    text.textContent = this.text;
    element.append(lead, text);
    return element;
  }
  override ignoreEvent(): boolean {
    return true;
  }
  override get estimatedHeight(): number {
    return 40;
  }
}

const nameMark = Decoration.mark({ class: "cm-name" });

function headDecorations(state: EditorState): DecorationSet {
  const hosts = state.facet(hostsFacet);
  if (hosts === null) return Decoration.none;
  const ranges: Range<Decoration>[] = [];
  for (const line of formulaLines(state.doc.toString())) {
    ranges.push(Decoration.widget({ widget: new HeadWidget(line.ordinal, hosts), block: true, side: -1 }).range(line.from));
    if (line.nameTo > line.nameFrom) ranges.push(nameMark.range(line.nameFrom, line.nameTo));
  }
  return Decoration.set(ranges, true);
}

const heads = StateField.define<DecorationSet>({
  create: headDecorations,
  update: (value, transaction) => (transaction.docChanged ? headDecorations(transaction.state) : value),
  provide: (field) => EditorView.decorations.from(field),
});

/** Longest column at which the sentence still hangs under its character; further right it starts at the margin. */
const furthestLead = 48;

function problemDecorations(state: EditorState, problems: readonly PlacedProblem[]): DecorationSet {
  const ranges: Range<Decoration>[] = [];
  for (const problem of problems) {
    if (problem.from > state.doc.length) continue;
    const line = state.doc.lineAt(problem.from);
    const to = Math.min(Math.max(problem.to, problem.from + 1), line.to);
    if (to > problem.from) ranges.push(Decoration.mark({ class: `cm-problem cm-problem-${problem.severity}` }).range(problem.from, to));
    const column = problem.from - line.from;
    ranges.push(
      Decoration.widget({ widget: new ProblemWidget(column > furthestLead ? 0 : column, problem.severity, problem.text), block: true, side: 1 }).range(line.to),
    );
  }
  return Decoration.set(ranges, true);
}

const problems = StateField.define<DecorationSet>({
  create: () => Decoration.none,
  update(value, transaction) {
    for (const effect of transaction.effects) if (effect.is(setProblems)) return problemDecorations(transaction.state, effect.value);
    return transaction.docChanged ? value.map(transaction.changes) : value;
  },
  provide: (field) => EditorView.decorations.from(field),
});

/** The heads over the lines and the problems under them. */
export function lineDecorations(hosts: HeadHosts): Extension {
  return [hostsFacet.of(hosts), heads, problems];
}

/** The problems of a block that stand in its text; the others belong elsewhere. */
export function placedProblems(all: readonly Problem[]): readonly PlacedProblem[] {
  return all.flatMap((p) =>
    p.span !== undefined && (p.field === undefined || p.field === "text") ? [{ from: p.span[0], to: p.span[1], severity: p.severity, text: p.text }] : [],
  );
}
