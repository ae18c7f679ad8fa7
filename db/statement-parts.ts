/** Rows of one statement: SQLite takes 32 766 values, and a row has up to 20. */
const ROWS_A_STATEMENT = 500;

/** The rows in order, as many at a time as one statement can take; none of no rows. */
export function parts<Row>(rows: readonly Row[]): Row[][] {
  const count = Math.ceil(rows.length / ROWS_A_STATEMENT);
  return Array.from({ length: count }, (_, i) => rows.slice(i * ROWS_A_STATEMENT, (i + 1) * ROWS_A_STATEMENT));
}
