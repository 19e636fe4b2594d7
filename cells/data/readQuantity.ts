import { Z_95 } from "../numeric";
import type { UncertaintyKind } from "../page/schema";
import { State } from "../quantity/state";
import { sigmaToCanonical, toCanonical, type Unit } from "../quantity/unit";
import { readCell, type ReadCell } from "../table";
import type { Amended } from "./amend";
import { draftColumn, type DraftColumn } from "./draft";
import type { Grid } from "./grid";
import type { MappedQuantity } from "./mapColumns";
import { counted, type Problems } from "./problems";

const PLAIN = /^-?\d+(?:\.\d+)?$/u;

/** What an uncertainty of each kind is divided by to be 1σ; a 95 % interval is its half-width. */
const divisors: Readonly<Record<UncertaintyKind, number>> = {
  "1 sigma": 1,
  "2 sigma": 2,
  "1 sigma relative %": 1,
  "2 sigma relative %": 2,
  "95 % interval": Z_95,
};

function isRelative(kind: UncertaintyKind): boolean {
  return kind === "1 sigma relative %" || kind === "2 sigma relative %";
}

/**
 * Reads a column of values and the 1σ beside or inside them, row by row, into canonical units.
 *
 * A cell that cannot be read is an error and has no value; an uncertainty that cannot be read is an error and unknown. An
 * unknown σ is NaN, never 0. Cost: one pass over the rows, nothing allocated for cells that are plain numbers.
 */
export function readQuantity(grid: Grid, mapped: MappedQuantity, amended: Amended, problems: Problems): DraftColumn {
  const reader = new QuantityReader(grid, mapped, amended, problems);
  return reader.read();
}

class QuantityReader {
  private readonly column: DraftColumn;
  /** Uncertainties inside cells, as written in the column's unit and of the kind of such; by row. */
  private readonly inside = new Map<number, number>();
  private untold = 0;
  private exact = 0;
  private ofZero = 0;

  constructor(
    private readonly grid: Grid,
    private readonly mapped: MappedQuantity,
    private readonly amended: Amended,
    private readonly problems: Problems,
  ) {
    const { sigma, ...meaning } = mapped;
    const sigmaHeader = sigma?.header ?? sigma?.name;
    this.column = draftColumn({ ...meaning, ...(sigmaHeader === undefined ? {} : { sigmaHeader }) }, grid.rows.length);
  }

  read(): DraftColumn {
    this.readValues();
    if (this.mapped.sigma !== undefined) this.readSigmas();
    this.placeInside();
    this.summarise();
    return this.column;
  }

  private readValues(): void {
    const { grid, column } = this;
    const { at, unit } = this.mapped;
    const changed = this.amended.get(at);
    const pointed = grid.decimal === ".";
    for (let row = 0; row < grid.rows.length; row++) {
      const source = grid.rows[row]?.[at] ?? "";
      column.raw[row] = source;
      let text = source;
      if (changed !== undefined) {
        const value = changed.get(row);
        if (value !== undefined) {
          text = value;
          column.amended[row] = 1;
        }
      }
      if (pointed && PLAIN.test(text)) this.place(row, Number(text), unit);
      else this.placeCell(row, readCell(text, grid.decimal));
    }
  }

  private place(row: number, value: number, unit: Unit): void {
    const canonical = toCanonical(value, unit);
    if (unit.dimension === "temperature" && canonical < 0) {
      this.column.state[row] = State.outOfDomain;
      this.say("out-of-domain", row, `${value} ${unit.symbol} is below absolute zero, so it is out of domain. Amend it.`);
      return;
    }
    this.column.value[row] = canonical;
    this.column.state[row] = State.present;
  }

  private placeCell(row: number, cell: ReadCell): void {
    switch (cell.kind) {
      case "missing":
        return;
      case "unreadable":
        this.say(cell.code, row, cell.text);
        return;
      case "below": {
        this.column.state[row] = State.belowDetection;
        if (cell.limit === null) return;
        const unit = this.unitIn(row, cell.unit);
        if (unit !== undefined) this.column.limit[row] = toCanonical(cell.limit, unit);
        return;
      }
      case "value": {
        const unit = this.unitIn(row, cell.unit);
        if (unit === undefined) return;
        this.place(row, cell.value, unit);
        if (cell.sigma !== null && this.column.state[row] === State.present) this.noteInside(row, cell.value, cell.sigma, cell.relative, unit);
      }
    }
  }

  /** A unit inside a cell counts for that cell, if it is of the column's kind. */
  private unitIn(row: number, unit: Unit | undefined): Unit | undefined {
    const own = this.mapped.unit;
    if (unit === undefined) return own;
    if (unit.dimension === own.dimension) return unit;
    this.say("cell-unit", row, `the cell is in ${unit.symbol}, and the column in ${own.symbol}: one cannot be read as the other. Amend it.`);
    return undefined;
  }

  private noteInside(row: number, value: number, sigma: number, percent: boolean, unit: Unit): void {
    const kind = this.mapped.inCells ?? "1 sigma";
    if (percent && unit.symbol === "wt%" && !isRelative(kind)) {
      this.say(
        "sigma-percent",
        row,
        `its uncertainty is in "%", which may mean wt% or per cent of the value, so it is taken as unknown. Amend it without the sign.`,
      );
      return;
    }
    if (this.mapped.inCells === undefined) this.untold++;
    this.inside.set(row, this.oneSigma(value, sigma, kind, percent || isRelative(kind), unit));
  }

  /** An uncertainty as written, in canonical units as 1σ; NaN where a relative one has nothing to be relative to. */
  private oneSigma(value: number, written: number, kind: UncertaintyKind, relative: boolean, unit: Unit): number {
    if (!relative) return sigmaToCanonical(written / divisors[kind], unit);
    if (value === 0) {
      this.ofZero++;
      return Number.NaN;
    }
    return sigmaToCanonical((written / divisors[kind] / 100) * Math.abs(value), unit);
  }

  private readSigmas(): void {
    const { grid, column } = this;
    const { sigma, unit: valueUnit } = this.mapped;
    if (sigma === undefined) return;
    const changed = this.amended.get(sigma.at);
    const relative = isRelative(sigma.kind);
    const pointed = grid.decimal === ".";
    for (let row = 0; row < grid.rows.length; row++) {
      const source = grid.rows[row]?.[sigma.at] ?? "";
      column.rawSigma[row] = source;
      if (column.state[row] !== State.present) continue;
      const text = changed?.get(row) ?? source;
      let written: number;
      let unit = sigma.unit;
      if (pointed && PLAIN.test(text)) written = Number(text);
      else {
        const cell = readCell(text.trim().replace(/^(?:±|\+\/-|\+-)\s*/u, ""), grid.decimal);
        if (cell.kind === "missing") continue;
        if (cell.kind !== "value" || cell.sigma !== null) {
          this.saySigma(row, cell.kind === "unreadable" ? cell.text : `"${text.trim()}" is no uncertainty.`);
          continue;
        }
        written = cell.value;
        if (cell.unit !== undefined && !relative) {
          if (cell.unit.dimension !== unit.dimension) {
            this.saySigma(row, `it is in ${cell.unit.symbol}, and the value in ${valueUnit.symbol}.`);
            continue;
          }
          unit = cell.unit;
        }
      }
      if (written < 0) {
        this.saySigma(row, `"${text.trim()}" is below zero, which no uncertainty is.`);
        continue;
      }
      if (written === 0) this.exact++;
      const value = relative ? (column.value[row] ?? Number.NaN) - valueUnit.offset : 0;
      // Per cent of the value as it is written: canonical and written value differ by a factor alone, once the offset is off.
      column.sigma[row] = relative
        ? this.oneSigma(value * valueUnit.per, written, sigma.kind, true, valueUnit)
        : this.oneSigma(0, written, sigma.kind, false, unit);
    }
  }

  /** An amendment's own uncertainty counts before the source's neighbour column; elsewhere the neighbour column counts. */
  private placeInside(): void {
    const { column } = this;
    for (const [row, sigma] of this.inside) {
      const beside = column.sigma[row] ?? Number.NaN;
      if (Number.isNaN(beside) || column.amended[row] === 1) {
        column.sigma[row] = sigma;
        if ((column.rawSigma[row] ?? "").trim() === "") column.rawSigma[row] = column.raw[row] ?? "";
      } else if (Math.abs(beside - sigma) > 1e-6 * beside) {
        this.problems.oneOfMany(
          "warning",
          "sigma-differs",
          `Row ${this.rowId(row)}: ${this.mapped.name} has one uncertainty inside its cell and another beside it; the one beside it, in "${column.sigmaHeader ?? ""}", is used.`,
          { row: this.rowId(row), column: this.mapped.name },
          `more values of ${this.mapped.name} have two uncertainties that differ`,
        );
      }
    }
  }

  private summarise(): void {
    const { name } = this.mapped;
    const place = { column: name };
    if (this.untold > 0)
      this.problems.warning(
        "sigma-kind-assumed",
        `${counted(this.untold, "value")} of ${name} carry an uncertainty inside the cell, and nothing says of which kind; they are read as 1σ. Say which kind it is in the columns of the table.`,
        place,
      );
    if (this.exact > 0)
      this.problems.warning(
        "sigma-zero",
        `${counted(this.exact, "uncertainty", "uncertainties")} of ${name} ${this.exact === 1 ? "is" : "are"} 0 in the source, which says that the value is exact. Where the uncertainty is unknown, amend it with nothing.`,
        place,
      );
    if (this.ofZero > 0)
      this.problems.warning(
        "sigma-of-zero",
        `${counted(this.ofZero, "value")} of ${name} ${this.ofZero === 1 ? "is" : "are"} 0 with an uncertainty in per cent of the value, which says nothing; the σ is unknown there.`,
        place,
      );
  }

  private rowId(row: number): number | string {
    return this.grid.rowIds[row] ?? row + 1;
  }

  private say(code: string, row: number, text: string): void {
    const { name } = this.mapped;
    const id = this.rowId(row);
    this.problems.oneOfMany("error", code, `Row ${id}, ${name}: ${text}`, { row: id, column: name }, `more cells of ${name} have the same fault`);
  }

  private saySigma(row: number, why: string): void {
    const { name, sigma } = this.mapped;
    const id = this.rowId(row);
    const column = sigma?.header ?? sigma?.name ?? name;
    this.problems.oneOfMany(
      "error",
      "sigma-unreadable",
      `Row ${id}, uncertainty of ${name}: ${why} The σ is unknown there; amend it with a number, or with nothing.`,
      { row: id, column },
      `more uncertainties of ${name} cannot be read`,
    );
  }
}
