import type { WrongPlan } from "./case.ts";

/** Keys and values that the schema does not take. */
export const SHAPE: readonly WrongPlan[] = [
  {
    title: "a misspelt key, whose value is checked all the same",
    plan: { "follow-up": "«folow-up»: {days: «seven», «incompelte»: keep}" },
    says: [
      ["", "Unknown key. Did you mean follow-up?"],
      ["follow-up", "Expected a number of days above 0 and up to 36,500."],
      ["follow-up", "Unknown key. Did you mean incomplete?"],
    ],
  },
  {
    title: "a required key that is misspelt and so is not missing",
    plan: {
      question: "«Question»: Does it raise bookings?",
      metrics: `metrics:
  - name: Booked
    role: primary
    «sumary»: proportion
    of: {event: booking}`,
    },
    says: [
      ["", "Unknown key. Did you mean question?"],
      ["metrics, Booked", "Unknown key. Did you mean summary?"],
    ],
  },
  {
    title: "a key written with an underscore",
    plan: { enrolment: "enrolment: {«in_two_variants»: exclude}" },
    says: [["enrolment", "Unknown key. Did you mean in-two-variants?"]],
  },
  {
    title: "a key that is like none",
    plan: { decision: "decision: {«threshold»: 0.9}" },
    says: [["decision", "Unknown key. Known here: confidence, power, adopt-when, primaries, interval."]],
  },
  {
    title: "numbers with a comma inside braces, where it ends the value",
    plan: { decision: "decision: {confidence: «0»,«95»}", planned: "planned: {units: 100,«000»}" },
    says: [
      ["decision", "Expected a number between 0 and 1."],
      ["decision", "A comma ends the value before it. Write numbers with a point, and without separators."],
      ["planned", "A comma ends the value before it. Write numbers with a point, and without separators."],
    ],
  },
  {
    title: "a key whose only near one is taken",
    plan: { "unit-called": "unit-called: {one: visitor, many: visitors, «ones»: visitor}" },
    says: [["unit-called", "Unknown key. Known here: one, many."]],
  },
  {
    title: "a key as near to one that is taken as to one that is free",
    plan: { metrics: "metrics: [{name: A, role: primary, summary: mean, of: {max: x, «mix»: y}, without-rows: 0}]" },
    says: [
      [
        "metrics, A",
        "Unknown key. Did you mean min?",
        "One figure is taken of the rows, and max stands here already. Remove one of them.",
      ],
    ],
  },
  ...["engine"].map((key): WrongPlan => {
    const known =
      "experiment, question, unit-called, log, timezone, enrolment, variants, ended, follow-up, metrics, filters, " +
      "incidents, subgroups, asked-afterwards, decision, planned, looks, forecast, registered, owner, link, limits, notes, decided";
    return {
      title: `${key}, which a later version knows`,
      plan: { x: `«${key}»: {}` },
      says: [["", `Unknown key. Known here: ${known}.`]],
    };
  }),
  {
    title: "a table as a source of the log, which a later version knows",
    plan: {
      log: `log:
  - files: data/*.csv
    «table»: events
    columns: {unit: visitor, time: at, event: event, variant: arm}`,
    },
    says: [["log", "Unknown key. Known here: files, columns."]],
  },
  {
    title: "required keys that are missing",
    plan: "«owner»: search team\n",
    says: [
      [
        "",
        "Missing key: experiment. The experiment's name.",
        "Missing key: question. The question it was to answer.",
        "Missing key: log. The sources of rows.",
        "Missing key: variants. Two or more, exactly one the control.",
        "Missing key: metrics. At least one primary.",
      ],
    ],
  },
  {
    title: "required keys that are missing inside",
    plan: {
      log: "log: [{«columns»: {time: at, event: event, variant: arm}}]",
      variants: "variants: [{name: list, control: true}, {«what»: a calendar}]",
      metrics: "metrics: [{name: «Booked», role: primary}]",
      filters: "filters: [{name: «robots», where: {agent: bot}}]",
      "follow-up": "«follow-up»: {incomplete: keep}",
      decided: "«decided»: {by: search team}",
      planned: "«planned»: {}",
    },
    says: [
      [
        "log",
        "Missing key: files. csv, tsv, ndjson or parquet; plain, .gz or .zst; a path, a glob or a list of them, relative to the plan.",
        "Missing key: unit. The column that holds what was randomised.",
      ],
      ["variants, number 2", "Missing key: name. The variant's name, as the log has it."],
      [
        "metrics, Booked",
        "Missing key: summary. Expected mean, proportion, quantile or ratio-of-totals.",
        "Missing key: of. What is taken of a unit's rows.",
      ],
      ["filters, robots", "Missing key: drop. Expected units or rows."],
      ["", "Missing key: days. Days of 24 hours after enrolment."],
      ["", "Missing key: what. What was decided."],
      ["", "Missing key: units. All variants together."],
    ],
  },
  {
    title: "numbers and yes-or-no where text belongs",
    plan: {
      experiment: "experiment: «2026»",
      question: "question: «true»",
      variants: "variants: [{name: «0», control: true}, {name: «1»}]",
    },
    says: [
      ["", 'Expected text. Put it in quotes: "2026".'],
      ["", 'Expected text. Put it in quotes: "true".'],
      ["variants, 0", 'Expected text. Put it in quotes: "0".'],
      ["variants, 1", 'Expected text. Put it in quotes: "1".'],
    ],
  },
  {
    title: "text where a yes-or-no, a number, a list or a mapping belongs",
    plan: {
      variants: "variants: [{name: list, control: «yes»}, {name: calendar, allocation: «half»}]",
      planned: 'planned: {units: «"100,000"»}',
      filters: "filters: «none»",
      decision: 'decision: {confidence: «"0.9"», power: «"0,8"»}',
      timezone: "timezone: «[Europe/Oslo]»",
      decided: "decided: «adopted»",
    },
    says: [
      ["variants, list", "Expected true or false. For yes write true."],
      ["variants, calendar", "Expected a number above 0, such as 1, or a share such as 50%."],
      ["planned", "Expected a whole number above 0. Write 100000, without separators."],
      ["", "Expected a list, each item with a dash."],
      ["decision", "Expected a number between 0 and 1. Write it without quotes."],
      ["decision", "Expected a number between 0 and 1. Write 0.8, with a point."],
      ["", "Expected text."],
      ["", "Expected a mapping with the keys what, by, on and because."],
    ],
  },
  {
    title: "a mapping where a list belongs",
    plan: { log: "«log»:\n  files: data/*.csv\n  columns: {unit: visitor}" },
    says: [["", "Expected a list, each item with a dash. Put a dash before its first key."]],
  },
  {
    title: "a list with too little in it",
    plan: {
      variants: "«variants»:\n  - {name: list, control: true}",
      metrics: "metrics: «[]»",
    },
    says: [
      ["", "Expected a list, each item with a dash. There must be at least 2 of them."],
      ["", "Expected a list, each item with a dash. This list is empty: fill it, or remove the key."],
    ],
  },
  {
    title: "keys with nothing behind them",
    plan: { "unit-called": "unit-called: {«one»: , many: «''»}", filters: "«filters»:", owner: "owner: «~»" },
    says: [
      ["unit-called", "Expected text. Nothing is written here: fill it in, or remove the key."],
      ["unit-called", "Expected text. This is empty."],
      ["", "Expected a list, each item with a dash. Nothing is written here: fill it in, or remove the key."],
      ["", "Expected text. Nothing is written here: fill it in, or remove the key."],
    ],
  },
  {
    title: "words near to those that may stand there",
    plan: {
      enrolment: "enrolment: {in-two-variants: «frist»}",
      decision: "decision: {adopt-when: «Shown-Better», interval: «log»}",
      metrics: `metrics:
  - {name: Booked, role: «primry», summary: «proportions», of: {event: booking}}`,
    },
    says: [
      ["metrics, Booked", "Expected primary, secondary or guardrail. Did you mean primary?"],
      ["metrics, Booked", "Expected mean, proportion, quantile or ratio-of-totals. Did you mean proportion?"],
      ["enrolment", "Expected first or exclude. Did you mean first?"],
      ["decision", "Expected shown-better or shown-worthwhile. Did you mean shown-better?"],
      ["decision", "Expected normal or skew-corrected."],
    ],
  },
];
