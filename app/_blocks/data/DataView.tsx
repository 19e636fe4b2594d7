"use client";

import { useMemo, useState } from "react";
import type { BlockViewProps } from "@/app/_page/contract";
import { usePage } from "@/app/_page/pageContext";
import { useRefusal } from "@/app/_blocks/shared/useRefusal";
import { resultOf } from "@/app/_blocks/shared/tableOf";
import { Button } from "@/app/_ui/Button";
import type { DataBlock } from "@/cells";
import { CellActions, targetAt, type CellTarget } from "./CellActions";
import { columnItems } from "./columnItems";
import { DataGrid } from "./DataGrid";
import { DataProblems } from "./DataProblems";
import { EmptyTable } from "./EmptyTable";
import { FoldedTable } from "./FoldedTable";
import { gridModel, type GridColumn } from "./gridModel";
import { GridLegend } from "./GridLegend";
import { ImportDialog } from "./ImportDialog";
import { AmendDialog, AssumeDialog, SetAsideDialog } from "./ReasonDialogs";
import { StackDialog } from "./StackDialog";
import { AddColumnDialog } from "./AddColumnDialog";
import { tableEdits } from "./tableEdits";
import { useActiveCell } from "./useActiveCell";
import { useShownWhenFolded } from "./useShownWhenFolded";

const MOST_TYPED = 2000;

export { stateInWords } from "./stateInWords";

type Asking =
  | { readonly what: "import"; readonly bytes: Uint8Array; readonly fileName: string; readonly kept: boolean }
  | { readonly what: "stack" }
  | { readonly what: "amend"; readonly target: CellTarget }
  | { readonly what: "aside"; readonly target: CellTarget; readonly whole: boolean }
  | { readonly what: "assume"; readonly column: GridColumn }
  | { readonly what: "column" }
  | null;

/** A data block: empty with its four ways, or the table with what can be done in it. */
export function DataView({ blockKey, block, view }: BlockViewProps<DataBlock>) {
  const services = usePage((s) => s.services);
  const loading = usePage((s) => s.loading.has(block.id));
  const [asking, setAsking] = useState<Asking>(null);
  const [run, refusal] = useRefusal();
  const result = resultOf(view.results, block.id, "data");
  const { edits } = view;
  const form = view.settings.uncertainty;
  const model = useMemo(() => gridModel(block, result?.table, form), [block, result?.table, form]);
  const cell = useActiveCell(model.rowIds, edits !== null && block.typed !== undefined && block.typed.length < MOST_TYPED);
  const isMade = block.stack !== undefined || block.join !== undefined;
  // A third of the page has no room for a table; what is folded is each person's own choice.
  const [folded, setFolded] = useState<boolean | null>(null);
  const isFolded = result?.table !== undefined && (folded ?? (block.width === 4 || (isMade && block.width === 6)));
  useShownWhenFolded(blockKey, isFolded, () => setFolded(false));
  const made = edits === null ? null : tableEdits(edits, blockKey, block);
  const close = () => setAsking(null);
  const tables = view.blocks.filter((b) => b.block.kind === "data" && b.key !== blockKey).length;
  const isEmpty = block.typed !== undefined && block.typed.length === 0 && (block.columns?.length ?? 0) === 0;

  const remap = async () => {
    if (services === null || block.source?.sha256 === undefined) return;
    const { sha256, file } = block.source;
    const bytes = await services.sourceBytes(sha256, file).catch(() => null);
    if (bytes === null) run(() => fail(`The source ${file} could not be fetched. Try again when you are online.`));
    else setAsking({ what: "import", bytes, fileName: file, kept: true });
  };
  const without = (column: GridColumn) => result?.columns.find((c) => c.name === column.name)?.withoutSigma ?? 0;
  const itemsOf =
    made === null || isMade
      ? undefined
      : (column: GridColumn) =>
          columnItems(block, column, {
            assume: () => setAsking({ what: "assume", column }),
            takeBack: (entry) => run(() => made.undo("assumed", entry)),
            remap: block.source === undefined ? undefined : () => void remap(),
            remove: block.typed === undefined ? undefined : () => run(() => made.removeColumn(column.name)),
          });
  return (
    <div className="min-w-0">
      {isEmpty ? (
        made === null ? (
          <p className="py-2 text-second">This table is empty.</p>
        ) : (
          <EmptyTable
            tables={tables}
            onFile={(bytes, fileName) => setAsking({ what: "import", bytes, fileName, kept: false })}
            onColumns={(columns) => run(() => made.startTyped(columns))}
            onStack={() => setAsking({ what: "stack" })}
          />
        )
      ) : loading && result === undefined ? (
        <p className="py-2 text-second">Reading {block.source?.file ?? "the source"}.</p>
      ) : block.typed !== undefined || result?.table !== undefined ? (
        <>
          {isFolded && result?.table !== undefined ? (
            <FoldedTable table={result.table} view={view} byClass={isMade} />
          ) : (
            <DataGrid
              block={block}
              blockKey={blockKey}
              result={result}
              view={view}
              model={model}
              cell={cell}
              itemsOf={itemsOf}
              onOpen={(place) => {
                const target = made === null ? undefined : targetAt(block, model, place);
                if (block.source !== undefined && target?.column !== undefined) setAsking({ what: "amend", target });
              }}
              {...(made === null || block.typed === undefined
                ? {}
                : {
                    onType: (row, column, text) => made.typeCell(row, !model.rowIds.includes(row), column, text),
                    onPasteTable: (place, text) => run(() => made.pasteCells(place, cell.rowIds, model, text)),
                    onDelete: (place) => {
                      const row = model.rowIds[place.row];
                      if (row !== undefined) run(() => made.clearCell(row, model.columns[place.column]?.name ?? ""));
                    },
                  })}
            />
          )}
          {cell.place === null || isFolded ? null : (
            <CellActions
              block={block}
              model={model}
              place={cell.place}
              view={view}
              onAmend={(target) => setAsking({ what: "amend", target })}
              onSetAside={(target, whole) => setAsking({ what: "aside", target, whole })}
              onUndo={(list, entry) => made !== null && run(() => made.undo(list, entry))}
              onDelete={made === null || block.typed === undefined ? undefined : (row) => run(() => made.deleteRow(row))}
            />
          )}
          <GridLegend block={block} result={result} short={isFolded}>
            {result?.table === undefined ? null : <Button onClick={() => setFolded(!isFolded)}>{isFolded ? "Unfold the table" : "Fold to its heads"}</Button>}
            {made === null ? null : (
              <>
                {block.source?.sha256 === undefined ? null : <Button onClick={() => void remap()}>How it is read</Button>}
                {block.stack === undefined ? null : <Button onClick={() => setAsking({ what: "stack" })}>Change what is stacked</Button>}
                {block.typed === undefined ? null : <Button onClick={() => setAsking({ what: "column" })}>Add a column</Button>}
                {block.renormalise === undefined && result?.totals === undefined ? null : (
                  <Button onClick={() => run(() => made.renormalise(block.renormalise === undefined))}>
                    {block.renormalise === undefined ? "Renormalise volatile-free" : "Take values as measured"}
                  </Button>
                )}
              </>
            )}
          </GridLegend>
        </>
      ) : null}
      {refusal === null ? null : (
        <p role="alert" className="py-1 text-vermilion">
          {refusal}
        </p>
      )}
      <DataProblems result={result} view={view} block={block} />
      {made === null || asking === null ? null : asking.what === "import" && services !== null ? (
        <ImportDialog
          bytes={asking.bytes}
          fileName={asking.fileName}
          services={services}
          known={asking.kept ? block.columns : undefined}
          kept={asking.kept}
          onClose={close}
          onSave={(uploaded, columns) => {
            const fault = made.attempt(() => (uploaded === null ? made.setColumns(columns) : made.setSource(uploaded, columns)));
            if (fault === null) close();
            return fault;
          }}
        />
      ) : asking.what === "stack" ? (
        <StackDialog
          view={view}
          handle={block.id}
          chosen={block.stack ?? []}
          onDone={(handles) => {
            if (handles !== null) run(() => made.setStack(handles));
            close();
          }}
        />
      ) : asking.what === "amend" ? (
        <AmendDialog
          sample={asking.target.sample}
          column={asking.target.column?.name ?? ""}
          was={asking.target.raw}
          now={asking.target.now}
          onAmend={(value, reason) => made.attempt(() => made.amend(asking.target, value, reason))}
          onClose={close}
        />
      ) : asking.what === "aside" ? (
        <SetAsideDialog
          what={asking.whole ? asking.target.sample : `${asking.target.column?.name ?? ""} of ${asking.target.sample}`}
          whole={asking.whole}
          onSetAside={(reason) => made.attempt(() => made.setAside(asking.target, asking.whole, reason))}
          onClose={close}
        />
      ) : asking.what === "assume" ? (
        <AssumeDialog
          column={asking.column.name}
          unit={asking.column.quantity?.unit.symbol ?? "1"}
          without={without(asking.column)}
          onAssume={(assumed, reason) => made.attempt(() => made.assume(asking.column.name, assumed, reason))}
          onClose={close}
        />
      ) : asking.what === "column" ? (
        <AddColumnDialog columns={block.columns ?? []} onAdd={(column) => made.attempt(() => made.addColumn(column))} onClose={close} />
      ) : null}
    </div>
  );
}

function fail(text: string): never {
  throw new Error(text);
}
