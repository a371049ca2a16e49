import type { WrongPlan } from "./case.ts";

const EXPECTED_KEYS = "Expected keys such as experiment:, question:, log:, variants: and metrics:.";

/** Texts that are no YAML, or no plan. */
export const YAML: readonly WrongPlan[] = [
  { title: "a list", plan: "«- a»\n- b\n", says: [["", `This is no plan. ${EXPECTED_KEYS}`]] },
  { title: "a word", plan: "«hello»\n", says: [["", `This is no plan. ${EXPECTED_KEYS}`]] },
  { title: "a comment only", plan: "«#» to be written\n", says: [["", `The plan is empty. ${EXPECTED_KEYS}`]] },
  {
    title: "keys that stand twice, the second shown, the rest checked all the same",
    plan: {
      experiment: "experiment: a\n«experiment»: b",
      filters: "filters: [{name: f, drop: rows, where: {x: 1, «'x'»: 2}}]",
      planned: "planned: {units: «0»}",
      "follow-up": "follow-up: {days: 7, «days»: seven}",
    },
    says: [
      ["", "This key stands here a second time. Keep one of the two."],
      ["filters, f", "This key stands here a second time. Keep one of the two."],
      ["planned", "Expected a whole number above 0."],
      ["follow-up", "This key stands here a second time. Keep one of the two."],
    ],
  },
  {
    title: "bytes that are no UTF-8, told once",
    plan: { variants: "variants: [{name: Troms«\u{fffd}», control: true}, {name: Bod\u{fffd}}]" },
    says: [["variants, Troms\u{fffd}", "This is no character of UTF-8. Save the plan in that encoding."]],
  },
  {
    title: "a colon inside a text",
    plan: { question: "question: «D»oes it raise: bookings?" },
    says: [["question", 'A second key stands on this line. Put text with a colon in it in quotes: "…: …".']],
  },
  {
    title: "keys that begin further right than the first of their list's item, told where the first of them is",
    plan: `metrics:
 - name: Booked
    «r»ole: primary
    summary: mean
    of: {}
follow-up: 7
`,
    says: [
      [
        "metrics",
        "This line is indented further than the one it belongs to. Let keys of one mapping begin in one column.",
      ],
    ],
  },
  {
    title: "a key under a value, and a text with a colon elsewhere",
    plan: "unit-called:\n  one: visitor\n\n    «m»any: visitors\nquestion: «w»hy: because\n",
    says: [
      [
        "unit-called",
        "This line is indented further than the one it belongs to. Let keys of one mapping begin in one column.",
      ],
      ["question", 'A second key stands on this line. Put text with a colon in it in quotes: "…: …".'],
    ],
  },
  {
    title: "a colon without a space behind it",
    plan: "experiment: a\n«question:Does» it sell?\nlog: []\n",
    says: [["", "A space belongs behind the colon of a key."]],
  },
  {
    title: "a bracket that stays open",
    plan: { experiment: "experiment: {a: 1", question: "«q»uestion: x" },
    says: [["", "A bracket that opened above is not closed before this line. Close it with ] or }."]],
  },
  {
    title: "a bracket too many, and nothing of what follows it",
    plan: { "unit-called": "unit-called: {one: a, many: b}«]»\nowner: c", x: "looks: 1" },
    says: [["", "A bracket closes here that was not opened. Remove it, or put the text in quotes."]],
  },
  {
    title: "a quotation mark that stays open",
    plan: 'experiment: "fares\nquestion: do they ris«e»\n',
    says: [["", "A quotation mark that opened above is never closed. Close it."]],
  },
  {
    title: "an indent that fits nothing, twice, and nothing said of the keys",
    plan: "unit-called:\n  one: a\n «m»any: b\nfollow-up:\n  days: 1\n «i»ncomplete: keep\n",
    says: [
      ["", "This line is indented unlike the ones that it belongs to. Let keys of one mapping begin in one column."],
      ["", "This line is indented unlike the ones that it belongs to. Let keys of one mapping begin in one column."],
    ],
  },
  {
    title: "a text that begins with a mark of YAML's own",
    plan: "experiment: «%» of visitors\n",
    says: [["", "A text cannot begin with this character. Put the text in quotes."]],
  },
  {
    title: "a missing comma",
    plan: "unit-called: {one: «a many: b»}\n",
    says: [["unit-called", "Inside braces keys are set apart by commas. Look for a missing comma."]],
  },
  {
    title: "a list that begins behind its key, told once",
    plan: "variants: «-» {name: a}\n",
    says: [["", "A list begins on a line of its own, below its key."]],
  },
  {
    title: "a second document",
    plan: { metrics: "metrics: [{name: B, role: primary, summary: mean, of: {}}]", x: "«---»", y: "experiment: b" },
    says: [["", "A plan is one YAML document. Remove this line and what follows, or make that a file of its own."]],
  },
  {
    title: "a tag, and an alias of nothing",
    plan: { experiment: "experiment: «!x» a", question: "question: «*bookings»" },
    says: [
      ["", "A plan knows no YAML tags. Remove the word that begins with an exclamation mark."],
      ["", "This alias names no anchor. Put text that begins with * in quotes."],
    ],
  },
  {
    title: "an alias of what holds it",
    plan: "«notes»: &a [*a]\n",
    says: [
      [
        "",
        "The aliases of this plan lead back to themselves, or stand for far more than a plan holds. Write them out.",
      ],
    ],
  },
  {
    title: "keys that are no text",
    plan: {
      experiment: "experiment: a\n? «[a, b]»\n: c",
      filters: "filters: [{name: f, drop: rows, where: {x: 1, «__proto__»: 1}}]",
    },
    says: [
      ["", "A key must be a text."],
      ["filters, f", "No column or key can have this name."],
    ],
  },
];
