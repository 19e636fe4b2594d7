import type { MenuItem } from "@/app/_ui/Menu";
import { blockWidths, placeAfterStep, widthWords, type BlockWidth } from "@/app/_page/arrangement";
import { kindWords } from "@/app/_page/kindWords";
import type { PageView } from "@/app/_page/contract";
import { blockKinds, type BlockKind } from "@/cells";
import { KindSwatch } from "@/app/_ui/KindSwatch";
import { freshBlock } from "./freshBlock";

/** Puts a new block of a kind behind another (null: at the top), and gives its key. */
export function addBlockBehind(view: PageView, kind: BlockKind, afterKey: string | null): string | undefined {
  const after = view.blocks.find((b) => b.key === afterKey)?.block ?? null;
  return view.edits?.addBlock(freshBlock(kind, { blocks: view.blocks.map((b) => b.block), after, bodies: view.bodies }), afterKey);
}

/** The kinds of block, for menus that add one. */
export function kindItems(onChoose: (kind: BlockKind) => void): MenuItem[] {
  return blockKinds.map((kind) => ({
    label: (
      <span className="flex items-center gap-2">
        <KindSwatch kind={kind} />
        <span className="w-16">{kindWords[kind].title}</span>
        <span className="text-margin text-second">{kindWords[kind].says}</span>
      </span>
    ),
    onChoose: () => onChoose(kind),
  }));
}

/** Moves a block by one place; false where it stands at the end. */
export function moveByStep(view: PageView, key: string, step: -1 | 1): boolean {
  const after = placeAfterStep(
    view.blocks.map((b) => b.key),
    key,
    step,
  );
  if (after === undefined) return false;
  view.edits?.moveBlock(key, after);
  return true;
}

export interface BlockMenuActions {
  readonly onRename: () => void;
  readonly onRenameHandle: () => void;
  readonly run: (edit: () => void) => void;
}

/** Everything that can be done to a block as a whole. */
export function blockMenuItems(view: PageView, key: string, actions: BlockMenuActions): MenuItem[] {
  const at = view.blocks.findIndex((b) => b.key === key);
  const block = view.blocks[at]?.block;
  const width: BlockWidth = block?.width ?? 12;
  const { run } = actions;
  return [
    { label: "Rename", opens: true, onChoose: actions.onRename },
    { label: "Change its handle", opens: true, onChoose: actions.onRenameHandle },
    { line: true },
    { label: "Move up", keys: "Alt ↑", disabled: at <= 0, onChoose: () => run(() => moveByStep(view, key, -1)) },
    { label: "Move down", keys: "Alt ↓", disabled: at === view.blocks.length - 1, onChoose: () => run(() => moveByStep(view, key, 1)) },
    { line: true },
    { heading: "Width" },
    ...blockWidths.map((w): MenuItem => ({ label: widthWords[w], checked: w === width, onChoose: () => run(() => view.edits?.setWidth(key, w)) })),
    { line: true },
    { label: "Duplicate", onChoose: () => run(() => view.edits?.duplicateBlock(key)) },
    { label: "Move to the bin", danger: true, onChoose: () => run(() => view.edits?.binBlock(key)) },
  ];
}
