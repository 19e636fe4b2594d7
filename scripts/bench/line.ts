/** One line of the benchmark's report: a figure beside its goal. */
export interface Line {
  readonly what: string;
  readonly rows: number;
  /** Time of ours ÷ time of the other, or how many times faster ours is. */
  readonly is: "ratio" | "times faster";
  readonly figure: number;
  readonly goal?: number;
}

export function textOf({ what, rows, is, figure, goal }: Line, width: number): string {
  const shown = is === "ratio" ? threeDigits(figure) : `${threeDigits(figure)} × faster`;
  const start = `${what.padEnd(width)}  ${rows.toLocaleString("en").padStart(9)} rows  ${shown.padStart(15)}`;
  if (goal === undefined) return start;
  const reached = is === "ratio" ? figure <= goal : figure >= goal;
  return `${start}   goal ${is === "ratio" ? "≤" : "≥"} ${goal}: ${reached ? "reached" : "not reached"}`;
}

export function threeDigits(value: number): string {
  return value >= 1000 ? value.toFixed(0) : value.toPrecision(3);
}
