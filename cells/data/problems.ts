import type { Problem, Severity } from "../errors";
import type { RowId } from "../page/schema";

/** Problems of one kind that get a sentence of their own; the rest are counted. */
const SENTENCES = 20;

interface Place {
  readonly row?: RowId;
  readonly column?: string;
  readonly field?: string;
}

/** Collects what is wrong with a data block while it is read. */
export class Problems {
  private readonly found: Problem[] = [];
  private readonly counted = new Map<string, { count: number; readonly problem: Problem; readonly more: string }>();

  constructor(readonly block: string) {}

  error(code: string, text: string, place: Place = {}): void {
    this.add("error", code, text, place);
  }

  warning(code: string, text: string, place: Place = {}): void {
    this.add("warning", code, text, place);
  }

  note(code: string, text: string, place: Place = {}): void {
    this.add("note", code, text, place);
  }

  /**
   * One of perhaps very many: the first of a column are said one by one, the rest counted at the end.
   *
   * @param more how the rest is said after its number: `more cells of SiO2 cannot be read`
   */
  oneOfMany(severity: Severity, code: string, text: string, place: Place, more: string): void {
    const key = `${code}|${place.column ?? ""}`;
    const known = this.counted.get(key);
    const count = (known?.count ?? 0) + 1;
    this.counted.set(key, { count, problem: { code, severity, block: this.block, ...place, text }, more });
    if (count <= SENTENCES) this.add(severity, code, text, place);
  }

  /** Problems that others found, said as this block's. */
  take(problems: readonly Problem[]): void {
    for (const problem of problems) this.found.push({ ...problem, block: this.block });
  }

  list(): readonly Problem[] {
    const rest = [...this.counted.values()]
      .filter(({ count }) => count > SENTENCES)
      .map(({ count, problem, more }): Problem => {
        const { row: _, ...without } = problem;
        return { ...without, text: `${count - SENTENCES} ${more}.` };
      });
    return [...this.found, ...rest];
  }

  private add(severity: Severity, code: string, text: string, place: Place): void {
    this.found.push({ code, severity, block: this.block, ...place, text });
  }
}

/** `SiO2, MgO and 3 more` */
export function listed(names: readonly string[], most = 6): string {
  const shown = names.slice(0, most);
  const rest = names.length - shown.length;
  if (rest > 0) return `${shown.join(", ")} and ${rest} more`;
  const last = shown.pop();
  return shown.length === 0 ? (last ?? "") : `${shown.join(", ")} and ${last ?? ""}`;
}

/** `1 value`, `3 values` */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`;
}
