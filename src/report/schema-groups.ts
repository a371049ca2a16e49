import { z } from "zod";
import { difference, relative } from "./schema-effects.ts";
import { count, numberOrNull, share } from "./schema-values.ts";

// Of report.json: one effect by the levels of a column, as units enrolled and by day since enrolment.
export const subgroup = z
  .strictObject({
    column: z.string(),
    metric: z.string(),
    variant: z.string(),
    levels: z.array(
      z.strictObject({
        level: z.string().nullable().describe("The value on the enrolling row; null for rest and missing."),
        kind: z.enum(["value", "rest", "missing"]),
        units: count.describe("Of both arms, with a value of the metric."),
        difference,
        relative,
        standing: z.enum(["too-few", "against", "not-against"]),
        sentence: z.string(),
      }),
    ),
    heterogeneity: z.strictObject({ q: z.number(), df: count, p: share }).nullable().describe("Cochran's Q."),
  })
  .describe("One effect by the levels of a column; low and high pointwise, pAdjusted over all levels.");

export const accrual = z
  .strictObject({
    metric: z.string(),
    variant: z.string(),
    band: z
      .strictObject({ units: z.number(), planned: z.boolean() })
      .describe("Where the band is narrowest, and whether that is the plan's number of units."),
    days: z.array(
      z.strictObject({
        day: z.string().describe("Local, YYYY-MM-DD; with all units enrolled up to it."),
        units: count,
        estimate: numberOrNull,
        low: numberOrNull,
        high: numberOrNull,
        bandLow: numberOrNull,
        bandHigh: numberOrNull,
      }),
    ),
  })
  .describe("The effect as units enrolled: low and high of that day alone, the band on all days at once.");

export const sinceEnrolment = z
  .strictObject({
    metric: z.string(),
    variant: z.string(),
    units: count.describe("Of both arms, followed to the end."),
    days: z.array(
      z.strictObject({
        day: count.describe("0 is the first day of 24 hours after enrolment."),
        estimate: numberOrNull,
        low: numberOrNull,
        high: numberOrNull,
        p: numberOrNull,
      }),
    ),
    trend: z
      .strictObject({
        estimate: numberOrNull,
        standardError: numberOrNull,
        low: numberOrNull,
        high: numberOrNull,
        p: numberOrNull,
      })
      .describe("Change of the difference from one day to the next."),
  })
  .describe("One effect by day since enrolment, unadjusted and pointwise.");
