import { deciding, type Effect } from "../../decision/index.ts";
import type { Plan } from "../../plan/types.ts";

/** Section 7 on how near the normal curve the contrasts are; `when` says whether this report uses it. */
export function normalityMethods({ unitCalled: { one, many } }: Plan, effects: readonly Effect[]) {
  const known = effects.flatMap(({ normality }) => (normality === null ? [] : [normality]));
  const counts = effects.some((effect) => deciding(effect).difference.method === "skew-corrected");
  return [
    {
      when: known.length > 0,
      name: "Normal approximation",
      how: `How often an interval by the normal curve misses the truth on each side follows from the skewness and the kurtosis of the groups\u2019 own values, and of a ratio from its denominator, to the order of one over the number of ${many}. It is taken with one shape for both groups and with each group\u2019s own, and the worse is told. Heavy tails show less in a sample than they are, so it can be further off than told.`,
      source:
        "Hall 1992, The Bootstrap and Edgeworth Expansion, chapter\u00a02; Zhou and Dinh 2005, Biostatistics 6, 187-200; Gerlovina and Hubbard 2021; rules of thumb: Kohavi, Deng, Longbotham and Xu 2014; Cochran 1977, 2.15",
    },
    {
      when: known.length > 0,
      name: "Corrected interval",
      how: `The difference over its standard error, transformed so that its skewness goes, with a skewness between each group\u2019s own and one of both, and a critical value widened for what is uncertain in that. ${counts ? "It counts, as the plan asks." : "It stands beside the interval that counts."}`,
      source:
        "Hall 1992, Journal of the Royal Statistical Society B 54, 221-228; weights and widening are this tool\u2019s",
    },
    {
      when: effects.some(({ resampled }) => resampled !== null),
      name: "Draws and deals",
      how: `Each ${one} falls into one of 1,024 buckets by the id alone. Buckets are drawn with replacement, and the difference over its standard error is taken anew from each draw: its distribution is drawn in section 5 and gives the bootstrap-t interval. For the randomisation test the buckets are dealt anew to the groups, which is near to dealing the ${many} themselves. The draws follow from the values alone and repeat with them.`,
      source:
        "Hall 1992, 3.5; Davison and Hinkley 1997, Bootstrap Methods and their Application, 5.2; Fisher 1935; Janssen 1997, Statistics and Probability Letters 36, 9-21",
    },
    {
      when: known.some(({ largest }) => largest !== null),
      name: "One value",
      how: `The largest share that a single ${one} has of a group\u2019s sum of squares about the mean: where it stays large, the values have no variance to speak of and no interval by a standard error is right.`,
      source:
        "Embrechts, Kl\u00fcppelberg and Mikosch 1997, Modelling Extremal Events, 6.2; limits are this tool\u2019s",
    },
  ];
}
