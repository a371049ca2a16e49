import type { ColumnTest } from "../../../src/plan/types.ts";
import { testHolds } from "../../oracle/where.ts";
import { count, type Rules, type Seen, tests } from "./seen.ts";

const KINDS: ColumnTest["kind"][] = ["in", "not", "above", "below", "at-least", "at-most", "missing", "matches"];
const SCALARS = ["text", "number", "boolean"] as const;

const tried = (seen: Seen, wanted: (test: ColumnTest, cell: string | null) => boolean) =>
  count(tests(seen), (test) => seen.trace.rows.some((row) => wanted(test, row.cell(test.column))));

export const whereRules: Rules = {
  ...Object.fromEntries(
    KINDS.flatMap((kind) => [
      [`where ${kind} holds`, (seen: Seen) => tried(seen, (test, cell) => test.kind === kind && testHolds(test, cell))],
      [
        `where ${kind} does not hold`,
        (seen: Seen) => tried(seen, (test, cell) => test.kind === kind && !testHolds(test, cell)),
      ],
    ]),
  ),
  ...Object.fromEntries(
    SCALARS.map((scalar) => [
      `where a ${scalar} matches`,
      (seen: Seen) =>
        tried(
          seen,
          (test, cell) =>
            test.kind === "in" &&
            test.values.some((value) => value.kind === scalar && testHolds({ ...test, values: [value] }, cell)),
        ),
    ]),
  ),
  "where: missing is not not": (seen) => tried(seen, (test, cell) => test.kind === "not" && cell === null),
  "where: one number in two spellings": (seen) =>
    tried(
      seen,
      (test, cell) =>
        test.kind === "in" &&
        test.values.some(
          (value) =>
            value.kind === "number" &&
            cell !== null &&
            cell !== value.value &&
            testHolds({ ...test, values: [value] }, cell),
        ),
    ),
  "where: a truth value in another case": (seen) =>
    tried(
      seen,
      (test, cell) =>
        test.kind === "in" &&
        cell !== null &&
        /[A-Z]/.test(cell) &&
        test.values.some((value) => value.kind === "boolean" && testHolds({ ...test, values: [value] }, cell)),
    ),
  "where: a pattern with a character that other patterns know": (seen) =>
    tried(seen, (test) => test.kind === "matches" && test.patterns.some((pattern) => /[[\]%_]/.test(pattern))),
  "where: a pattern over a line break": (seen) =>
    tried(
      seen,
      (test, cell) => test.kind === "matches" && cell !== null && cell.includes("\n") && testHolds(test, cell),
    ),
  "where: ? for a character beyond the basic plane": (seen) =>
    tried(
      seen,
      (test, cell) => test.kind === "matches" && cell === "😀" && test.patterns.includes("?") && testHolds(test, cell),
    ),
  "where: a number that differs past the ninth place": (seen) =>
    tried(
      seen,
      (test, cell) =>
        "value" in test &&
        typeof test.value === "string" &&
        /\.\d{10}/.test(cell ?? "") &&
        (cell ?? "").startsWith(test.value),
    ),
  "where: several thresholds on one column": (seen) => {
    const columns = tests(seen)
      .filter((test) => ["above", "at-least", "below", "at-most"].includes(test.kind))
      .map(({ column }) => column);
    return columns.length > new Set(columns).size;
  },
  "filter: rows": (seen) => count(seen.plan.filters, ({ drop }) => drop === "rows"),
  "filter: units at enrolment": (seen) =>
    count(seen.trace.units, ({ line }) =>
      seen.plan.filters.some(
        (filter) => line === `filter:${filter.name}` && "when" in filter && filter.when === "at-enrolment",
      ),
    ),
  "filter: units ever": (seen) =>
    count(seen.trace.units, ({ line }) =>
      seen.plan.filters.some(
        (filter) => line === `filter:${filter.name}` && "when" in filter && filter.when === "ever",
      ),
    ),
  "filter: units listed one a line": (seen) => listed(seen, ".txt"),
  "filter: units listed under a heading": (seen) => listed(seen, ".csv"),
};

function listed(seen: Seen, ending: string): number {
  return count(seen.trace.units, ({ line }) =>
    seen.plan.filters.some(
      (filter) => line === `filter:${filter.name}` && "listedIn" in filter && filter.listedIn.endsWith(ending),
    ),
  );
}
