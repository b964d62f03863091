"use client";

import {
  type ColumnDef,
  createSortedRowModel,
  rowSortingFeature,
  type SortingState,
  sortFn_alphanumeric,
  sortFn_basic,
  tableFeatures,
  useTable,
} from "@tanstack/react-table";
import { type ReactNode, useMemo, useState } from "react";
import { cx } from "./cx";

const features = tableFeatures({
  rowSortingFeature,
  sortedRowModel: createSortedRowModel(),
  sortFns: { alphanumeric: sortFn_alphanumeric, basic: sortFn_basic },
});

export interface DataColumn<Row> {
  key: string;
  head: string;
  /** What the column sorts by. */
  value: (row: Row) => number | string;
  /** What is shown; the value if left out. */
  cell?: (row: Row) => ReactNode;
  figures?: boolean;
}

interface DataTableProps<Row> {
  caption: string;
  columns: readonly DataColumn<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  sentence: (row: Row) => ReactNode;
  sortBy?: { key: string; descending?: boolean };
}

const SORTED = { asc: "ascending", desc: "descending" } as const;

function SortWord({ sorted }: { sorted: false | "asc" | "desc" }) {
  return (
    <svg aria-hidden className="ml-1 inline-block" height="8" viewBox="0 0 8 8" width="8">
      {sorted === "asc" && <path className="fill-ink" d="M4 1 7.5 7H.5z" />}
      {sorted === "desc" && <path className="fill-ink" d="M4 7 .5 1h7z" />}
    </svg>
  );
}

/** A table of figures that a person sorts by its headings; under 640 px a list of sentences. */
export function DataTable<Row extends object>(props: DataTableProps<Row>) {
  const { caption, columns, rows, rowKey, sentence, sortBy } = props;
  const [sorting, setSorting] = useState<SortingState>(
    sortBy ? [{ id: sortBy.key, desc: sortBy.descending ?? false }] : [],
  );
  const definitions = useMemo(
    () =>
      columns.map(
        (column): ColumnDef<typeof features, Row> => ({
          id: column.key,
          header: column.head,
          accessorFn: column.value,
          sortFn: column.figures ? "basic" : "alphanumeric",
          sortDescFirst: column.figures ?? false,
          cell: ({ row }) => column.cell?.(row.original) ?? String(column.value(row.original)),
        }),
      ),
    [columns],
  );
  const data = useMemo(() => [...rows], [rows]);
  const table = useTable({
    features,
    columns: definitions,
    data,
    getRowId: rowKey,
    state: { sorting },
    onSortingChange: setSorting,
  });
  const isFigures = (id: string) => columns.find((column) => column.key === id)?.figures ?? false;
  const sortedRows = table.getRowModel().rows;

  return (
    <>
      <table className="hidden w-full border-collapse sm:table">
        <caption className="mb-1 text-left font-strong">{caption}</caption>
        <thead>
          {table.getHeaderGroups().map((group) => (
            <tr key={group.id}>
              {group.headers.map((header) => {
                const sorted = header.column.getIsSorted();
                return (
                  <th
                    aria-sort={sorted ? SORTED[sorted] : undefined}
                    className={cx(
                      "border-b border-ink px-[5px] text-small font-normal text-ink-soft first:pl-0 last:pr-0",
                      isFigures(header.column.id) ? "text-right" : "text-left",
                    )}
                    key={header.id}
                    scope="col"
                  >
                    <button
                      className="min-h-6 cursor-pointer py-1 hover:underline"
                      onClick={header.column.getToggleSortingHandler()}
                      type="button"
                    >
                      <table.FlexRender header={header} />
                      <SortWord sorted={sorted} />
                    </button>
                  </th>
                );
              })}
            </tr>
          ))}
        </thead>
        <tbody>
          {sortedRows.map((row) => (
            <tr key={row.id}>
              {row.getAllCells().map((cell) => (
                <td
                  className={cx(
                    "border-b border-line px-[5px] py-1.5 align-top first:pl-0 last:pr-0 in-[.buff]:border-buff-2",
                    isFigures(cell.column.id) && "figures text-right",
                  )}
                  key={cell.id}
                >
                  <table.FlexRender cell={cell} />
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
      <div className="sm:hidden">
        <p className="mb-1 font-strong">{caption}</p>
        <ul className="border-t border-ink">
          {sortedRows.map((row) => (
            <li className="border-b border-line py-2 in-[.buff]:border-buff-2" key={row.id}>
              {sentence(row.original)}
            </li>
          ))}
        </ul>
      </div>
    </>
  );
}
