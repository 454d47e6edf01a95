/** Filtering and sorting of a table's rows by the plain values of its columns. */
export type CellValue = string | number | null;

export interface ValueColumn<Row> {
  key: string;
  /** What the column sorts and is searched by; null where there is nothing. */
  value: (row: Row) => CellValue;
}

export interface Sort {
  key: string;
  descending: boolean;
}

const collator = new Intl.Collator("en", { numeric: true, sensitivity: "base" });

function compare(a: CellValue, b: CellValue): number {
  if (typeof a === "number" && typeof b === "number") return a === b ? 0 : a < b ? -1 : 1;
  return collator.compare(String(a), String(b));
}

/** Rows whose columns together contain every word of the search, whatever its case. */
export function matching<Row>(
  rows: readonly Row[],
  columns: readonly ValueColumn<Row>[],
  search: string,
): Row[] {
  const words = search.toLocaleLowerCase().split(/\s+/).filter(Boolean);
  if (words.length === 0) return [...rows];
  return rows.filter((row) => {
    const text = columns
      .map((column) => String(column.value(row) ?? ""))
      .join("\n")
      .toLocaleLowerCase();
    return words.every((word) => text.includes(word));
  });
}

/** Rows in the order of a column, equals as they were; rows without a value come last either way. */
export function sorted<Row>(rows: readonly Row[], columns: readonly ValueColumn<Row>[], sort: Sort): Row[] {
  const column = columns.find(({ key }) => key === sort.key);
  if (column === undefined) return [...rows];
  const keyed = rows.map((row) => ({ row, value: column.value(row) }));
  keyed.sort((a, b) => {
    if (a.value === null || b.value === null) return Number(a.value === null) - Number(b.value === null);
    return sort.descending ? compare(b.value, a.value) : compare(a.value, b.value);
  });
  return keyed.map(({ row }) => row);
}
