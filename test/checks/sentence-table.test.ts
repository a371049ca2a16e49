import { describe, expect, it } from "vitest";
import { checks } from "../../src/checks/index.ts";
import type { CheckOutcome } from "../../src/checks/types.ts";
import { type LogShape, metricOf, planOf, reductionOf, rowFilter, unitFilter } from "./make.ts";

/** The checks' sentences for none, for one and for several, word for word. */
const plan = planOf({
  followUp: { days: 7, incomplete: "exclude" },
  filters: [rowFilter("probe"), unitFilter("staff")],
  metrics: [
    metricOf({ name: "Booked", role: "primary" }),
    metricOf({ name: "Seconds", summary: "mean", withoutRows: "leave-out" }),
  ],
});
const used: LogShape = { rows: { "filter:probe": 3 }, ended: { "filter:staff": [2, 2] } };

type Line = readonly [id: string, result: CheckOutcome, sentence: string, shape: LogShape];
const LINES: readonly Line[] = [
  [
    "allocation",
    "pass",
    'Enrolled were 5,000 visitors with "list" and 5,100 with "calendar", a split that chance can explain (p = 0.32).',
    { enrolled: [5000, 5100] },
  ],
  ["rejected", "pass", "All 10,000 rows could be read.", {}],
  [
    "rejected",
    "pass",
    "1 row of 10,000 (0.010%) could not be used, most often: no visitor (1 row).",
    { rows: { rejected: 1 }, rejectReasons: [{ reason: "no visitor", rows: 1 }] },
  ],
  [
    "rejected",
    "caution",
    "20 rows of 10,000 (0.20%) could not be used, most often: no visitor (20 rows).",
    { rows: { rejected: 20 }, rejectReasons: [{ reason: "no visitor", rows: 20 }] },
  ],
  [
    "rejected",
    "fail",
    "200 rows of 10,000 (2.0%) could not be used, most often: no visitor (200 rows).",
    { rows: { rejected: 200 }, rejectReasons: [{ reason: "no visitor", rows: 200 }] },
  ],
  [
    "duplicates",
    "pass",
    "1 row of 10,000 (0.010%) repeated an event-id and was not counted again.",
    { rows: { duplicate: 1 }, facts: { duplicateIds: 1 } },
  ],
  [
    "duplicates",
    "caution",
    "20 rows of 10,000 (0.20%) repeated an event-id and were not counted again.",
    { rows: { duplicate: 20 }, facts: { duplicateIds: 20 } },
  ],
  [
    "duplicates",
    "caution",
    "1 event-id came more than once with different content; the first was counted.",
    { rows: { duplicate: 1 }, facts: { duplicateIds: 1, copiesThatDiffer: 1 } },
  ],
  [
    "duplicates",
    "caution",
    "3 event-ids came more than once with different content; the first was counted.",
    { rows: { duplicate: 3 }, facts: { duplicateIds: 3, copiesThatDiffer: 3 } },
  ],
  ["switched", "pass", "No visitor was seen in two variants.", {}],
  [
    "switched",
    "pass",
    "1 visitor of 2,000 (0.050%) was seen in two variants. It counts where first enrolled.",
    { facts: { switched: [1, 0] } },
  ],
  [
    "switched",
    "caution",
    "9 visitors of 2,000 (0.45%) were seen in two variants. They count where first enrolled.",
    { facts: { switched: [5, 4] } },
  ],
  ["unknown-variants", "pass", "No visitor was enrolled in a variant that the plan lacks.", {}],
  [
    "unknown-variants",
    "pass",
    '1 visitor of 2,001 (0.050%) was enrolled in a variant that the plan lacks: "map" (1 row; nearest in the plan: "list").',
    { unknownVariant: 1, facts: { variants: [{ value: "map", rows: 1 }] } },
  ],
  [
    "unknown-variants",
    "caution",
    '9 visitors of 2,009 (0.45%) were enrolled in a variant that the plan lacks: "map" (40 rows; nearest in the plan: "list").',
    { unknownVariant: 9, facts: { variants: [{ value: "map", rows: 40 }] } },
  ],
  ["follow-up", "pass", "Each visitor counted was followed for all of 7 days.", {}],
  [
    "follow-up",
    "pass",
    "1 visitor of 1,996 (0.050%) was enrolled less than 7 days before the log ends, and was left out.",
    { ended: { ...used.ended, "follow-up": [1, 0] } },
  ],
  [
    "follow-up",
    "caution",
    "300 visitors of 1,996 (15.0%) were enrolled less than 7 days before the log ends, and were left out.",
    { ended: { ...used.ended, "follow-up": [150, 150] } },
  ],
  ["filters", "pass", 'The filter "probe" removed 3 rows.', {}],
  ["filters", "pass", 'The filter "probe" removed 1 row.', { rows: { "filter:probe": 1 } }],
  ["filters", "caution", 'The filter "probe" removed nothing.', { rows: {} }],
  ["never-occurs", "pass", "Every event and variant that the plan names occurs in the log.", {}],
  [
    "never-occurs",
    "caution",
    'No row of the log has the event "booking". The nearest that does occur is "bookings".',
    { facts: { missingEvents: ["booking"], events: [{ value: "bookings", rows: 4 }] } },
  ],
];

describe("the table of sentences on the data", () => {
  it.each(LINES)("%s, %s: %s", (id, result, sentence, shape) => {
    const found = checks(plan, reductionOf(plan, { ...used, ...shape }));
    const check = found.find((one) => one.id === id);
    expect([check?.result, check?.sentence]).toEqual([result, sentence]);
  });

  it("never counts one as many, or many as one", () => {
    for (const [, , , shape] of LINES) {
      for (const { sentence, remedy, parts } of checks(plan, reductionOf(plan, { ...used, ...shape }))) {
        for (const text of [sentence, remedy, ...parts.map((part) => part.sentence)]) {
          expect(text).not.toMatch(
            /(?<![\d,.])1 (rows|visitors|event-ids|days)\b|\b([2-9]|\d{2,}|\d,\d+) (row|visitor|event-id|day)\b/,
          );
        }
      }
    }
  });
});
