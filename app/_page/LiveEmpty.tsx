"use client";

import { kindItems, addBlockBehind } from "@/app/_blocks/blockMenu";
import { KindSwatch } from "@/app/_ui/KindSwatch";
import { Button } from "@/app/_ui/Button";
import { Menu } from "@/app/_ui/Menu";
import { blockKinds } from "@/cells";
import { kindWords } from "./kindWords";
import { usePage, useWholeView } from "./pageContext";
import { goToBlock } from "./goTo";

/** What a page without blocks says: what to do next. */
export function LiveEmpty() {
  const view = useWholeView();
  const hasStarted = usePage((s) => s.save !== null || s.mode === "read");
  const add = (kind: (typeof blockKinds)[number]) => {
    const key = addBlockBehind(view, kind, null);
    if (key !== undefined) requestAnimationFrame(() => goToBlock(key));
  };
  if (view.edits === null) return <p className="mb-10 text-second">{hasStarted ? "Nothing is on this page yet." : "Opening the page."}</p>;
  return (
    <section className="mb-10 max-w-[936px] border-t border-ink pt-3" aria-label="The first block">
      <p className="text-second">Nothing is on this page yet. Begin with data, or with a note on the question.</p>
      <ul className="mt-3 grid grid-cols-2 gap-x-8 phone:grid-cols-1">
        {blockKinds.map((kind) => (
          <li key={kind} className="border-b border-hairline py-1.5">
            <Button onClick={() => add(kind)}>
              <KindSwatch kind={kind} className="text-ink" /> {kindWords[kind].title}
            </Button>{" "}
            <span className="text-second">{kindWords[kind].says}</span>
          </li>
        ))}
      </ul>
    </section>
  );
}

/** Adds a block at the end of a page. */
export function AddBlock() {
  const view = useWholeView();
  const last = usePage((s) => s.blocks[s.blocks.length - 1]?.key ?? null);
  if (view.edits === null || last === null) return null;
  return (
    <div className="chrome mb-8">
      <Menu
        align="start"
        items={kindItems((kind) => {
          const key = addBlockBehind(view, kind, last);
          if (key !== undefined) requestAnimationFrame(() => requestAnimationFrame(() => goToBlock(key)));
        })}
      >
        <Button>Add a block</Button>
      </Menu>
    </div>
  );
}
