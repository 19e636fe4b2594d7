import type { Block, Drawn, PlotBlock } from "@/cells";

export interface NewDrawn {
  readonly label: string;
  readonly drawn: Drawn;
}

/**
 * What may be added to a plot now: one choice for each sort of thing the page has, filled with what it most likely is.
 *
 * @param middle where a new annotation stands
 */
export function newDrawn(block: PlotBlock, blocks: readonly Block[], bodies: readonly string[], middle = { x: 1, y: 0.1 }): readonly NewDrawn[] {
  const last = (kind: Block["kind"]): string | undefined => blocks.filter((b) => b.kind === kind).at(-1)?.id;
  const choices: NewDrawn[] = [];
  const data = last("data");
  const first = block.drawn.find((d) => "data" in d);
  if (data !== undefined) {
    const axes =
      first !== undefined && "data" in first
        ? {
            ...(first.x === undefined ? {} : { x: first.x }),
            ...(first.y === undefined ? {} : { y: first.y }),
            ...(first.z === undefined ? {} : { z: first.z }),
          }
        : {};
    choices.push({ label: "Samples", drawn: { data, ...axes, ...(block.plot === "scatter" ? { ellipses: "1 sigma" } : {}) } });
  }
  if (block.plot === "scatter" || block.plot === "ternary") {
    const isDrawn = (kind: "trend" | "crossing" | "budget", id: string): boolean =>
      block.drawn.some((d) => kind in d && (d as Readonly<Record<string, unknown>>)[kind] === id);
    for (const b of blocks) {
      if (block.plot === "scatter" && b.kind === "trend" && !isDrawn("trend", b.id)) choices.push({ label: `Trend ${b.id}`, drawn: { trend: b.id } });
      if (block.plot === "scatter" && b.kind === "trend" && b.crossWith !== undefined && !isDrawn("crossing", b.id))
        choices.push({ label: `Crossing of ${b.id} with ${b.crossWith}`, drawn: { crossing: b.id } });
      if (b.kind === "budget" && !isDrawn("budget", b.id)) choices.push({ label: `Path of ${b.id}`, drawn: { budget: b.id } });
    }
  }
  choices.push({
    label: "Bodies",
    drawn: { bodies: [...bodies].slice(0, 40), ...(block.plot === "scatter" || block.plot === "ternary" ? { ellipses: "1 sigma" } : {}) },
  });
  choices.push({ label: "Annotation", drawn: { annotation: "Text", ...middle } });
  return choices;
}
