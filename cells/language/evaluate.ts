import { CellError, type Problem, type Span } from "../errors";
import { State } from "../quantity/state";
import type { Unit } from "../quantity/unit";
import { Compiler } from "./compiler";
import type { CompiledValue } from "./compiled";
import { canonicalUnit, composedSymbol, statedBasis } from "./dimension";
import { Evaluated } from "./evaluated";
import { notANumber, type Frame } from "./frame";
import { measure, type Measurement } from "./measure";
import { plainNumber, shownUnit, type Meaning } from "./meaning";
import { parse } from "./parse";
import type { ExpressionPlace, Scope } from "./scope";

/**
 * Calculates an expression over the rows of the scope's table, or once where nothing in it differs from row to row. The
 * digits depend on the expression and the data alone. A condition comes to 1 and 0.
 *
 * @throws CellError with its place in the field's text
 */
export function evaluateExpression(scope: Scope, text: string, at: ExpressionPlace): Evaluated {
  return placed(text, at, () => {
    const compiler = new Compiler();
    const frame: Frame = { scope, text, on: "table" };
    const tree = parse(text);
    const made = compiler.compile(tree, frame);
    if (made.kind === "text" || made.kind === "labels") throw new CellError("not-a-number", notANumber(made, text.trim()), { span: tree.span });
    const value: CompiledValue = made.kind === "value" ? made : { ...made, kind: "value", meaning: { ...plainNumber, remark: "condition" } };
    return finish(compiler, value, at);
  });
}

function finish(compiler: Compiler, value: CompiledValue, at: ExpressionPlace): Evaluated {
  const { graph, uses } = compiler;
  const unit = unitOf(value.meaning);
  const canonical = unit.offset === 0 ? value.node : graph.sub(value.node, graph.constant(unit.offset));
  const measured = measure(compiler, value, graph.mul(canonical, graph.constant(unit.per)));
  const problems = [...uses.warnings].map(([key, text]): Problem => ({
    code: key.split("|")[0] ?? "warning",
    severity: "warning",
    block: at.block,
    ...(at.field === undefined ? {} : { field: at.field }),
    text,
  }));
  if (measured.nearEdgeCount > 0)
    problems.push({
      code: "first-order",
      severity: "warning",
      block: at.block,
      ...(at.field === undefined ? {} : { field: at.field }),
      text: nearEdgeSentence(compiler, measured),
    });
  const { over } = value;
  const meaning = { unit, basis: statedBasis(value.meaning.counting), remark: value.meaning.remark ?? null };
  return new Evaluated(meaning, measured, {
    table: over?.table ?? null,
    ...(over?.split == null ? {} : { byClass: over.split.classes, splitColumn: over.split.column }),
    problems,
    uses,
  });
}

function nearEdgeSentence(compiler: Compiler, { nearEdgeCount, length }: Measurement): string {
  const watched = [...new Set([...compiler.edges.values()].map((edge) => edge.source))];
  const sources = `${watched.length > 1 ? "one of " : ""}${watched.slice(0, 4).join(", ")}`;
  const where = length === 1 ? "Here" : `In ${nearEdgeCount} of ${length} values`;
  return `${where} the σ of ${sources} is large against the value itself (over 10 % in a denominator, or 0 within 3σ in a logarithm or root), so the σ given, which is of first order, is a rough one.`;
}

/** The unit a result is given in: the one chosen, else the canonical one of its dimension, else one put together. */
function unitOf(meaning: Meaning): Unit {
  const known = shownUnit(meaning) ?? canonicalUnit(meaning.dimension);
  if (known !== undefined) return known;
  const symbol = composedSymbol(meaning.dimension);
  return { symbol, dimension: "dimensionless", per: 1, offset: 0, ucum: "1" };
}

/**
 * Where a condition holds over the rows of the scope's table: 1 where it is true, 0 where it is false or cannot be told,
 * because a value it needs is missing, below detection or set aside.
 *
 * @throws CellError with its place in the field's text
 */
export function evaluateCondition(scope: Scope, text: string, at: ExpressionPlace): Uint8Array {
  return placed(text, at, () => {
    const compiler = new Compiler();
    const frame: Frame = { scope, text, on: "table" };
    const tree = parse(text);
    const { node, state, over } = compiler.condition(tree, frame, "Choosing samples");
    const value: CompiledValue = { kind: "value", node, state, meaning: plainNumber, over };
    const measured = measure(compiler, value);
    const rows = scope.table?.rows ?? 1;
    if (over !== null && scope.table !== null && over.table !== scope.table) {
      throw new CellError(
        "table-mismatch",
        `This condition holds or not for the samples of ${over.table.handle}, and samples of ${scope.table.handle} are chosen.`,
        { span: tree.span },
      );
    }
    const classOf = over?.split?.classOf;
    const holds = new Uint8Array(rows);
    for (let row = 0; row < rows; row++) {
      const place = over === null ? 0 : classOf === undefined ? row : (classOf[row] ?? -1);
      holds[row] = measured.state[place] === State.present && measured.value[place] === 1 && scope.table?.setAside[row] !== 1 ? 1 : 0;
    }
    return holds;
  });
}

/** Moves the places of errors from the expression to the field it stands in. An error without a place is of the whole expression. */
export function placed<T>(text: string, at: ExpressionPlace, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    const offset = at.offset ?? 0;
    const [start, end]: Span = error.place.span ?? [0, text.length];
    throw new CellError(error.code, error.message, {
      ...error.place,
      span: [start + offset, end + offset],
      ...(at.field === undefined ? {} : { field: at.field }),
    });
  }
}
