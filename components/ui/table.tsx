import type { ReactNode } from "react";
import { cx } from "./cx";

export interface TableColumn<Row> {
  key: string;
  head: ReactNode;
  cell: (row: Row) => ReactNode;
  /** Figures stand at the end of their column in tabular digits. */
  figures?: boolean;
  align?: "start" | "end";
}

interface TableProps<Row> {
  /** Says what the table holds; read aloud, and shown unless `captionHidden`. */
  caption: string;
  captionHidden?: boolean;
  columns: readonly TableColumn<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  /** The same row as a sentence, for narrow screens. */
  sentence: (row: Row) => ReactNode;
  isSelected?: (row: Row) => boolean;
  /** The closing row: one node a column. */
  foot?: readonly ReactNode[];
}

function alignment<Row>(column: TableColumn<Row>): string {
  const atEnd = (column.align ?? (column.figures ? "end" : "start")) === "end";
  return cx(atEnd ? "text-right" : "text-left", "px-[5px] first:pl-0 last:pr-0");
}

/** A plain table; under 640 px a list of sentences. */
export function Table<Row>(props: TableProps<Row>) {
  const { caption, captionHidden, columns, rows, rowKey, sentence, isSelected, foot } = props;
  return (
    <>
      <table className="hidden w-full border-collapse sm:table">
        <caption className={captionHidden ? "sr-only" : "mb-1 text-left font-strong"}>{caption}</caption>
        <thead>
          <tr>
            {columns.map((column) => (
              <th
                className={cx(
                  "border-b border-ink pb-1 text-small font-normal text-ink-soft",
                  alignment(column),
                )}
                key={column.key}
                scope="col"
              >
                {column.head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr
              aria-current={isSelected?.(row) ? true : undefined}
              className="aria-[current]:bg-shoal-1"
              key={rowKey(row)}
            >
              {columns.map((column) => (
                <td
                  className={cx(
                    "border-b border-line py-1.5 align-top in-[.buff]:border-buff-2",
                    alignment(column),
                    column.figures && "figures",
                  )}
                  key={column.key}
                >
                  {column.cell(row)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
        {foot && (
          <tfoot>
            <tr>
              {columns.map((column, index) => (
                <td
                  className={cx(
                    "border-t border-ink py-1.5 font-strong",
                    alignment(column),
                    column.figures && "figures",
                  )}
                  key={column.key}
                >
                  {foot[index]}
                </td>
              ))}
            </tr>
          </tfoot>
        )}
      </table>
      <div className="sm:hidden">
        <p className={captionHidden ? "sr-only" : "mb-1 font-strong"}>{caption}</p>
        <ul className="border-t border-ink">
          {rows.map((row) => (
            <li
              aria-current={isSelected?.(row) ? true : undefined}
              className="border-b border-line py-2 in-[.buff]:border-buff-2 aria-[current]:bg-shoal-1"
              key={rowKey(row)}
            >
              {sentence(row)}
            </li>
          ))}
        </ul>
      </div>
    </>
  );
}
