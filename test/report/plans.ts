import type { Metric, Plan, Variant } from "../../src/plan/types.ts";

const count = { kind: "count" } as const;

export const booked: Metric = {
  name: "Booked",
  role: "primary",
  summary: "proportion",
  of: { event: "booking", where: [], aggregate: count },
  per: null,
  quantile: null,
  unitOfMeasure: null,
  goodIs: "higher",
  worthwhile: { kind: "relative", value: 0.05 },
  expected: null,
  margin: null,
  cap: null,
  adjustFor: null,
  withoutRows: "zero",
};

export const contacts: Metric = {
  ...booked,
  name: "Support contacts",
  role: "guardrail",
  summary: "mean",
  of: { event: "support_contact", where: [], aggregate: count },
  goodIs: "lower",
  worthwhile: null,
  margin: { kind: "relative", value: 0.05 },
};

export const fare: Metric = {
  ...booked,
  name: "Fare per visitor",
  role: "secondary",
  summary: "mean",
  of: { event: "booking", where: [], aggregate: { kind: "sum", column: "fare" } },
  unitOfMeasure: "kr",
  worthwhile: null,
  cap: { kind: "quantile", q: "0.999" },
};

export const perSearch: Metric = {
  ...booked,
  name: "Bookings per search",
  role: "secondary",
  summary: "ratio-of-totals",
  per: { event: "search_opened", where: [], aggregate: count },
  worthwhile: null,
};

export const list: Variant = { name: "list", what: "dates in a list", isControl: true, allocation: 1 };
export const calendar: Variant = {
  name: "calendar",
  what: "a month of fares at a glance",
  isControl: false,
  allocation: 1,
};

export const planText = `experiment: Fare calendar on the search page
question: Does a month of fares at a glance raise bookings?
unit-called: {one: visitor, many: visitors}
log:
  - files: data/*.csv.gz
    columns: {unit: visitor, time: at, event: event, variant: arm, event-id: id}
timezone: Europe/Oslo
enrolment:
  event: search_opened
  from: 2026-03-02
  before: 2026-03-16
variants:
  - {name: list, what: dates in a list, control: true}
  - {name: calendar, what: a month of fares at a glance}
follow-up: {days: 7}
metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwhile: {relative: 5%}
  - name: Support contacts
    role: guardrail
    summary: mean
    of: {event: support_contact}
    good-is: lower
    margin: {relative: 5%}
  - name: Fare per visitor
    summary: mean
    of: {event: booking, sum: fare}
    in: kr
    cap: {quantile: 0.999}
filters:
  - name: staff accounts
    why: staff book for training
    drop: units
    where: {is_staff: true}
planned: {units: 100000}
limits: other seasons than March, and visitors who return after more than 7 days
`;

export const farePlan: Plan = {
  experiment: "Fare calendar on the search page",
  question: "Does a month of fares at a glance raise bookings?",
  unitCalled: { one: "visitor", many: "visitors" },
  log: [
    {
      files: ["data/*.csv.gz"],
      columns: { unit: "visitor", time: "at", event: "event", variant: "arm", eventId: "id" },
    },
  ],
  timezone: "Europe/Oslo",
  enrolment: {
    event: "search_opened",
    fromUs: 1_772_406_000_000_000n, // 2 March 2026, 00:00 in Oslo (UTC+1)
    beforeUs: 1_773_615_600_000_000n, // 16 March
    fromText: "2026-03-02",
    beforeText: "2026-03-16",
    inTwoVariants: "first",
  },
  variants: [list, calendar],
  followUp: { days: 7, incomplete: "exclude" },
  metrics: [booked, contacts, fare],
  filters: [
    {
      name: "staff accounts",
      why: "staff book for training",
      drop: "units",
      when: "at-enrolment",
      where: [{ column: "is_staff", kind: "in", values: [{ kind: "boolean", value: true }] }],
    },
  ],
  subgroups: [],
  askedAfterwards: { subgroups: [], metrics: [], columns: [], numericColumns: [] },
  decision: { confidence: 0.95, power: 0.8, adoptWhen: "shown-better", primaries: "all", interval: "normal" },
  plannedUnits: 100_000,
  looks: null,
  incidents: [],
  forecast: null,
  registered: null,
  texts: {
    ended: "the planned two weeks were over",
    owner: "search team",
    link: null,
    limits: "other seasons than March, and visitors who return after more than 7 days",
    notes: null,
    decided: null,
  },
  columns: ["visitor", "id", "fare", "is_staff"],
  numericColumns: ["fare"],
};
