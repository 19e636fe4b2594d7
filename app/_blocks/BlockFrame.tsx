"use client";

import { memo, useState, type KeyboardEvent } from "react";
import { usePage, useBlockView } from "@/app/_page/pageContext";
import { FRAME_ATTRIBUTE } from "@/app/_page/rail/useRailBlocks";
import { goToBlock } from "@/app/_page/goTo";
import { Button } from "@/app/_ui/Button";
import { IconMove } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";
import { BlockBoundary } from "./BlockBoundary";
import { BlockHead } from "./BlockHead";
import { addBlockBehind, blockMenuItems, kindItems, moveByStep } from "./blockMenu";
import { viewOf } from "./index";
import { useRefusal } from "./shared/useRefusal";
import { useBlockDrag } from "./useBlockDrag";

/** A block on the page: its head, its view, and what can be done to it as a whole. No box, no toolbar. */
export const BlockFrame = memo(function BlockFrame({ blockKey }: { readonly blockKey: string }) {
  const view = useBlockView(blockKey);
  const block = view.blocks.find((b) => b.key === blockKey)?.block;
  const loading = usePage((s) => block !== undefined && s.loading.has(block.id));
  const [renaming, setRenaming] = useState<"name" | "handle" | null>(null);
  const [run, refusal] = useRefusal();
  const { edits } = view;
  const startDrag = useBlockDrag(
    blockKey,
    view.blocks.map((b) => b.key),
    (after) => run(() => edits?.moveBlock(blockKey, after)),
  );
  if (block === undefined) return null;
  const View = viewOf(block.kind);

  const onKeyDown = (event: KeyboardEvent) => {
    if (edits === null || !event.altKey || event.ctrlKey || event.metaKey) return;
    const step = event.key === "ArrowUp" ? -1 : event.key === "ArrowDown" ? 1 : undefined;
    // Dialogs of the block stand elsewhere on the screen, and a list opens by these keys.
    if (step === undefined || !event.currentTarget.contains(event.target as Node) || event.target instanceof HTMLSelectElement) return;
    event.preventDefault();
    run(() => moveByStep(view, blockKey, step));
    // Moving may remount the frame; the focus stays with the block.
    requestAnimationFrame(() => goToBlock(blockKey));
  };
  const enter = () => view.enter(blockKey);
  return (
    <section
      id={block.id}
      {...{ [FRAME_ATTRIBUTE]: blockKey }}
      tabIndex={-1}
      aria-label={`${block.name ?? block.kind} (${block.kind} ${block.id})`}
      className={`block span-${block.width ?? 12}`}
      onKeyDown={onKeyDown}
      onFocus={enter}
      onPointerDown={enter}
    >
      <BlockHead blockKey={blockKey} block={block} view={view} loading={loading} renaming={renaming} onRenamed={() => setRenaming(null)} run={run} />
      {edits === null ? null : (
        <div className="block-actions chrome">
          <Menu items={kindItems((kind) => run(() => addBlockBehind(view, kind, blockKey)))}>
            <Button>Add below</Button>
          </Menu>
          <Menu
            items={blockMenuItems(view, blockKey, {
              onRename: () => setRenaming("name"),
              onRenameHandle: () => setRenaming("handle"),
              run,
            })}
          >
            <Button aria-label={`More for ${block.name ?? block.id}`}>More</Button>
          </Menu>
          <Button
            look="quiet"
            aria-label={`Move ${block.name ?? block.id}: drag, or press Alt and an arrow`}
            title="Drag to move, or Alt ↑ and Alt ↓"
            className="cursor-grab touch-none"
            onPointerDown={startDrag}
          >
            <IconMove />
          </Button>
        </div>
      )}
      {refusal === null ? null : (
        <p role="alert" className="py-1 text-vermilion">
          {refusal}
        </p>
      )}
      <BlockBoundary>
        <View blockKey={blockKey} block={block} view={view} />
      </BlockBoundary>
    </section>
  );
});
