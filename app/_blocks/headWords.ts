import type { Block, BlockResult, Substance } from "@/cells";
import { counted } from "@/app/_ui/concise";

/** What stands in a block's head after its name: words, and names to be set in the figures' type. */
export type HeadPart = string | { readonly name: string };

const names = (handles: readonly string[]): HeadPart[] => handles.flatMap((handle, i): HeadPart[] => (i === 0 ? [{ name: handle }] : [", ", { name: handle }]));

function substanceName(what: Substance): HeadPart[] {
  if ("body" in what) return [{ name: what.body }];
  if ("phase" in what) return [{ name: what.phase }];
  if ("element" in what) return [{ name: what.element }];
  if ("data" in what) return [{ name: what.data }, ", ", { name: "sample" in what ? what.sample : "class" in what ? what.class : String(what.row) }];
  return ["a composition typed in"];
}

/** What a block reads from, as its head says it: "source kestrel-law.csv, 16 rows", "reads all", "starts at BSE". */
export function readsInWords(block: Block, from: readonly string[], result: BlockResult | undefined): HeadPart[] {
  switch (block.kind) {
    case "data": {
      const rows = result?.kind === "data" && result.table !== undefined ? result.table.rows : undefined;
      const counts = rows === undefined ? [] : [`, ${counted(rows, "row")}`];
      if (block.source !== undefined) return ["source ", { name: block.source.file }, ...counts];
      if (block.stack !== undefined) return ["stacks ", ...names(block.stack), ...counts];
      if (block.join !== undefined) return ["joins ", ...names(block.join), ...counts];
      return (block.typed?.length ?? 0) === 0 ? [] : ["typed by hand", ...counts];
    }
    case "formula":
      return block.data === undefined ? [] : ["reads ", { name: block.data }];
    case "plot":
      return from.length === 0 ? [] : ["draws ", ...names(from)];
    case "trend":
      return [
        "reads ",
        { name: block.data },
        {
          york: ", York, errors correlated",
          "ordinary least squares": ", ordinary least squares",
          "reduced major axis": ", reduced major axis",
          "theil-sen": ", Theil–Sen",
        }[block.method],
      ];
    case "budget": {
      const aim =
        block.target === undefined
          ? []
          : "trend" in block.target
            ? [", aims at ", { name: block.target.trend }]
            : "body" in block.target.equals
              ? [", aims at ", { name: block.target.equals.body }]
              : [", aims at a value"];
      return ["starts at ", ...substanceName(block.start), ...aim];
    }
    case "note":
      return from.length === 0 ? [] : ["quotes ", ...names(from)];
  }
}

export interface StateWords {
  readonly text: string;
  readonly problem: boolean;
}

/** State of a block, where its view does not say it better. */
export function plainState(result: BlockResult | undefined): StateWords {
  if (result === undefined) return { text: "", problem: false };
  const errors = result.problems.filter((p) => p.severity === "error").length;
  const warnings = result.problems.filter((p) => p.severity === "warning").length;
  if (errors > 0) return { text: counted(errors, "problem"), problem: true };
  return { text: warnings > 0 ? counted(warnings, "warning") : "", problem: false };
}
