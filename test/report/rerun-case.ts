import { planChanged } from "../../src/checks/index.ts";
import { planChanges } from "../../src/plan/index.ts";
import type { StepsJson } from "../../src/report/changes/types.ts";
import { type PreviousReport, previousReport, reportJson } from "../../src/report/index.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { adopt, effectOf } from "./cases.ts";
import { handContrast, shareArm } from "./contrasts.ts";
import { booked, contacts, fare, planText } from "./plans.ts";
import { reductionOf } from "./reductions.ts";

/** A report as the next run finds it. */
export function previousOf(inputs: ReportInputs): PreviousReport {
  const found = previousReport(`${JSON.stringify(reportJson(inputs), null, 2)}\n`);
  if (found === null) throw new Error("a hand-made report is no report");
  return found;
}

const staff = planText.slice(planText.indexOf("filters:"), planText.indexOf("planned:"));

/** PAGES, page one: rerun: 614 and 590 staff accounts are left out, of whom 187 and 253 had booked. */
const withStaff = { control: 50_100 + 614, variant: 50_201 + 590 };
const bookers = { control: 6_012, variant: 6_627 };
const first: ReportInputs = {
  ...adopt,
  plan: { ...adopt.plan, filters: [] },
  planText: planText.replace(staff, ""),
  reduction: reductionOf(
    { ...adopt.plan, filters: [] },
    {
      analysed: [withStaff.control, withStaff.variant],
      byFilter: [],
      followUp: [709, 701],
      notEnrolled: 2_180,
      outside: [204, 208],
      unknown: 10,
    },
  ),
  effects: [
    effectOf(
      booked,
      "calendar",
      handContrast(
        shareArm(withStaff.control, (bookers.control + 187) / withStaff.control),
        shareArm(withStaff.variant, (bookers.variant + 253) / withStaff.variant),
      ),
      "worthwhile",
    ),
    effectOf(
      contacts,
      "calendar",
      handContrast({ units: 50_714, mean: 0.0809, sd: 0.33 }, { units: 50_791, mean: 0.0801, sd: 0.33 }),
      "within",
    ),
    effectOf(
      fare,
      "calendar",
      handContrast({ units: 50_714, mean: 97.1, sd: 410 }, { units: 50_791, mean: 104.7, sd: 430 }),
      "better",
    ),
  ],
  choices: [],
};

export const firstRun = previousOf(first);

const changes = planChanges(first.planText, planText);

/** The second run: one filter was added. */
export const secondRun: ReportInputs = {
  ...adopt,
  planText,
  reduction: reductionOf(adopt.plan, {
    analysed: [50_100, 50_201],
    byFilter: [[614, 590]],
    followUp: [709, 701],
    notEnrolled: 2_180,
    outside: [204, 208],
    unknown: 10,
  }),
  effects: [
    effectOf(
      booked,
      "calendar",
      handContrast(shareArm(50_100, bookers.control / 50_100), shareArm(50_201, bookers.variant / 50_201)),
      "worthwhile",
    ),
    ...adopt.effects.slice(1),
  ],
  choices: [],
  checks: [...[planChanged(adopt.plan, changes)].filter((check) => check !== null), ...adopt.checks],
  rerun: { previous: firstRun, planChanges: changes, ruleChanges: [], steps: null },
};

const step = (decision: "adopt" | "not-settled", estimate: number): StepsJson["start"] => ({
  decision,
  variant: decision === "adopt" ? "calendar" : null,
  analysed: { list: 50_100, calendar: 50_201 },
  effects: [
    {
      metric: "Booked",
      variant: "calendar",
      estimate: estimate / 10,
      low: (estimate - 0.03) / 10,
      high: (estimate + 0.03) / 10,
      relative: { estimate, low: estimate - 0.03, high: estimate + 0.03 },
    },
  ],
});

const another = planText.replace("worthwhile: {relative: 5%}", "worthwhile: {relative: 3%}").replace("0.999", "0.99");
const more = planChanges(planText, another);
export const steps: StepsJson = {
  start: step("not-settled", 0.02),
  changes: [
    { change: "metrics, Booked: worthwhile", alone: step("adopt", 0.02), added: step("adopt", 0.02) },
    { change: "metrics, Fare per visitor: cap", alone: null, added: step("adopt", 0.021) },
  ],
};

/** The third run: the rule was changed with the result in sight, and a file of the log is another. */
export const thirdRun: ReportInputs = {
  ...secondRun,
  planText: another,
  checks: [...[planChanged(adopt.plan, more)].filter((check) => check !== null), ...adopt.checks],
  reduction: {
    ...secondRun.reduction,
    inputs: secondRun.reduction.inputs.map((file, i) => (i === 0 ? { ...file, sha256: "ab".repeat(32) } : file)),
  },
  rerun: {
    previous: previousOf({ ...secondRun, conclusion: { ...adopt.conclusion, decision: "not-settled", variant: null } }),
    planChanges: more,
    ruleChanges: more.filter(({ decides }) => decides),
    steps,
  },
};

/** Nothing can be decided now; before it could. */
export const undecidableRerun: ReportInputs = {
  ...secondRun,
  conclusion: {
    decision: "undecidable",
    variant: null,
    sentence: "No decision from this data yet.",
    reasons: ["The groups are not of one size."],
  },
};
