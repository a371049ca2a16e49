import type { WrongPlan } from "./case.ts";

/** Shares, amounts, numbers, dates and what a `where` may hold. */
export const VALUES: readonly WrongPlan[] = [
  {
    title: "shares out of range, with what was meant",
    plan: {
      decision: "decision: {confidence: «95», power: «1»}",
      metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwhile: {relative: «5»}
    expected: {relative: «-8%»}
  - name: Fares
    summary: mean
    of: {event: booking, sum: fare}
    cap: {quantile: «99.9»}
  - name: Contacts
    role: guardrail
    summary: mean
    of: {event: contact}
    margin: {relative: «0»}`,
    },
    says: [
      ["metrics, Booked", "Expected a share above 0, such as 0.05 or 5%. For 5% write 0.05, for 500% write 500%."],
      ["metrics, Booked", "Expected a share above 0, such as 0.05 or 5%."],
      ["metrics, Fares", "Expected a number between 0 and 1. For 99.9% write 0.999."],
      ["metrics, Contacts", "Expected a share above 0, such as 0.05 or 5%."],
      ["decision", "Expected a number between 0 and 1. For 95% write 0.95."],
      ["decision", "Expected a number between 0 and 1."],
    ],
  },
  {
    title: "percentages out of range, and what is none",
    plan: {
      decision: "decision: {confidence: «100%», power: «0%»}",
      variants: "variants: [{name: a, control: true, allocation: «0%»}, {name: b, allocation: «five%»}]",
    },
    says: [
      ["variants, a", "Expected a number above 0, such as 1, or a share such as 50%."],
      ["variants, b", "Expected a number above 0, such as 1, or a share such as 50%."],
      ["decision", "Expected a number between 0 and 1."],
      ["decision", "Expected a number between 0 and 1."],
    ],
  },
  {
    title: "amounts that are two things or none",
    plan: {
      metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwhile: {relative: 5%, absolute: «0.002»}
    expected: «{}»
  - name: Fares
    summary: mean
    of: {event: booking, sum: fare}
    cap: {quantile: 0.99, at: «500»}
  - name: Contacts
    role: guardrail
    summary: mean
    of: {event: contact}
    margin: «5%»`,
    },
    says: [
      ["metrics, Booked", "Only one of relative and absolute can hold. Remove one."],
      ["metrics, Booked", "Expected relative or absolute."],
      ["metrics, Fares", "Only one of quantile and at can hold. Remove one."],
      ["metrics, Contacts", "Expected {relative: 5%} or {absolute: 0.002}."],
    ],
  },
  {
    title: "absolute amounts in the wrong unit",
    plan: {
      metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwhile: {absolute: «5»}
  - name: Contacts
    role: guardrail
    summary: mean
    of: {event: contact}
    margin: {absolute: «5%»}`,
    },
    says: [
      ["metrics, Booked", "A proportion lies between 0 and 1. For 5 of 100 units write 5%."],
      [
        "metrics, Contacts",
        "An absolute amount is in the metric's own unit. Write a number, or write relative for a percentage.",
      ],
    ],
  },
  {
    title: "caps that no value of a log can reach exactly",
    plan: {
      metrics: `metrics:
  - {name: A, role: primary, summary: mean, of: {sum: x}, cap: {at: «1e18»}}
  - {name: B, summary: mean, of: {sum: x}, cap: {at: «0.1234567891»}}
  - {name: C, summary: mean, of: {sum: x}, cap: {at: «.inf»}}`,
    },
    says: [
      ["metrics, A", "Expected a number below 10^18 with at most 9 decimal places, as the log's values are read."],
      ["metrics, B", "Expected a number below 10^18 with at most 9 decimal places, as the log's values are read."],
      ["metrics, C", 'Write a number in decimal digits. If this is text, put it in quotes: ".inf".'],
    ],
  },
  {
    title: "numbers of days and of units that cannot be",
    plan: { "follow-up": "follow-up: {days: «-7»}", planned: "planned: {units: «0.5»}" },
    says: [
      ["follow-up", "Expected a number of days above 0 and up to 36,500."],
      ["planned", "Expected a whole number above 0."],
    ],
  },
  {
    title: "a follow-up finer than time is",
    plan: { "follow-up": "follow-up: {days: «0.3333333333333333»}" },
    says: [["follow-up", "Expected a number of days that is a whole number of microseconds. Write fewer decimals."]],
  },
  {
    title: "a time zone and days that the calendar lacks",
    plan: { timezone: "timezone: «Europe/Olso»", enrolment: "enrolment: {from: «2026-02-30», before: «16.3.2026»}" },
    says: [
      ["", "Expected a time zone such as Europe/Oslo or UTC. Did you mean Europe/Oslo?"],
      ["enrolment", "The calendar has no 2026-02-30."],
      [
        "enrolment",
        "Expected a date such as 2026-03-02, or a time such as 2026-03-02T08:00 or 2026-03-02T08:00+01:00.",
      ],
    ],
  },
  {
    title: "times as seconds since 1970, which a log may hold and a plan not",
    plan: { enrolment: 'enrolment: {from: «1772406000», before: «"1773615600"»}' },
    says: [
      ["enrolment", "Expected a date such as 2026-03-02, or a time such as 2026-03-02T08:00."],
      [
        "enrolment",
        "Expected a date such as 2026-03-02, or a time such as 2026-03-02T08:00 or 2026-03-02T08:00+01:00.",
      ],
    ],
  },
  {
    title: "an enrolment that ends before it begins",
    plan: { enrolment: "enrolment: {from: 2026-03-16, before: «2026-03-16»}" },
    says: [
      [
        "enrolment",
        "No unit could enrol: from (2026-03-16) is not before this. Before is the first moment that no longer counts.",
      ],
    ],
  },
  {
    title: "an enrolment of which only the zone shows that it is empty",
    plan: {
      timezone: "timezone: Europe/Oslo",
      enrolment: "enrolment: {from: 2026-03-02T00:30, before: «2026-03-01T23:15Z»}",
    },
    says: [
      [
        "enrolment",
        "No unit could enrol: from (2026-03-02T00:30) is not before this. Before is the first moment that no longer counts.",
      ],
    ],
  },
  {
    title: "an enrolment whose end is local",
    plan: {
      timezone: "timezone: Europe/Oslo",
      enrolment: "enrolment: {from: 2026-03-02T00:00Z, before: «2026-03-02T00:30»}",
    },
    says: [
      [
        "enrolment",
        "No unit could enrol: from (2026-03-02T00:00Z) is not before this. Before is the first moment that no longer counts.",
      ],
    ],
  },
  {
    title: "a follow-up beyond all bounds",
    plan: { "follow-up": "follow-up: {days: «36500.5»}" },
    says: [["follow-up", "Expected a number of days above 0 and up to 36,500."]],
  },
  {
    title: "what a where cannot hold",
    plan: {
      filters: `filters:
  - name: robots
    drop: rows
    where:
      a: «null»
      b: [x, «~»]
      c: {«abve»: 3}
      d: {above: «"3"», below: «ten»}
      e: «{}»
      f: «0x1F»
      g: «[]»
      h: {matches: «5»}
      i: {missing: «yes»}
      j: [x, «[y]»]
      k: {in: «[]», not: «null»}`,
    },
    says: [
      [
        "filters, robots",
        "An empty cell is no value. For rows without one write {missing: true}, for the others {missing: false}.",
      ],
      [
        "filters, robots",
        "An empty cell is no value. For rows without one write {missing: true}, for the others {missing: false}.",
      ],
      ["filters, robots", "Unknown key. Did you mean above?"],
      ["filters, robots", "Expected a number. Write it without quotes."],
      ["filters, robots", "Expected a number."],
      ["filters, robots", "Expected at least one test, such as {above: 3}."],
      ["filters, robots", 'Write a number in decimal digits. If this is text, put it in quotes: "0x1F".'],
      [
        "filters, robots",
        "Expected a value, a list of values, or tests such as {above: 3}. This list is empty: fill it, or remove the key.",
      ],
      ["filters, robots", "Expected a pattern or a list of patterns."],
      ["filters, robots", "Expected true or false. For yes write true."],
      ["filters, robots", "Expected a text, a number, true or false."],
      ["filters, robots", "Expected a value or a list of values. This list is empty: fill it, or remove the key."],
      [
        "filters, robots",
        "An empty cell is no value. For rows without one write {missing: true}, for the others {missing: false}.",
      ],
    ],
  },
  {
    title: "a where without columns, and one that is a list",
    plan: {
      filters: `filters:
  - {name: a, drop: rows, where: «{}»}
  - {name: b, drop: rows, where: «[is_staff]»}`,
    },
    says: [
      ["filters, a", "Expected at least one column and what it must hold."],
      ["filters, b", "Expected a mapping of columns and what they must hold."],
    ],
  },
  {
    title: "words of the decision that it does not know",
    plan: { decision: "decision: {primaries: «some», interval: «skew_corrected»}" },
    says: [
      ["decision", "Expected all or any."],
      ["decision", "Expected normal or skew-corrected. Did you mean skew-corrected?"],
    ],
  },
  ...(
    [
      ["{units-per-month: «0»}", ""],
      ["{units-per-month: «-5»}", ""],
      ["{units-per-month: «0.5»}", ""],
      ["{units-per-month: «many»}", ""],
      ['{units-per-month: «"30,000"»}', " Write 30000, without separators."],
      ["{«units-per-month»: }", " Nothing is written here: fill it in, or remove the key."],
    ] as const
  ).map(([forecast, remedy]): WrongPlan => {
    const says = [["forecast", `Expected a whole number above 0.${remedy}`]] as const;
    return { title: `a forecast of ${forecast}`, plan: { forecast: `forecast: ${forecast}` }, says };
  }),
  {
    title: "a forecast that says not of what",
    plan: { forecast: "forecast: «30000»" },
    says: [["", "Expected a mapping with the key units-per-month."]],
  },
  {
    title: "a forecast of something else",
    plan: { forecast: "«forecast»: {«units»: 30000}" },
    says: [
      ["", "Missing key: units-per-month. How many units will enrol in a month, all variants together."],
      ["forecast", "Unknown key. Known here: units-per-month."],
    ],
  },
];
