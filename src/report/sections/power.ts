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
  const power = `It asks for a power of ${planPercent(plan.decision.power)}: a test of the right size finds an effect that is really there in so many of 100 tests.`;
  return [
    `${asked} ${power}`,
    "The size that a next test needs is not computed in this version. It is never to be taken from the effect found here: that effect is itself uncertain, and a large one is found large partly by chance.",
  ];
}
