import { counted } from "@/app/_ui/concise";
import type { DataResult } from "@/cells";
import type { StateWords } from "@/app/_blocks/headWords";

/** What a table's head says: "13 in use, 1 set aside, 1 amended". */
export function stateInWords(result: DataResult | undefined): StateWords {
  if (result === undefined) return { text: "", problem: false };
  const errors = result.problems.filter((p) => p.severity === "error").length;
  if (result.table === undefined) return { text: errors > 0 ? "cannot be read" : "", problem: errors > 0 };
  if (result.table.rows === 0) return { text: "no rows yet", problem: errors > 0 };
  const parts = [
    `${result.table.rows - result.setAside} in use`,
    result.setAside > 0 && `${result.setAside} set aside`,
    result.valuesSetAside > 0 && `${counted(result.valuesSetAside, "value")} set aside`,
    result.amended > 0 && `${result.amended} amended`,
    errors > 0 && counted(errors, "problem"),
  ].filter(Boolean);
  return { text: parts.join(", "), problem: errors > 0 };
}
