"use client";

import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { Popover } from "@/app/_ui/Popover";
import { Select } from "@/app/_ui/Select";
import { handleChoices, withCurrent } from "@/app/_blocks/shared/choices";
import { CommitField } from "@/app/_blocks/shared/CommitField";
import type { TrendBlock, TrendResult } from "@/cells";

const methods: readonly { value: TrendBlock["method"]; label: string }[] = [
  { value: "york", label: "York, errors on both axes" },
  { value: "ordinary least squares", label: "ordinary least squares" },
  { value: "reduced major axis", label: "reduced major axis" },
  { value: "theil-sen", label: "Theil–Sen" },
];

const scatters: readonly { value: NonNullable<TrendBlock["scatter"]>; label: string }[] = [
  { value: "likelihood", label: "as scatter of its own, by maximum likelihood" },
  { value: "root mswd", label: "as errors × √MSWD" },
  { value: "none", label: "not at all" },
];

export interface TrendSettingsProps {
  readonly block: TrendBlock;
  readonly result: TrendResult | undefined;
  readonly view: PageView;
  /** Sets one field of the block; undefined takes it away. */
  onSet(field: string, value: string | undefined): void;
}

/** What the trend is fitted to, and how. */
export function TrendSettings({ block, result, view, onSet }: TrendSettingsProps) {
  const problem = (field: string): string | null => result?.problems.find((p) => p.field === field)?.text ?? null;
  const others = handleChoices(view, "trend").filter((t) => t.value !== block.id);
  return (
    <Popover label="Samples and method" trigger={<Button>Samples and method</Button>}>
      <div className="grid gap-3">
        <Select label="Samples of" value={block.data} options={withCurrent(handleChoices(view, "data"), block.data)} onChoose={(data) => onSet("data", data)} />
        <CommitField label="Across" mono value={block.x} placeholder="Mg / Si" problem={problem("x")} onCommit={(x) => onSet("x", x.trim())} />
        <CommitField label="Upwards" mono value={block.y} placeholder="Al / Si" problem={problem("y")} onCommit={(y) => onSet("y", y.trim())} />
        <CommitField
          label="Only where"
          mono
          value={block.where ?? ""}
          placeholder={'Group != "CI"'}
          hint="Left empty, all samples are fitted."
          problem={problem("where")}
          onCommit={(where) => onSet("where", where.trim() === "" ? undefined : where.trim())}
        />
        <Select label="Method" value={block.method} options={methods} onChoose={(method) => onSet("method", method)} />
        {block.method === "york" && (
          <Select
            label="Scatter beyond the errors enters"
            value={block.scatter ?? "likelihood"}
            options={scatters}
            onChoose={(scatter) => onSet("scatter", scatter === "likelihood" ? undefined : scatter)}
          />
        )}
        <Select
          label="Crosses"
          value={block.crossWith ?? ""}
          options={[{ value: "", label: "no other trend" }, ...(block.crossWith === undefined ? others : withCurrent(others, block.crossWith))]}
          onChoose={(other) => onSet("crossWith", other === "" ? undefined : other)}
        />
      </div>
    </Popover>
  );
}
