import { CellError } from "../errors";
import type { BlockContext } from "../page/context";
import type { RowId } from "../page/schema";
import type { ColumnOrigin, QuantityColumn, RowOrigin, Table } from "../table/table";
import type { Problems } from "./problems";

/** A table that another is made of, by the handle it has now. */
export interface Member {
  readonly handle: string;
  readonly table: Table;
}

/**
 * The tables a block is made of.
 *
 * @throws CellError where one is not there: a table without one of its parts would be a smaller table that looks whole
 */
export function membersOf(handles: readonly string[], field: string, context: BlockContext, problems: Problems): readonly Member[] {
  const members = handles.map((handle, index): Member => {
    const place = { field: `${field}[${index}]` };
    const block = context.block(handle);
    const result = context.result(handle);
    if (block === undefined)
      throw new CellError("no-such-block", `There is no block "${handle}" on this page; ${place.field} needs a data block. Choose another.`, place);
    if (block.kind !== "data")
      throw new CellError("wrong-kind", `${place.field} needs a data block, and "${handle}" is a ${block.kind}. Choose a data block.`, place);
    if (result?.kind !== "data" || result.table === undefined)
      throw new CellError(
        "no-table",
        `The table of ${block.id} could not be read, so nothing can be made of it. See what ${block.id} says, or take it out of the list.`,
        place,
      );
    return { handle: block.id, table: result.table };
  });
  return members.filter(({ handle }, index) => {
    const first = members.findIndex((other) => other.handle === handle);
    if (first !== index)
      problems.error(
        "table-twice",
        `${handle} stands in the list twice, which would count each of its samples twice; it is taken once. Take it out of the list once.`,
        {
          field: `${field}[${index}]`,
        },
      );
    return first === index;
  });
}

/** Identity of a row that came from others: where the first of them stands, as `ch.7`; a second row of one place is `ch.7#2`. */
export function rowIdsOf(origins: readonly (readonly RowOrigin[])[]): readonly RowId[] {
  const seen = new Map<string, number>();
  return origins.map((all) => {
    const [first] = all;
    const id = first === undefined ? "none" : `${first.table}.${first.row}`;
    const count = (seen.get(id) ?? 0) + 1;
    seen.set(id, count);
    return count === 1 ? id : `${id}#${count}`;
  });
}

/** What a table made of tables says for those of its parts in which values below detection were substituted. */
export function substitutionOf(members: readonly Member[]): Table["substitution"] {
  const all = members.flatMap(({ handle, table }) => (table.substitution === undefined ? [] : [{ handle, ...table.substitution }]));
  const [first, ...rest] = all;
  if (first === undefined) return undefined;
  if (members.length === 1 || (rest.length === members.length - 1 && rest.every((each) => each.fraction === first.fraction && each.reason === first.reason)))
    return { fraction: first.fraction, reason: first.reason };
  const others = rest.map((each) => `; in ${each.handle} they count as ${each.fraction} of it: ${each.reason}`).join("");
  return { fraction: first.fraction, reason: `${first.reason} (in ${first.handle})${others}` };
}

/** A name that no column has yet: the wanted one, else with its table's handle behind it. */
export function freeName(wanted: string, handle: string, used: Set<string>): string {
  let name = wanted;
  for (let n = 1; used.has(name); n++) name = n === 1 ? `${wanted}_${handle}` : `${wanted}_${handle}_${n}`;
  used.add(name);
  return name;
}

/** Says that a column had to be called otherwise than in its own table. */
export function sayRenamed(from: string, to: string, member: string, why: string, problems: Problems): void {
  problems.note("column-renamed", `The column ${from} of ${member} is called ${to} here, since ${why}.`, { column: to });
}

/** Where a column's values stand in the tables that its rows' origins name. */
export function columnOrigins(handle: string, column: QuantityColumn): readonly ColumnOrigin[] {
  return column.sources ?? [{ table: handle, column: column.name }];
}
