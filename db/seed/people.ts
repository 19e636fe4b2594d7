import type { GroupRole } from "../access";

/** The demo group. It, its people and its finds are invented. */
export const demoGroup = { id: "5ce11a9e-0000-4000-8000-000000000001", name: "Skerry Cosmochemistry" } as const;

/** One password for all of them: it protects nothing, and README says it. */
export const demoPassword = "plane-light-demo";

export interface DemoPerson {
  readonly name: string;
  readonly email: string;
  readonly role: GroupRole;
}

export const demoPeople: readonly DemoPerson[] = [
  { name: "Noor Halvorsen", email: "noor@skerry.example", role: "lead" },
  { name: "Teodor Amaru", email: "teodor@skerry.example", role: "analyst" },
  { name: "Wilhelmina Okoro", email: "wilhelmina@skerry.example", role: "reader" },
];
