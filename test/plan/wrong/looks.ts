import type { WrongPlan } from "./case.ts";

/** Planned looks and incidents. */
export const LOOKS: readonly WrongPlan[] = [
  {
    title: "looks that do not follow one another to the whole size, and one that is not among them",
    plan: { looks: "looks: {planned: [0.5, «25%», «25.5%», «80%»], at: «5»}" },
    says: [
      ["looks", "A look comes later than the one before it. Write rising shares, at least 1% apart."],
      ["looks", "A look comes later than the one before it. Write rising shares, at least 1% apart."],
      ["looks", "The last look is at the whole planned size. Add 1 behind this."],
      ["looks", "The plan has 4 looks. Write which of them this is, a number from 1 to 4."],
    ],
  },
  {
    title: "looks after the whole size",
    plan: { looks: "looks: {planned: [0.5, 1, «0.75»], at: 3}" },
    says: [["looks", "A look comes later than the one before it. Write rising shares, at least 1% apart."]],
  },
  {
    title: "looks that are no shares, and numbers that no look has",
    plan: { looks: "looks: {planned: [«50», 1], at: «0», spending: «obrien_fleming»}" },
    says: [
      ["looks", "Expected a share above 0 and up to 1, such as 0.5 or 50%. For 50% write 0.5, for 5000% write 5000%."],
      ["looks", "Expected a whole number above 0."],
      ["looks", "Expected obrien-fleming or pocock. Did you mean obrien-fleming?"],
    ],
  },
  {
    title: "one look, which is none on the way",
    plan: { looks: "looks: {planned: «[1]», at: 1}" },
    says: [
      [
        "looks",
        "Expected a list of 2 to 10 shares of the planned size, such as [0.25, 0.5, 0.75, 1]. There must be at least 2 of them.",
      ],
    ],
  },
  {
    title: "incidents without a length, without a readable time and with a name that stands twice",
    plan: {
      incidents: `incidents:
  - {name: outage, from: 2026-03-04T08:00, before: «2026-03-04T08:00»}
  - {name: strike, from: «4 March», before: 2026-03-05}
  - {name: «outage», from: 2026-03-04, before: 2026-03-05}
  - {name: «storm», from: 2026-03-04}`,
    },
    says: [
      [
        "incidents, outage",
        "The incident would have no length: from (2026-03-04T08:00) is not before this. Before is the first moment that no longer counts.",
      ],
      [
        "incidents, strike",
        "Expected a date such as 2026-03-02, or a time such as 2026-03-02T08:00 or 2026-03-02T08:00+01:00.",
      ],
      ["incidents, outage", "This name stands a second time in incidents. Give each its own."],
      ["incidents, storm", "Missing key: before. It counts up to here, this moment not included."],
    ],
  },
  {
    title: "incidents in a log without time",
    plan: {
      log: "log: [{files: a.csv, columns: {unit: visitor, event: event, variant: arm}}]",
      incidents: "«incidents»: [{name: outage, from: 2026-03-04, before: 2026-03-05}]",
    },
    says: [["", "incidents needs time, and the log has none. Add time to the columns of the log, or remove this."]],
  },
];
