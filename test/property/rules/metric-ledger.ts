import type { OracleMetric } from "../../oracle/types.ts";
import { count, type Rules, type Seen } from "./seen.ts";

const LINES = [
  "rejected",
  "duplicate",
  "filter:",
  "unit-not-enrolled",
  "unit-outside-enrolment",
  "unit-unknown-variant",
  "unit-switched",
  "unit-filter:",
  "unit-follow-up",
  "before-enrolment",
  "after-follow-up",
  "in-follow-up",
];

const linesOf = ({ trace }: Seen): OracleMetric["ledger"] => trace.result.metrics.flatMap(({ ledger }) => ledger);

/** What a metric's ledger can hold: a sum on every line, and rejected rows that add and that do not. */
export const metricLedgerRules: Rules = {
  ...Object.fromEntries(
    LINES.map((line) => [
      `metric ledger: a sum on ${line}`,
      (seen: Seen) => count(linesOf(seen), ({ id, sum }) => id.startsWith(line) && sum !== null && sum !== 0n),
    ]),
  ),
  "metric ledger: rejected rows that add nothing": (seen) =>
    count(linesOf(seen), ({ id, rows, sum }) => id === "rejected" && rows > 0 && sum === 0n),
  "metric ledger: a row that cannot be read beside a metric of every row": ({ plan, files }) =>
    plan.metrics.some(({ of }) => of.event === null && of.where.length === 0) &&
    files.some(({ unreadable }) => unreadable > 0),
  "metric ledger: two metrics of the same rows and column": ({ plan }) =>
    new Set(plan.metrics.map(({ of }) => JSON.stringify(of))).size < plan.metrics.length,
};
