import type { WrongPlan } from "./case.ts";

const metric = (rest: string) => ({
  metrics: `metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}
  - ${rest}`,
});

/** What the role and the summary of a metric ask for and do not allow. */
export const METRICS: readonly WrongPlan[] = [
  {
    title: "no primary metric",
    plan: { metrics: "«metrics»:\n  - {name: Booked, summary: proportion, of: {event: booking}}" },
    says: [["", "No metric decides. Write role: primary at the one that does."]],
  },
  {
    title: "worthwhile and margin on a role that has none",
    plan: {
      metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    «margin»: {relative: 5%}
  - name: Fares
    summary: mean
    of: {event: booking, sum: fare}
    «worthwhile»: {relative: 5%}
    «margin»: {relative: 5%}
  - name: «Contacts»
    role: guardrail
    summary: mean
    of: {event: contact}
    «worthwhile»: {relative: 5%}`,
    },
    says: [
      ["metrics, Booked", "margin is for guardrails; this metric is primary. Write role: guardrail, or remove it."],
      [
        "metrics, Fares",
        "worthwhile is for primary metrics; this one is secondary. Write role: primary, or remove it.",
      ],
      ["metrics, Fares", "margin is for guardrails; this metric is secondary. Write role: guardrail, or remove it."],
      [
        "metrics, Contacts",
        "A guardrail needs a margin, the largest harm tolerated. Add one, such as margin: {relative: 5%}.",
      ],
      ["metrics, Contacts", "worthwhile is for primary metrics; this one is guardrail. A guardrail has a margin."],
    ],
  },
  {
    title: "shown-worthwhile with a primary that says not what is",
    plan: {
      metrics: `metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}, worthwhile: {relative: 5%}}
  - {name: «Fares», role: primary, summary: mean, of: {event: booking, sum: fare}}
  - {name: Searches, summary: mean, of: {event: search}}`,
      decision: "decision: {adopt-when: shown-worthwhile}",
    },
    says: [
      [
        "metrics, Fares",
        "The decision asks for shown-worthwhile, so a primary metric needs worthwhile. Add it, such as worthwhile: {relative: 5%}.",
      ],
    ],
  },
  {
    title: "an aggregate other than count on a proportion",
    plan: metric("{name: P, summary: proportion, of: {count: true, «sum»: fare, «days»: true}}"),
    says: [
      ["metrics, P", "A proportion counts units with a row, so it takes no sum. Remove it, or write summary: mean."],
      ["metrics, P", "A proportion counts units with a row, so it takes no days. Remove it, or write summary: mean."],
    ],
  },
  {
    title: "a figure on a proportion that units without rows do not have, told once",
    plan: metric("{name: P, summary: proportion, of: {«max»: fare}}"),
    says: [
      ["metrics, P", "A proportion counts units with a row, so it takes no max. Remove it, or write summary: mean."],
    ],
  },
  {
    title: "two aggregates of the same rows",
    plan: metric("{name: M, summary: ratio-of-totals, of: {sum: fare, «count»: true}, per: {days: true, «sum»: x}}"),
    says: [
      ["metrics, M", "One figure is taken of the rows, and sum stands here already. Remove one of them."],
      ["metrics, M", "One figure is taken of the rows, and days stands here already. Remove one of them."],
    ],
  },
  {
    title: "a ratio without its denominator, and a denominator without its ratio",
    plan: {
      metrics: `metrics:
  - {name: «Booked», role: primary, summary: ratio-of-totals, of: {event: booking}}
  - {name: Fares, summary: mean, of: {event: booking}, «per»: {event: search}}`,
    },
    says: [
      [
        "metrics, Booked",
        "summary: ratio-of-totals needs per. Add per, the denominator, such as per: {event: search_opened}.",
      ],
      ["metrics, Fares", "per is for summary: ratio-of-totals; this one is mean. Remove it, or change the summary."],
    ],
  },
  {
    title: "a quantile without which one, and which one without a quantile",
    plan: {
      metrics: `metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}, «quantile»: 0.5}
  - {name: «Time», summary: quantile, of: {sum: seconds}}`,
    },
    says: [
      [
        "metrics, Booked",
        "quantile is for summary: quantile; this one is proportion. Remove it, or change the summary.",
      ],
      ["metrics, Time", "summary: quantile needs quantile. Add which one, such as quantile: 0.95."],
    ],
  },
  {
    title: "what a quantile does not know",
    plan: metric(`name: Time
    summary: quantile
    quantile: 0.95
    of: {event: page, sum: seconds, «days»: true}
    «per»: {event: page}
    «cap»: {quantile: 0.999}
    «adjust-for»: {days-before: 7}`),
    says: [
      ["metrics, Time", "One figure is taken of the rows, and sum stands here already. Remove one of them."],
      ["metrics, Time", "per is for summary: ratio-of-totals; this one is quantile. Remove it, or change the summary."],
      [
        "metrics, Time",
        "A cap changes nothing that a quantile looks at. Remove it; it is for means and ratios of totals.",
      ],
      ["metrics, Time", "adjust-for is for means and proportions, this summary is quantile. Remove it."],
    ],
  },
  {
    title: "a quantile of a figure that a unit without rows does not have",
    plan: metric("{name: Time, summary: quantile, quantile: 95%, of: {«max»: seconds}}"),
    says: [
      [
        "metrics, Time",
        "A unit without rows has no max. Say what becomes of it: add without-rows: leave-out, or without-rows: 0.",
      ],
    ],
  },
  {
    title: "quantiles that are none",
    plan: {
      metrics: `metrics:
  - {name: A, role: primary, summary: quantile, quantile: «95», of: {sum: x}}
  - {name: B, summary: quantile, quantile: «0», of: {sum: x}}
  - {name: C, summary: quantile, quantile: «1», of: {sum: x}}
  - {name: D, summary: quantile, quantile: «100%», of: {sum: x}}
  - {name: E, summary: quantile, quantile: «-5%», of: {sum: x}}
  - {name: F, summary: quantile, quantile: «median», of: {sum: x}}
  - {name: G, summary: quantile, quantile: «"0.95"», of: {sum: x}}
  - {name: H, summary: quantile, quantile: «1e-400», of: {sum: x}}`,
    },
    says: [
      ["metrics, A", "Expected a number between 0 and 1. For 95% write 0.95."],
      ["metrics, B", "Expected a number between 0 and 1."],
      ["metrics, C", "Expected a number between 0 and 1."],
      ["metrics, D", "Expected a number between 0 and 1."],
      ["metrics, E", "Expected a number between 0 and 1."],
      ["metrics, F", "Expected a number between 0 and 1."],
      ["metrics, G", "Expected a number between 0 and 1. Write it without quotes."],
      ["metrics, H", "Expected a number between 0 and 1."],
    ],
  },
  {
    title: "a covariate where there is none, and one that is two or none",
    plan: {
      metrics: `metrics:
  - {name: A, role: primary, summary: mean, of: {sum: x}, adjust-for: {days-before: 7, column: «past»}}
  - {name: B, summary: proportion, of: {event: b}, adjust-for: «{}»}
  - {name: C, summary: ratio-of-totals, of: {sum: x}, per: {event: b}, «adjust-for»: {column: past}}
  - {name: D, summary: mean, of: {sum: x}, adjust-for: «past»}
  - {name: E, summary: mean, of: {sum: x}, adjust-for: {column: «7»}}`,
    },
    says: [
      ["metrics, A", "Only one of days-before and column can hold. Remove one."],
      ["metrics, B", "Expected days-before or column."],
      ["metrics, C", "adjust-for is for means and proportions, this summary is ratio-of-totals. Remove it."],
      ["metrics, D", "Expected {days-before: 14} or {column: past_fares}."],
      ["metrics, E", 'Expected text. Put it in quotes: "7".'],
    ],
  },
  {
    title: "days before enrolment that cannot be counted",
    plan: {
      metrics: `metrics:
  - {name: A, role: primary, summary: mean, of: {sum: x}, adjust-for: {days-before: «0»}}
  - {name: B, summary: mean, of: {sum: x}, adjust-for: {days-before: «-7»}}
  - {name: C, summary: mean, of: {sum: x}, adjust-for: {days-before: «0.3333333333333333»}}
  - {name: D, summary: mean, of: {sum: x}, adjust-for: {days-before: «36501»}}
  - {name: E, summary: mean, adjust-for: {days-before: «a week»}, of: {sum: x}}
  - {name: «F», summary: mean, adjust-for: {days-before: 7}}`,
    },
    says: [
      ["metrics, A", "Expected a number of days above 0 and up to 36,500."],
      ["metrics, B", "Expected a number of days above 0 and up to 36,500."],
      ["metrics, C", "Expected a number of days that is a whole number of microseconds. Write fewer decimals."],
      ["metrics, D", "Expected a number of days above 0 and up to 36,500."],
      ["metrics, E", "Expected a number of days above 0 and up to 36,500."],
      ["metrics, F", "Missing key: of. What is taken of a unit's rows."],
    ],
  },
  {
    title: "a cap on a proportion",
    plan: metric("{name: P, summary: proportion, of: {event: b}, «cap»: {at: 1}}"),
    says: [
      [
        "metrics, P",
        "A cap changes nothing that a proportion looks at. Remove it; it is for means and ratios of totals.",
      ],
    ],
  },
  {
    title: "a figure that a unit without rows does not have",
    plan: {
      metrics: `metrics:
  - {name: A, role: primary, summary: mean, of: {«max»: seconds}}
  - {name: B, summary: mean, of: {«last»: seconds}}
  - {name: C, summary: ratio-of-totals, of: {sum: x}, per: {«min»: y}}
  - {name: D, summary: mean, of: {first: seconds}, without-rows: 0}
  - {name: E, summary: mean, of: {sum: seconds}}`,
    },
    says: [
      [
        "metrics, A",
        "A unit without rows has no max. Say what becomes of it: add without-rows: leave-out, or without-rows: 0.",
      ],
      [
        "metrics, B",
        "A unit without rows has no last. Say what becomes of it: add without-rows: leave-out, or without-rows: 0.",
      ],
      ["metrics, C", "A unit without rows has no min. Say what becomes of it: add without-rows: 0."],
    ],
  },
  {
    title: "units without rows left out where they count",
    plan: {
      metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    without-rows: «leave-out»
  - name: Fares per booking
    summary: ratio-of-totals
    of: {sum: fare}
    per: {event: booking}
    without-rows: «leave-out»
  - name: Contacts
    summary: mean
    of: {event: contact}
    without-rows: «1»`,
    },
    says: [
      [
        "metrics, Booked",
        "With them left out every unit would have a row, and the proportion be 1. Write 0, or remove this.",
      ],
      [
        "metrics, Fares per booking",
        "A ratio of totals adds up all units; one without rows adds 0. Write 0, or remove this.",
      ],
      ["metrics, Contacts", "Expected 0 or leave-out."],
    ],
  },
];
