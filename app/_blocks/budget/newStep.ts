import type { Step } from "@/cells";

export type StepKind = Step["do"];

export const stepKinds: readonly { readonly kind: StepKind; readonly label: string }[] = [
  { kind: "share with metal", label: "Share with metal" },
  { kind: "add", label: "Add" },
  { kind: "remove", label: "Remove" },
  { kind: "mix", label: "Mix in" },
  { kind: "extract melt", label: "Extract melt" },
];

/** A new step of a kind, filled with what people most often begin with. `solves`: whether it may be the one that is solved for. */
export function newStep(kind: StepKind, solves: boolean): Step {
  const amount = solves ? ("solve" as const) : null;
  switch (kind) {
    case "share with metal":
      return { do: kind, species: "Si", metalFraction: { value: 0.323 }, amount: amount ?? { value: 5 } };
    case "extract melt":
      return { do: kind, model: "batch", amount: amount ?? { value: 0.1 }, coefficients: {} };
    case "add":
    case "remove":
    case "mix":
      return { do: kind, what: { phase: "forsterite" }, amount: amount ?? { value: 0.1 } };
  }
}
