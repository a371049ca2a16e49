import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { count, planPercent, plural } from "../../words/index.ts";

/** Section 6: what the plan asked for, beside what was counted. Sizes of a next test are not computed in this version. */
export function powerParagraphs(plan: Plan, { unitLines }: Reduction): string[] {
  const { one, many } = plan.unitCalled;
  const counted = unitLines.find((line) => line.id === "analysed")?.units ?? 0;
  const asked =
    plan.plannedUnits === null
      ? `The plan states no size. ${count(counted)} ${counted === 1 ? one : many} ${counted === 1 ? "was" : "were"} counted.`
      : `The plan asked for ${plural(plan.plannedUnits, one, many)}, all variants together; ${count(counted)} ${counted === 1 ? "was" : "were"} counted.`;
  const power = `The plan asks for a power of ${planPercent(plan.decision.power)}: so many of 100 tests of the right size find an effect as large as the one they were sized for.`;
  return [
    `${asked} ${power}`,
    "The size that a next test needs is not computed in this version. It is never to be taken from the effect found here: that effect is itself uncertain, and a large one is found large partly by chance.",
  ];
}
