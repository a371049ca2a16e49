/** Joining text to SQL. */

export * from "./cells.ts";
/** What differs by engine. */
export { type Dialect, duckdb, localDay, valueList } from "./dialect.ts";
export { copies, copyCounts, markDuplicates } from "./duplicates.ts";
/** The units at the ends of arms. */
export { pairsAtEnds } from "./ends.ts";
export { atEnrolment, type EnrolmentKey, enrolmentKey, enrolments, needsEnrollingRow, seen } from "./enrolments.ts";
/** Hours. */
export { rowsByHour, rowsOfUnits, type TimeSpan, unitsInRuns } from "./hours.ts";
/** Counts for the ledger and the checks. */
export * from "./ledger.ts";
/** Levels of subgroup columns. */
export * from "./levels.ts";
export { matched, PLACE, placeOf } from "./matched.ts";
export { countedRows, metricRows } from "./metricRows.ts";
/** Order statistics. */
export { atEachRank, atRanks, ordered, valuesFromTop } from "./ordered.ts";
/** The stages, in order. */
export { brokenQuotes, linesWithSurplus, listTable } from "./read.ts";
export { forgetRows, REASON, rejectedOrdinals, rows, unreadableRows } from "./rows.ts";
export * from "./sinceEnrolment.ts";
export { sizes } from "./sizes.ts";
export * from "./soundness.ts";
export { double, join, name, type Statement, sql } from "./sql.ts";
/** One unit, row by row. */
export { nearestUnit, rowsOfUnit, unitEnd } from "./trace.ts";
export { candidates, units } from "./units.ts";
