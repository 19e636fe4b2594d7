"use client";

import { Button } from "@/app/_ui/Button";
import { counted } from "@/app/_ui/concise";
import { ENGINE_VERSION } from "@/cells";
import { countPage } from "./counts";
import type { PageDialog } from "./head/PageHead";
import { usePage } from "./pageContext";

/** The last line of a page: blocks, problems, bin, engine. */
export function LiveFoot({ open }: { readonly open: (dialog: PageDialog) => void }) {
  const blocks = usePage((s) => s.blocks);
  const results = usePage((s) => s.results);
  const calculating = usePage((s) => s.calculating);
  const binned = usePage((s) => s.bin.length);
  const edits = usePage((s) => s.edits);
  const problems = countPage(blocks, results).problems;
  return (
    <footer className="page-foot">
      <span>
        {counted(blocks.length, "block")}, {calculating ? "calculating" : "nothing waiting"}
      </span>
      <span className={problems > 0 ? "text-vermilion" : ""}>{problems === 0 ? "no problems" : counted(problems, "problem")}</span>
      {edits === null ? null : <Button onClick={() => open("bin")}>Bin: {counted(binned, "block")}</Button>}
      <Button className="chrome" onClick={() => open("shortcuts")}>
        Keyboard shortcuts
      </Button>
      <span className="ml-auto font-mono">engine {results?.engine ?? ENGINE_VERSION}</span>
    </footer>
  );
}
