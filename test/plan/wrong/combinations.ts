import type { WrongPlan } from "./case.ts";

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
    title: "shares that are more than all units",
    plan: { variants: "«variants»: [{name: a, control: true, allocation: 50%}, {name: b, allocation: 60%}]" },
    says: [["", "The allocations add up to 110%. Correct them, or write parts, such as 1 and 2."]],
  },
  {
    title: "a confidence and a power that are the shares of what may go wrong",
    plan: { decision: "decision: {confidence: «5%», power: «0.2»}" },
    says: [
      [
        "decision",
        "A confidence says how often an interval holds the truth, so it is at least 50%. Where 5% may go wrong write 95%.",
      ],
      [
        "decision",
        "Power says how often a test finds the effect, so it is at least 50%. Where 20% may miss it write 80%.",
      ],
    ],
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
    title: "filters of rows with what only filters of units have",
    plan: {
      filters: `filters:
  - {name: a, drop: rows, where: {x: 1}, «when»: ever}
  - {name: b, drop: rows, «listed-in»: ids.csv}
  - {name: c, drop: units, where: {x: 1}, «listed-in»: ids.csv}
  - {name: «d», drop: units}
  - {name: e, drop: units, listed-in: ids.csv, «when»: ever}
  - {name: f, drop: units, «listed-in»: ids.csv, where: {x: 1}, when: ever}`,
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
      ["filters, f", "A filter has where or listed-in, not both. Make this a filter of its own."],
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
    title: "days before enrolment in a log without time, beside what needs none",
    plan: {
      log: "log: [{files: a.csv, columns: {unit: visitor, event: event, variant: arm}}]",
      metrics: `metrics:
  - {name: A, role: primary, summary: proportion, of: {event: b}, adjust-for: {«days-before»: 14}}
  - {name: B, summary: mean, of: {sum: x}, adjust-for: {column: past}}`,
    },
    says: [
      [
        "metrics, A",
        "days-before needs time, and the log has none. Add time to the columns of the log, or remove this.",
      ],
    ],
  },
  {
    title: "subgroups by what tells units, rows, arms or moments apart",
    plan: {
      log: "log: [{files: a.csv, columns: {unit: visitor, time: at, event: event, variant: arm, event-id: id}}]",
      subgroups: "subgroups: [country, «visitor», event, «arm», «id», «at»]",
    },
    says: (["unit", "variant", "event-id", "time"] as const).map((role, i) => [
      `subgroups, number ${[2, 4, 5, 6][i]}`,
      `This is the column of the ${role}, which makes no subgroups. Name another, or remove it.`,
    ]),
  },
  {
    title: "what is asked afterwards with a role, a name that is taken, or a subgroup that is planned",
    plan: {
      subgroups: "subgroups: [country]",
      asked: `asked-afterwards:
  subgroups: [«country», platform]
  metrics:
    - {name: Fare, «role»: primary, summary: mean, of: {event: booking, sum: fare}}
    - {name: «Booked», summary: mean, of: {event: booking}}
    - {name: Rate, summary: proportion, of: {event: booking, «sum»: fare}}`,
    },
    says: [
      ["asked-afterwards", "country is named twice. Remove one of the two."],
      [
        "asked-afterwards",
        "Unknown key. Known here: name, summary, of, per, quantile, in, good-is, cap, adjust-for, without-rows.",
      ],
      ["asked-afterwards", "This name stands a second time in metrics. Give each its own."],
      [
        "asked-afterwards",
        "A proportion counts units with a row, so it takes no sum. Remove it, or write summary: mean.",
      ],
    ],
  },
  {
    title: "a subgroup column named twice",
    plan: { subgroups: "subgroups: [country, platform, «country»]" },
    says: [["subgroups, number 3", "country is named twice. Remove one of the two."]],
  },
];
