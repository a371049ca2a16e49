import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { plural } from "../../words/index.ts";
import type { ChangesJson } from "../changes/types.ts";
import { NOT_STATED } from "./design.ts";

/**
 * CONSORT's checklist, item by item, and where this report answers it. Topics are in our words; numbers of 2010 first, of
 * 2025 after them. What applies to no experiment of this kind is named with its reason.
 *
 * Source: Schulz, Altman and Moher 2010, BMJ 340:c332, table 1; Hopewell and others 2025, BMJ 389:e081123, table 1.
 */
export interface ConsortTable {
  readonly rows: readonly ConsortRow[];
  readonly leftOut: string;
}
export interface ConsortRow {
  readonly item2010: string;
  readonly item2025: string;
  readonly topic: string;
  /** Where it stands; null where it is not stated. */
  readonly place: Place | null;
  readonly note: string;
}
export interface Place {
  readonly id: string;
  readonly text: string;
}

const AT = {
  head: { id: "decision", text: "head of the page" },
  decision: { id: "decision", text: "1 Decision" },
  changes: { id: "changes", text: "2 What changed" },
  trust: { id: "trust", text: "3 Can the data be trusted?" },
  design: { id: "design", text: "4 What was planned" },
  flow: { id: "flow", text: "4 The flow" },
  before: { id: "before", text: "4 Before enrolment" },
  metrics: { id: "metrics", text: "5 Each measure" },
  power: { id: "power", text: "6 Power and the next test" },
  looks: { id: "method-planned-looks", text: "7 Planned looks" },
  cautions: { id: "cautions", text: "7 Cautions" },
  rule: { id: "rule", text: "7 The rule" },
  unplanned: { id: "unplanned", text: "7 Planned and unplanned" },
  computed: { id: "computed", text: "7 How it was computed" },
  facts: { id: "facts", text: "7 From what" },
  plan: { id: "plan", text: "7 The plan, word for word" },
} as const satisfies Record<string, Place>;

/** `note` where it is stated; `missing` what else is to be said where it is not. */
type Row = readonly [
  item2010: string,
  item2025: string,
  topic: string,
  place: Place | null,
  note?: string,
  missing?: string,
];

/**
 * @param hasBaseline whether the report has a table of the groups before enrolment
 * @param changes of a rerun; null in a first report, which has no section 2
 */
export function consortTable(
  plan: Plan,
  { facts }: Reduction,
  hasBaseline: boolean,
  changes: Pick<ChangesJson, "plan" | "rule"> | null,
): ConsortTable {
  const { texts, variants, filters } = plan;
  const stated = (value: unknown, place: Place): Place | null =>
    value === null || value === undefined || value === "" ? null : place;
  const described = variants.every(({ what }) => what !== null) || null;
  const guardrails = plan.metrics.some(({ role }) => role === "guardrail") || null;
  const reasons = filters.every(({ why }) => why !== null) ? "" : `of a filter the reason is ${NOT_STATED}`;
  const rows: readonly Row[] = [
    ["1a", "1a", "Named as a randomised experiment", AT.head],
    ["1b", "1b", "Summary", AT.decision],
    ["2a", "6", "Background and reason", stated(texts.notes, AT.facts), "notes of the plan"],
    ["2b", "7", "Question", AT.head],
    ["3a", "9", "Design: groups side by side, planned shares, what must be shown", AT.design],
    ["3b, 6b", "10", "Changes after the start", ...changesAfterStart(plan, changes)],
    ["4a", "12a", "Who could be enrolled", AT.design],
    ["4b", "11", "Where the data come from", AT.facts, "files of the log"],
    ["5", "13", "What each group was given", stated(described, AT.design)],
    ["", "24a", "What each group in fact got", AT.trust, "as far as the log shows it: seen in two variants"],
    ["6a", "14", "Measures, fixed beforehand", AT.metrics],
    ["7a", "16a", "How the size was fixed", stated(plan.plannedUnits, AT.power)],
    plan.looks === null
      ? ["7b", "16b", "Looks before the end", AT.cautions, "the plan names none"]
      : ["7b", "16b", "Looks before the end", AT.looks],
    ["8a", "17a", "How the random order was made, and by whom", null],
    ["8b", "17b", "Kind of randomisation", AT.design, "planned shares; restrictions are not stated"],
    ["9, 10", "18, 19", "How the order was kept and carried out", null, "", "what came of it is tested in section 3"],
    ["11a, 11b", "20a, 20b", "Who did not know the variant", null],
    ["12a", "21a", "Methods of comparison", AT.computed],
    ["", "21b", "Who is in each analysis, in which group", AT.flow],
    [
      "",
      "21c",
      "Values that are missing",
      AT.metrics,
      `under each measure: what a ${plan.unitCalled.one} without rows counts as`,
    ],
    ["12b", "21d", "Methods of further analyses", AT.unplanned],
    ["13a, 16", "22a", "Numbers enrolled and counted, by group as enrolled", AT.flow],
    ["13b", "22b", "Who was left out after enrolment, and why", AT.flow, reasons],
    ["14a", "23a", "Dates of enrolment and follow-up", stated(facts.firstEnrolledUs, AT.head)],
    ["14b", "23b", "Why it ended", stated(texts.ended, AT.facts)],
    ["15", "25", "The groups before enrolment", hasBaseline ? AT.before : null],
    ["17a", "26", "Result of each group, difference and interval", AT.metrics],
    ["17b", "26", "Shares: absolute and relative difference", AT.metrics],
    ["18", "28", "Further analyses, planned and unplanned apart", AT.unplanned],
    ["19", "15, 27", "Harms: how sought, and found", stated(guardrails, AT.decision), "what must not get worse"],
    [
      "20, 21",
      "30",
      "Limits, and to whom it applies",
      stated(texts.limits, AT.decision),
      "not answered by this test; cautions in section 7",
    ],
    ["22", "29", "What it means, gains and harms together", AT.decision],
    ["23", "2", "Registration", stated(plan.registered ?? texts.link, AT.facts), registration(plan)],
    ["24", "3", "Where the plan is", AT.plan],
    ["", "4", "Data and code", AT.facts, "fingerprints of every file; the report gives no row away"],
    ["25", "5a", "Who paid and who owns it", stated(texts.owner, AT.facts), "owner"],
    ["", "5b", "Interests of the authors", null],
  ];
  return {
    rows: rows.map(([item2010, item2025, topic, place, note = "", missing = ""]) => ({
      item2010,
      item2025,
      topic,
      place,
      note: place !== null ? note : missing === "" ? NOT_STATED : `${NOT_STATED}; ${missing}`,
    })),
    leftOut:
      "Left out, since an online experiment has none of it: involvement of patients, sites and those who deliver care, and care besides (2025: 8, 12b, 24b).",
  };
}

function changesAfterStart(
  { registered }: Plan,
  changes: Pick<ChangesJson, "plan" | "rule"> | null,
): [place: Place, note: string] {
  if (changes === null) {
    return registered === null
      ? [AT.plan, "this report knows one plan; its fingerprint stands in 7 From what"]
      : [AT.facts, "this report knows one plan, and whether its rule is the one that was kept before the start"];
  }
  const places = (found: readonly unknown[]) => (found.length === 0 ? "none" : plural(found.length, "place", "places"));
  return [
    AT.changes,
    `of the plan since the report before, ${places(changes.plan)}; of the rule since the first run, ${places(changes.rule)}`,
  ];
}

function registration({ registered, texts }: Plan): string {
  const link = texts.link === null || texts.link === "" ? [] : ["link of the plan"];
  if (registered === null) return link.join("");
  const where = registered.where === null ? "" : `, ${registered.where}`;
  return [`the rule, kept before the start: ${registered.on}${where}`, ...link].join("; ");
}
