import { z } from "zod";
import { count, numberOrNull, role, share, zone } from "./schema-values.ts";

// Of report.json: each contrast with its arms, and the same under other choices.
const arm = z.strictObject({
  units: count,
  mean: numberOrNull,
  sd: numberOrNull,
  skewness: numberOrNull,
  kurtosis: numberOrNull,
  total: numberOrNull,
  smallest: numberOrNull,
  largest: numberOrNull,
});

export const difference = z
  .strictObject({
    estimate: numberOrNull,
    standardError: numberOrNull,
    low: numberOrNull,
    high: numberOrNull,
    z: numberOrNull,
    p: numberOrNull,
    pAdjusted: numberOrNull,
    method: z.enum(["normal", "welch", "score", "skew-corrected", "quantile"]),
  })
  .describe("Variant minus control, in the metric's unit. low and high are the ones that decide; z and p pointwise.");

export const relative = z
  .strictObject({ estimate: z.number(), low: numberOrNull, high: numberOrNull })
  .nullable()
  .describe("Variant over control minus 1. An end without a limit is null.");

export const effect = z.strictObject({
  metric: z.string(),
  role,
  summary: z.enum(["mean", "proportion", "quantile", "ratio-of-totals"]),
  variant: z.string(),
  control: z.string(),
  arms: z.strictObject({ control: arm, variant: arm }),
  difference,
  relative,
  adjusted: z
    .strictObject({ difference, relative, theta: z.number(), varianceReduction: z.number() })
    .nullable()
    .describe("Adjusted for the plan's covariate. Where not null its difference decides, and zone and power are its."),
  zone,
  power: z.strictObject({ detectable: numberOrNull, unitsForWorthwhile: numberOrNull }),
  normality: z
    .strictObject({
      skew: z.number().describe("Skewness of the estimate."),
      lowerTail: share.describe("Chance that the normal interval lies wholly below the truth."),
      upperTail: share.describe("Chance that it lies wholly above the truth."),
      own: z
        .strictObject({ lowerTail: share, upperTail: share })
        .describe("By each arm's own shape; above stands the worse of that and of one shape for both."),
      skewCorrected: z.strictObject({ low: z.number(), high: z.number() }),
      unitsForTails: count
        .nullable()
        .describe("Units of all arms from which on both tails are within a fifth of the nominal one; at least."),
      unitsByRule: count.describe("Rule of thumb: 355 times the squared skewness, units of each arm."),
      largestShare: z
        .number()
        .nullable()
        .describe("The largest unit's share of an arm's sum of squares about the mean; null for proportions."),
    })
    .nullable()
    .describe("How good the normal approximation is for the contrast that decides."),
});

export const sensitivity = z
  .array(
    z.strictObject({
      metric: z.string(),
      variant: z.string(),
      rows: z.array(
        z.strictObject({
          choice: z.union([
            z.enum([
              "as-planned",
              "unadjusted",
              "no-cap",
              "cap-0.99",
              "cap-0.999",
              "without-largest",
              "other-way-in-two-variants",
              "any-follow-up",
              "without-first-day",
              "normal",
              "welch",
              "score",
              "skew-corrected",
              "bootstrap-t",
              "randomisation",
              "log",
            ]),
            z.templateLiteral(["without-incident:", z.string()]),
          ]),
          estimate: numberOrNull,
          low: numberOrNull,
          high: numberOrNull,
          sign: z.union([z.literal(-1), z.literal(0), z.literal(1)]).nullable(),
          p: numberOrNull,
          agrees: z.boolean(),
        }),
      ),
    }),
  )
  .describe("Each contrast under other reasonable choices. agrees: it stands where the plan's own choice puts it.");
