import type { PageView } from "@/app/_page/contract";
import type { MenuItem } from "@/app/_ui/Menu";
import { formatValue, withUnit } from "@/app/_ui/concise";

/** What a sample of a table goes into: its numbers in formulas, each with its own trace, and the blocks that read the table. */
export function usesOf(handle: string, row: number, view: PageView): readonly MenuItem[] {
  const { results } = view;
  if (results === null) return [];
  const numbers: MenuItem[] = [];
  const blocks: MenuItem[] = [];
  for (const { block } of view.blocks) {
    if (!(results.readsFrom.get(block.id) ?? []).includes(handle)) continue;
    const result = results.blocks.get(block.id);
    if (block.kind === "formula" && block.data === handle && result?.kind === "formula")
      for (const line of result.lines) {
        const value = line.value[row] ?? NaN;
        if (!line.ok || !line.perSample || !Number.isFinite(value)) continue;
        const text = withUnit(formatValue(value, line.sigma[row] ?? NaN, { form: view.settings.uncertainty }), line.unit);
        numbers.push({ label: `${line.name} ${text}`, onChoose: () => view.trace({ block: block.id, name: line.name, index: row }), opens: true });
      }
    blocks.push({ label: `Go to ${block.name ?? block.id}`, onChoose: () => view.show?.({ block: block.id }), opens: true });
  }
  return [
    ...(numbers.length === 0 ? [] : [{ heading: "This sample's numbers, traced" }, ...numbers]),
    ...(view.show === undefined || blocks.length === 0 ? [] : [{ heading: "Blocks that read this table" }, ...blocks]),
  ];
}
