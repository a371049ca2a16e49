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
  - {name: «Time», summary: «quantile», of: {sum: seconds}}`,
    },
    says: [
      [
        "metrics, Booked",
        "quantile is for summary: quantile; this one is proportion. Remove it, or change the summary.",
      ],
      ["metrics, Time", "summary: quantile needs quantile. Add which one, such as quantile: 0.95."],
      [
        "metrics, Time",
        "summary: quantile is not built yet. Take mean, proportion or ratio-of-totals, or remove the metric.",
      ],
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
