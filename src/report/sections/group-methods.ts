import type { Plan } from "../../plan/types.ts";
import { planPercent } from "../../words/index.ts";
import type { ReportInputs } from "../types.ts";

/** Section 7 on days and subgroups; `when` says whether this report uses it. */
export function groupMethods(
  { decision, unitCalled: { one, many } }: Plan,
  {
    accruals,
    daysSince,
    subgroups,
    afterwards,
  }: Pick<ReportInputs, "accruals" | "daysSince" | "subgroups" | "afterwards">,
) {
  const confidence = planPercent(decision.confidence);
  return [
    {
      when: accruals.some(({ days }) => days.length > 0),
      name: `As ${many} enrolled`,
      how: `Each day holds all ${many} enrolled up to it, with their whole follow-up. Its interval is of that day alone. The band is an asymptotic confidence sequence: it holds on all days at once with ${confidence} confidence, where the normal approximation is good on all of them, and is narrowest at the planned number of ${many}.`,
      source: "Waudby-Smith, Arbour, Sinha, Kennedy and Ramdas 2024, Annals of Statistics 52, 2613-2640",
    },
    {
      when: daysSince.length > 0,
      name: "By day since enrolment",
      how: `Each ${one} has its own slope over the days of its follow-up, and the slopes of the two groups are compared as any other values, for the days of one ${one} are not independent.`,
      source: "Summary measures: Matthews, Altman, Campbell and Royston 1990, British Medical Journal 300, 230-235",
    },
    {
      when: subgroups.length > 0 || afterwards.subgroups.length > 0,
      name: "Subgroups",
      how: `${many[0]?.toUpperCase()}${many.slice(1)} are divided by a value of the row that enrolled them; the 12 values with most of them stand by themselves. Whether the differences differ is told by Cochran\u2019s Q over the levels that are large enough. A level is said to point against the whole only where its interval at the confidence shared out over all levels lies wholly on the other side of zero. p is adjusted over all levels. Adjusted measures keep the slope of the whole, ratios take the level\u2019s own.`,
      source:
        "Cochran 1954, Biometrics 10, 101-129; Benjamini and Hochberg 1995, Journal of the Royal Statistical Society B 57, 289-300",
    },
  ];
}
