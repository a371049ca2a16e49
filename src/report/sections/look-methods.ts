import type { Plan } from "../../plan/types.ts";
import { list, planPercent } from "../../words/index.ts";

/** Section 7 on planned looks. */

export function lookMethods(plan: Plan, variants: number, confidence: string) {
  const { looks } = plan;
  if (looks === null) return [];
  const spent =
    looks.spending === "obrien-fleming"
      ? "little early on and most at the end, as O\u2019Brien and Fleming\u2019s boundaries do"
      : "about evenly, as Pocock\u2019s boundaries do";
  const over =
    variants > 1
      ? ` It is shared out evenly over the ${variants} variants; Holm\u2019s p, by several steps, stands beside and does not decide.`
      : "";
  return [
    {
      when: true,
      name: "Planned looks",
      how: `The plan looks ${looks.planned.length} times, at ${list(looks.planned.map(planPercent))} of its size; this is look ${looks.at}. The error of ${confidence} intervals is spent over the looks ${spent}; a look\u2019s share is what was counted, of what was planned, earlier looks at their shares in the plan, and the last spends what is left. The interval of what decides is the repeated one: whatever the looks show, all of them together hold the truth with ${confidence} confidence. p adjusted for the looks is the error at which it touches zero.${over} Measures for information are not adjusted for the looks. Sizes are of a test that goes to its last look.`,
      source: `Lan and DeMets 1983, Biometrika 70, 659-663; Armitage, McPherson and Rowe 1969, Journal of the Royal Statistical Society A 132, 235-244; Jennison and Turnbull 1989, Journal of the Royal Statistical Society B 51, 305-361, and 2000, Group Sequential Methods${variants > 1 ? "; Dunn 1961, Journal of the American Statistical Association 56, 52-64; Holm 1979, Scandinavian Journal of Statistics 6, 65-70" : ""}`,
    },
  ];
}

export function lookCaution({ looks }: Plan): string {
  return looks === null
    ? "The size of this test was to be fixed beforehand. Looking at the result before the planned end, and stopping when it pleases, makes false results more frequent than stated."
    : "The looks at this test were planned beforehand, and what decides allows for them. Looking at other times, and stopping when it pleases, makes false results more frequent than stated.";
}
