/** The first row of an answer, if there is one. */
export const firstRow = <Row>(rows: readonly Row[]): Row | undefined => rows.at(0);

/**
 * The row that a statement must have returned.
 * @throws Error naming what was written
 */
export function writtenRow<Row>(rows: readonly Row[], what: string): Row {
  const row = rows.at(0);
  if (row === undefined) throw new Error(`The database returned no row for a new ${what}.`);
  return row;
}
