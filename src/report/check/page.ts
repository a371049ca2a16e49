import { askedOf, ruleSentences } from "../../decision/index.ts";
import type { Plan } from "../../plan/types.ts";
import { PURPOSE } from "../effect-text.ts";
import { measureText, whenText } from "../plan-words.ts";
import { type ChecksSection, checksSection } from "../sections/checks.ts";
import { type CountedSection, countedSection } from "../sections/counted.ts";
import { type FromWhat, fromWhat } from "../sections/from-what.ts";
import { scheduleOf } from "./schedule.ts";
import { scheduleSentences } from "./schedule-words.ts";
import type { BlindInputs } from "./types.ts";
import { withheld } from "./withheld.ts";

/** All that the template of a blind check prints. */
export interface BlindPage {
  readonly title: string;
  readonly experiment: string;
  readonly question: string;
  readonly when: string;
  readonly version: string;
  readonly contents: readonly { readonly number: number; readonly id: string; readonly title: string }[];
  readonly rule: {
    readonly sentences: readonly string[];
    readonly metrics: readonly {
      readonly name: string;
      readonly purpose: string;
      readonly asked: string;
      readonly what: string;
    }[];
  };
  readonly schedule: readonly string[];
  readonly checks: ChecksSection;
  readonly counted: CountedSection;
  readonly withheld: readonly { readonly what: string; readonly why: string }[];
  readonly methods: FromWhat;
}

/** Sections 3 and 4 are the report's own. */
const CONTENTS = [
  { number: 1, id: "rule", title: "The rule, fixed before the result" },
  { number: 2, id: "schedule", title: "How far the test is" },
  { number: 3, id: "trust", title: "Can the data be trusted?" },
  { number: 4, id: "counted", title: "Who was counted" },
  { number: 5, id: "withheld", title: "What is kept back until the report" },
  { number: 6, id: "from-what", title: "From what" },
] as const;

/** The file of rejected rows that lies beside a check. */
export const CHECK_REJECTS = "check-rejects.csv";

export function blindPage(inputs: BlindInputs): BlindPage {
  const { plan, reduction } = inputs;
  return {
    title: `${plan.experiment}: checked before the end, without any result`,
    experiment: plan.experiment,
    question: plan.question,
    when: whenText(plan, reduction),
    version: inputs.version,
    contents: CONTENTS,
    rule: { sentences: ruleSentences(plan), metrics: plan.metrics.map((metric) => asked(metric, plan)) },
    schedule: scheduleSentences(plan, scheduleOf(plan, reduction)),
    checks: checksSection(inputs.checks),
    counted: countedSection(plan, reduction, CHECK_REJECTS),
    withheld: withheld(plan),
    methods: fromWhat(inputs),
  };
}

function asked(metric: Plan["metrics"][number], plan: Plan) {
  return {
    name: metric.name,
    purpose: PURPOSE[metric.role],
    asked: askedOf(metric, plan),
    what: measureText(metric, plan),
  };
}
