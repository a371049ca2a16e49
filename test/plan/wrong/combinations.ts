import type { WrongPlan } from "./case.ts";

const metric = (rest: string) => ({
  metrics: `metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}
  - ${rest}`,
});

/** What only several keys together show. */
export const COMBINATIONS: readonly WrongPlan[] = [
  {
    title: "no control",
    plan: { variants: "«variants»:\n  - {name: list}\n  - {name: calendar, control: false}" },
    says: [["", "No variant is the control. Write control: true at the one that the others are compared with."]],
  },
  {
    title: "two controls",
    plan: { variants: "variants: [{name: list, control: true}, {name: map, «control»: true}]" },
    says: [["variants, map", "The control is already list. Only one variant can be it: remove this one or that."]],
  },
  {
    title: "an allocation in percent beside one that is not",
    plan: {
      variants: "variants: [{name: a, control: true, allocation: 50%}, {name: «b»}, {name: c, allocation: «1»}]",
    },
    says: [
      ["variants, b", "Another variant has its allocation in percent. Write all of them in percent, or none."],
      ["variants, c", "Another variant has its allocation in percent. Write all of them in percent, or none."],
    ],
  },
  {
    title: "names that are not unique, each among its own",
    plan: {
      variants: "variants: [{name: a, control: true}, {name: «a»}]",
      metrics: `metrics:
  - {name: a, role: primary, summary: mean, of: {}}
  - {name: b, summary: mean, of: {}}
  - {name: «a», summary: mean, of: {}}`,
      filters: `filters:
  - {name: a, drop: rows, where: {x: 1}}
  - {name: «a», drop: rows, where: {y: 1}}`,
    },
    says: [
      ["variants, a", "This name stands a second time in variants. Give each its own."],
      ["metrics, a", "This name stands a second time in metrics. Give each its own."],
      ["filters, a", "This name stands a second time in filters. Give each its own."],
    ],
  },
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
  {
    title: "filters of rows with what only filters of units have",
    plan: {
      filters: `filters:
  - {name: a, drop: rows, where: {x: 1}, «when»: ever}
  - {name: b, drop: rows, «listed-in»: ids.csv}
  - {name: c, drop: units, where: {x: 1}, «listed-in»: ids.csv}
  - {name: «d», drop: units}
  - {name: e, drop: units, listed-in: ids.csv, «when»: ever}`,
    },
    says: [
      ["filters, a", "when is for filters of units; this one drops rows. Remove when, or write drop: units."],
      ["filters, b", "listed-in is for filters of units; this one drops rows. Remove listed-in, or write drop: units."],
      ["filters, c", "A filter has where or listed-in, not both. Make this a filter of its own."],
      [
        "filters, d",
        "This filter says nothing about what it removes. Add where, such as where: {is_staff: true}, or listed-in.",
      ],
      ["filters, e", "when says at which rows a where looks; a list of units has none. Remove when."],
    ],
  },
  {
    title: "everything of time in a log without time",
    plan: {
      log: "log: [{files: a.csv, columns: {unit: visitor, event: event, variant: arm}}]",
      enrolment: "enrolment: {«from»: 2026-03-02, «before»: 2026-03-16, event: search}",
      "follow-up": "«follow-up»: {days: 7}",
      metrics: `metrics:
  - {name: Booked, role: primary, summary: mean, of: {event: booking, «days»: true}}
  - {name: Fares, summary: mean, of: {«first»: fare}, without-rows: 0}
  - {name: Seats, summary: ratio-of-totals, of: {sum: a}, per: {«last»: b}, without-rows: 0}`,
    },
    says: [
      ["metrics, Booked", "days needs time, and the log has none. Add time to the columns of the log, or remove this."],
      ["metrics, Fares", "first needs time, and the log has none. Add time to the columns of the log, or remove this."],
      ["metrics, Seats", "last needs time, and the log has none. Add time to the columns of the log, or remove this."],
      ["enrolment", "from needs time, and the log has none. Add time to the columns of the log, or remove this."],
      ["enrolment", "before needs time, and the log has none. Add time to the columns of the log, or remove this."],
      ["", "follow-up needs time, and the log has none. Add time to the columns of the log, or remove this."],
    ],
  },
  {
    title: "time in one entry of the log and not in another, told once",
    plan: {
      log: `log:
  - {files: a.csv, columns: {unit: visitor, time: at, event: event}}
  - {files: b.csv, «columns»: {unit: visitor, variant: arm}}`,
      "follow-up": "follow-up: {days: 7}",
    },
    says: [
      [
        "log, number 2",
        "Either every entry of the log has a time or none. Add time to these columns, or remove it from the others.",
      ],
    ],
  },
  {
    title: "events in a log without a column of events, and no variant at all",
    plan: {
      log: "«log»:\n  - {files: a.csv, columns: {unit: visitor, time: at}}",
      enrolment: "enrolment: {«event»: search}",
      metrics: `metrics:
  - {name: Booked, role: primary, summary: ratio-of-totals, of: {«event»: booked}, per: {«event»: seen}}`,
    },
    says: [
      ["", "No entry of the log names a column of the variant. Add variant to the columns of the one that enrols."],
      ["metrics, Booked", "The log has no column of events. Add event to its columns, or remove this."],
      ["metrics, Booked", "The log has no column of events. Add event to its columns, or remove this."],
      ["enrolment", "The log has no column of events. Add event to its columns, or remove this."],
    ],
  },
  {
    title: "the unit as its own event-id",
    plan: {
      log: `log:
  - files: data/*.csv
    columns: {unit: visitor, time: at, event: event, variant: arm, event-id: «visitor»}`,
    },
    says: [
      [
        "log",
        "The event-id tells the rows of one unit apart, so it cannot be the column of the unit. Name another, or remove it.",
      ],
    ],
  },
  {
    title: "what is not built yet, with what else is wrong about it",
    plan: {
      metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    «adjust-for»: {days-before: «-1»}
  - name: Time
    summary: «quantile»
    quantile: «95»
    of: {event: page, max: seconds}
    without-rows: leave-out`,
      subgroups: "«subgroups»: [country]",
      decision: "decision: {primaries: «any», interval: «skew-corrected»}",
    },
    says: [
      ["metrics, Booked", "adjust-for is not built yet. Remove it."],
      ["metrics, Booked", "Expected a number of days above 0 and up to 36,500."],
      [
        "metrics, Time",
        "summary: quantile is not built yet. Take mean, proportion or ratio-of-totals, or remove the metric.",
      ],
      ["metrics, Time", "Expected a number between 0 and 1. For 95% write 0.95."],
      ["", "subgroups is not built yet. Remove it."],
      ["decision", "primaries: any is not built yet. Write all, or remove the key."],
      ["decision", "interval: skew-corrected is not built yet. Write normal, or remove the key."],
    ],
  },
];
