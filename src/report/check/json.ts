import { askedOf, ruleSentences } from "../../decision/index.ts";
import type { Plan } from "../../plan/types.ts";
import { twelveDigits } from "../digits.ts";
import { flowJson } from "../flow.ts";
import { checkJson } from "../json.ts";
import { dayOf } from "../plan-words.ts";
import { provenanceJson } from "../provenance.ts";
import { scheduleOf } from "./schedule.ts";
import { scheduleSentences } from "./schedule-words.ts";
import type { BlindInputs, BlindJson } from "./types.ts";
import { withheld } from "./withheld.ts";

/** The data of a blind check. */
export function blindJson(inputs: BlindInputs): BlindJson {
  const { plan, reduction } = inputs;
  const json: BlindJson = {
    format: 1,
    experiment: plan.experiment,
    rule: {
      sentences: ruleSentences(plan),
      metrics: plan.metrics.map((metric) => ({
        metric: metric.name,
        role: metric.role,
        asked: askedOf(metric, plan),
      })),
    },
    schedule: scheduleJson(inputs),
    flow: flowJson(plan, reduction),
    checks: inputs.checks.map(checkJson),
    withheld: withheld(plan),
    provenance: provenanceJson(inputs),
  };
  return twelveDigits(json, "check");
}

function scheduleJson({ plan, reduction }: BlindInputs): BlindJson["schedule"] {
  const schedule = scheduleOf(plan, reduction);
  const day = (us: bigint | null) => (us === null ? null : isoDay(us, plan));
  return {
    timezone: plan.timezone,
    logEnd: day(schedule.logEndUs),
    enrolment: {
      first: day(schedule.firstUs),
      last: day(schedule.lastUs),
      plannedLast: schedule.endsUs === null ? null : isoDay(schedule.endsUs - 1n, plan),
      isOpen: schedule.isOpen,
    },
    units: {
      enrolled: schedule.kept,
      followed: schedule.followed,
      planned: schedule.planned,
      byPlannedEnd: schedule.keptByEnd,
    },
    perDay: { seen: schedule.perDay, planned: schedule.plannedPerDay },
    plannedSizeOn: day(schedule.plannedReachedUs),
    followUpCompleteOn: day(schedule.followUpCompleteUs),
    sentences: scheduleSentences(plan, schedule),
  };
}

function isoDay(us: bigint, { timezone }: Plan): string {
  const { year, month, day } = dayOf(us, timezone);
  return [String(year).padStart(4, "0"), ...[month, day].map((part) => String(part).padStart(2, "0"))].join("-");
}
