import Skeleton from "@mui/material/Skeleton";
import Table from "@mui/material/Table";
import TableBody from "@mui/material/TableBody";
import TableCell from "@mui/material/TableCell";
import TableHead from "@mui/material/TableHead";
import TableRow from "@mui/material/TableRow";
import TableSortLabel from "@mui/material/TableSortLabel";
import type { KeyboardEvent, ReactNode } from "react";
import { useState } from "react";
import type { Sort, ValueColumn } from "../lib/table-rows";
import { matching, sorted } from "../lib/table-rows";
import "./data-table.css";

export interface Column<Row> extends ValueColumn<Row> {
  label: ReactNode;
  /** Second line of the head: a unit, or what the figure is. */
  note?: ReactNode;
  cell: (row: Row) => ReactNode;
  align?: "left" | "right";
  /** Left out of narrow windows. */
  hideBelow?: "phone" | "tablet" | "desktop";
  width?: number | string;
}

interface DataTableProps<Row> {
  /** What the table lists, for screen readers. */
  caption: string;
  /** Undefined while they are on their way. */
  rows: readonly Row[] | undefined;
  rowKey: (row: Row) => string;
  /** The first column holds the row's name and its link or button. */
  columns: readonly Column<Row>[];
  initialSort: Sort;
  search?: string;
  /** Shown in place of rows where there are none at all. */
  empty: ReactNode;
  /** Last cell of a row. */
  actions?: (row: Row) => ReactNode;
}

/** Up and down go from row to row, Home and End to the first and last. */
function moveBetweenRows(event: KeyboardEvent<HTMLElement>): void {
  const keys = ["ArrowDown", "ArrowUp", "Home", "End"];
  if (!keys.includes(event.key) || !(event.target instanceof HTMLElement)) return;
  const stops = [...event.currentTarget.querySelectorAll<HTMLElement>("[data-row-stop] :is(a, button)")];
  const row = event.target.closest("tr");
  const at = stops.findIndex((stop) => stop.closest("tr") === row);
  const next = { ArrowDown: at + 1, ArrowUp: at - 1, Home: 0, End: stops.length - 1 }[event.key];
  const stop = next === undefined ? undefined : stops[next];
  if (stop === undefined) return;
  event.preventDefault();
  stop.focus();
}

/** A table that sorts by its heads and is filtered by a search. */
export function DataTable<Row>(props: DataTableProps<Row>) {
  const { caption, rows, rowKey, columns, initialSort, search = "", empty, actions } = props;
  const [sort, setSort] = useState(initialSort);
  const shown = rows === undefined ? undefined : sorted(matching(rows, columns, search), columns, sort);
  const span = columns.length + (actions === undefined ? 0 : 1);
  const sortBy = (key: string): void => setSort({ key, descending: sort.key === key && !sort.descending });
  return (
    <div className="data-table">
      <Table aria-label={caption} aria-busy={rows === undefined}>
        <TableHead>
          <TableRow>
            {columns.map((column) => (
              <TableCell
                key={column.key}
                align={column.align ?? "left"}
                className={hideClass(column)}
                sx={{ width: column.width }}
                aria-sort={sort.key === column.key ? (sort.descending ? "descending" : "ascending") : "none"}
              >
                <TableSortLabel
                  active={sort.key === column.key}
                  direction={sort.key === column.key && sort.descending ? "desc" : "asc"}
                  onClick={() => sortBy(column.key)}
                >
                  {column.label}
                </TableSortLabel>
                {column.note === undefined ? null : <div className="data-table-note">{column.note}</div>}
              </TableCell>
            ))}
            {actions === undefined ? null : (
              <TableCell sx={{ width: 40 }}>
                <span className="visually-hidden">Actions</span>
              </TableCell>
            )}
          </TableRow>
        </TableHead>
        <TableBody onKeyDown={moveBetweenRows}>
          {shown?.map((row) => (
            <TableRow key={rowKey(row)} hover>
              {columns.map((column, index) => (
                <TableCell
                  key={column.key}
                  align={column.align ?? "left"}
                  className={hideClass(column)}
                  data-row-stop={index === 0 ? "" : undefined}
                >
                  {column.cell(row)}
                </TableCell>
              ))}
              {actions === undefined ? null : (
                <TableCell align="right" className="data-table-actions">
                  {actions(row)}
                </TableCell>
              )}
            </TableRow>
          ))}
          {shown === undefined
            ? [0, 1, 2, 3].map((row) => (
                <TableRow key={row}>
                  <TableCell colSpan={span}>
                    <Skeleton width={`${70 - row * 12}%`} />
                  </TableCell>
                </TableRow>
              ))
            : null}
          {shown?.length === 0 ? (
            <TableRow>
              <TableCell colSpan={span} className="data-table-empty">
                {rows?.length === 0 ? empty : `Nothing here matches “${search.trim()}”.`}
              </TableCell>
            </TableRow>
          ) : null}
        </TableBody>
      </Table>
    </div>
  );
}

const hideClass = (column: { hideBelow?: "phone" | "tablet" | "desktop" }): string | undefined =>
  column.hideBelow === undefined ? undefined : `hide-below-${column.hideBelow}`;
