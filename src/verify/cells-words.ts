import { list } from "../words/index.ts";

/** What cells prove, and what only the log can: said of a report that holds against its cells. */
export function cellsWords(withoutBuckets: readonly string[], hasSteps: boolean): readonly string[] {
  return [
    "Recomputed from cells.json, without the log: every statistic, the checks, the rule and its conclusion are the same.",
    "Not proven without the log:",
    "- that the cells are those of the log whose fingerprints the report names;",
    "- the account of rows and of who was counted, and single values (largest ones, caps, quantiles): taken as kept;",
    ...(withoutBuckets.length === 0
      ? []
      : [
          `- what was drawn and dealt for ${list(withoutBuckets)}: taken as kept, since sums that stand for fewer than 10 are left out of the file;`,
        ]),
    ...(hasSteps ? ["- which change did it (section 2): taken as kept;"] : []),
    "For these: closeout verify without --cells.",
  ];
}
