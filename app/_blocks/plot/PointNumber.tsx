import type { PageView } from "@/app/_page/contract";
import { formatValue } from "@/app/_ui/concise";
import { Value } from "@/app/_ui/Value";
import { Asked } from "@/app/_blocks/trace/Asked";

/** Of what a number on a plot is, for asking where it comes from: see cells/trace/plot.ts. */
export interface PointAsked {
  /** Place in the plot's list, with body or class behind it. */
  readonly name: string;
  readonly title: string;
  readonly index?: number;
}

export interface PointNumberProps {
  readonly value: number | null;
  readonly sigma: number | null;
  /** What the number is, as heads of columns say it. */
  readonly of: string;
  readonly name: string;
  readonly asks: PointAsked;
  readonly view: PageView;
  /** Handle of the plot. */
  readonly plot: string;
}

/** A number of a drawn point, to be asked where it comes from. */
export function PointNumber({ value, sigma, of, name, asks, view, plot }: PointNumberProps) {
  const shown = <Value value={value} sigma={sigma} form={view.settings.uncertainty} />;
  if (value === null || !Number.isFinite(value)) return shown;
  const { title, index } = asks;
  return (
    <Asked
      label={`${of} of ${title}, ${formatValue(value, sigma, { form: view.settings.uncertainty })}`}
      onAsk={() => view.trace({ block: plot, name, ...(index === undefined ? {} : { index }) })}
    >
      {shown}
    </Asked>
  );
}
