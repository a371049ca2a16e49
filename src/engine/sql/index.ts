/** Joining text to SQL. */
export { double, join, name, type Statement, sql } from "./sql.ts";
/** What differs by engine. */
export { type Dialect, duckdb, valueList } from "./dialect.ts";
/** The stages, in order. */
export { rows, REASON, unreadableRows } from "./rows.ts";
export { copies, copyCounts, markDuplicates } from "./duplicates.ts";
export { timeBins } from "./span.ts";
export { atEnrolment, enrolmentKey, enrolments, seen } from "./enrolments.ts";
export { units } from "./units.ts";
export * from "./cells.ts";
/** Counts for the ledger and the checks. */
export * from "./ledger.ts";
