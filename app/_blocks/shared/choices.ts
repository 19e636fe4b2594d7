import type { PageView } from "@/app/_page/contract";
import type { BlockKind } from "@/cells";

export interface Choice {
  readonly value: string;
  readonly label: string;
}

/** Handles of the page's blocks of a kind, as choices with their titles. */
export function handleChoices(view: PageView, kind: BlockKind): Choice[] {
  return view.blocks
    .filter((b) => b.block.kind === kind)
    .map(({ block }) => ({ value: block.id, label: block.name ? `${block.id}, ${block.name}` : block.id }));
}

/** The choices with the present one among them: one whose block is gone stays visible, so that nothing changes unasked. */
export function withCurrent(choices: readonly Choice[], current: string): Choice[] {
  return choices.some((c) => c.value === current) ? [...choices] : [{ value: current, label: `${current}, not on this page` }, ...choices];
}
