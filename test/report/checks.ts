import type { Check } from "../../src/checks/types.ts";

const pass = (id: string, sentence: string, figures: Check["figures"] = {}): Check => ({
  id,
  result: "pass",
  strong: false,
  sentence,
  remedy: "",
  figures,
  parts: [],
});

export const allocationPassed: Check = {
  ...pass(
    "allocation",
    "The groups are as even as chance makes them: 50,412 with the list and 50,480 with the calendar (p = 0.83).",
  ),
  figures: { chiSquare: 0.0458, df: 1, p: 0.83, counts: { list: 50_412, calendar: 50_480 } },
};

export const allocationFailed: Check = {
  id: "allocation",
  result: "fail",
  strong: false,
  sentence:
    "The two groups should be of one size. Counted were 50,087 visitors with the list and 47,902 with the calendar. Chance alone gives so uneven a split in fewer than one test in a million (p < 0.0001).",
  remedy: "Judge robots by what was known at enrolment (when: at-enrolment), and run the report again.",
  figures: {
    chiSquare: 48.7,
    df: 1,
    p: 2.96e-12,
    counts: { list: 50_148, calendar: 50_214 },
    analysed: { list: 50_087, calendar: 47_902 },
  },
  parts: [
    {
      about: "enrolled",
      result: "pass",
      sentence: "Enrolled were 50,148 and 50,214 visitors, as planned.",
      figures: { chiSquare: 0.0434, p: 0.835 },
    },
    {
      about: "analysed",
      result: "fail",
      sentence: 'After the filter "robots" 50,087 and 47,902 were left.',
      figures: { chiSquare: 48.7, p: 2.96e-12 },
    },
  ],
};

export const duplicatesCaution: Check = {
  id: "duplicates",
  result: "caution",
  strong: false,
  sentence: "3 bookings came twice with different fares; the earlier was counted.",
  remedy: "Ask whoever writes the log which of the two copies is right.",
  figures: { rows: 212, share: 0.000202, copiesThatDiffer: 3 },
  parts: [],
};

export const otherChecks: readonly Check[] = [
  pass("exits", "Visitors left the count at the same rate in both groups at every step.", { smallestP: 0.21 }),
  pass("rejected", "41 of 1,048,213 rows could not be read (0.0039%).", { rows: 41, share: 0.0000391 }),
  pass("switched", "148 visitors were seen in two variants (0.15%), as often in one as in the other.", { units: 148 }),
  pass("filters", "Each filter removed something, and none looks past enrolment."),
  pass("never-occurs", "Every event and variant of the plan occurs in the log."),
  pass("follow-up", "1,410 visitors were not followed to the end (1.4%).", { units: 1_410, share: 0.0138 }),
  pass("one-unit", "No visitor alone moves a result: the largest holds 0.3% of the sum of squares.", {
    largestShare: 0.003,
  }),
];
