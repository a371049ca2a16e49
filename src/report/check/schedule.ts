import { enrolledADay, plannedADay } from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";

const DAY_US = 86_400_000_000;

/** How far a test is, and when it will be done at the pace seen. Instants in microseconds; null where not known. */
export interface Schedule {
  readonly logEndUs: bigint | null;
  /** Units counted, or that will be once followed to the end: enrolled so far. */
  readonly kept: number;
  /** Of these, the ones followed to the end; null where the plan keeps the others too, or has no follow-up. */
  readonly followed: number | null;
  readonly firstUs: bigint | null;
  readonly lastUs: bigint | null;
  /** Enrolment goes on after the log's end; null where neither plan nor log can tell. */
  readonly isOpen: boolean | null;
  readonly endsUs: bigint | null;
  readonly perDay: number | null;
  readonly plannedPerDay: number | null;
  readonly planned: number | null;
  /** When as many are enrolled as planned, if enrolment goes on so long. */
  readonly plannedReachedUs: bigint | null;
  /** Enrolled by the planned end of enrolment, at the pace seen; null unless enrolment is open and its end planned. */
  readonly keptByEnd: number | null;
  /** When the last unit is followed to the end. */
  readonly followUpCompleteUs: bigint | null;
}

export function scheduleOf(plan: Plan, reduction: Pick<Reduction, "facts" | "unitLines">): Schedule {
  const { logEndUs, firstKeptUs: firstUs, lastKeptUs: lastUs } = reduction.facts;
  const on = (id: string) => reduction.unitLines.find((line) => line.id === id)?.units ?? 0;
  const kept = on("analysed") + on("follow-up");
  const perDay = enrolledADay({
    unitLines: [{ id: "analysed", units: kept, byVariant: null }],
    facts: { ...reduction.facts, firstEnrolledUs: firstUs, lastEnrolledUs: lastUs },
  });
  const endsUs = plan.enrolment.beforeUs;
  const isOpen = logEndUs === null || endsUs === null ? null : logEndUs < endsUs;
  const planned = plan.plannedUnits;
  const reachedUs = plannedReached(planned, kept, perDay, lastUs);
  return {
    logEndUs,
    kept,
    followed: plan.followUp?.incomplete === "exclude" && logEndUs !== null ? on("analysed") : null,
    firstUs,
    lastUs,
    isOpen,
    endsUs,
    perDay,
    plannedPerDay: plannedADay(plan),
    planned,
    plannedReachedUs: isOpen === false ? null : reachedUs,
    keptByEnd:
      isOpen === true && perDay !== null && endsUs !== null && lastUs !== null
        ? Math.round(kept + (perDay * Number(endsUs - lastUs)) / DAY_US)
        : null,
    followUpCompleteUs: followUpComplete(plan, { isOpen, endsUs, lastUs, reachedUs }),
  };
}

function plannedReached(planned: number | null, kept: number, perDay: number | null, lastUs: bigint | null) {
  if (planned === null || perDay === null || lastUs === null || kept >= planned) return null;
  return lastUs + BigInt(Math.round(((planned - kept) / perDay) * DAY_US));
}

/** The last unit's: of the planned end while enrolment goes on, else of the last enrolled, or of the one that fills the plan. */
function followUpComplete(
  { followUp }: Plan,
  { isOpen, endsUs, lastUs, reachedUs }: Pick<Schedule, "isOpen" | "endsUs" | "lastUs"> & { reachedUs: bigint | null },
): bigint | null {
  if (followUp === null) return null;
  const last = isOpen === true ? endsUs : isOpen === null ? (reachedUs ?? lastUs) : lastUs;
  return last === null ? null : last + BigInt(Math.round(followUp.days * DAY_US));
}
