import { z } from "zod";
import { changesSchema } from "./changes/schema.ts";
import { decision, fingerprint, numberOrNull, outcome, role, zone } from "./schema-values.ts";

const figure: z.ZodType = z.lazy(() =>
  z.union([z.number(), z.string(), z.boolean(), z.null(), z.array(figure), z.record(z.string(), figure)]),
);
export const count = z.number().min(0);
const tail = z.number().min(0).max(1);
const byVariant = z.record(z.string(), count);

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

const difference = z
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

const relative = z
  .strictObject({ estimate: z.number(), low: numberOrNull, high: numberOrNull })
  .nullable()
  .describe("Variant over control minus 1. An end without a limit is null.");

const effect = z.strictObject({
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
      lowerTail: tail.describe("Chance that the normal interval lies wholly below the truth."),
      upperTail: tail.describe("Chance that it lies wholly above the truth."),
      own: z
        .strictObject({ lowerTail: tail, upperTail: tail })
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

const subgroup = z
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
    heterogeneity: z.strictObject({ q: z.number(), df: count, p: tail }).nullable().describe("Cochran's Q."),
  })
  .describe("One effect by the levels of a column; low and high pointwise, pAdjusted over all levels.");

const accrual = z
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

const sinceEnrolment = z
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

export const checkSchema = z
  .object({
    id: z.string(),
    result: outcome,
    strong: z.boolean(),
    sentence: z.string(),
    remedy: z.string(),
    parts: z.array(z.object({ about: z.string(), result: outcome, sentence: z.string() }).catchall(figure)),
  })
  .catchall(figure)
  .describe("The check's figures stand beside these keys.");

const file = z.strictObject({ name: z.string(), bytes: count, sha256: fingerprint, rows: count });

export const flowSchema = z.strictObject({
  rowsRead: count,
  rows: z
    .array(z.strictObject({ id: z.string(), line: z.string(), rows: count }))
    .describe("The rows add up to rowsRead."),
  unitsSeen: count,
  units: z
    .array(z.strictObject({ id: z.string(), line: z.string(), units: count, byVariant: byVariant.nullable() }))
    .describe("The units add up to unitsSeen."),
  analysed: byVariant,
  metrics: z
    .array(
      z.strictObject({
        metric: z.string(),
        lines: z.array(z.strictObject({ id: z.string(), line: z.string(), rows: count, sum: numberOrNull })),
      }),
    )
    .describe(
      "The rows that each metric's event and where match (a ratio's numerator), by the same lines; sum is of the metric's column, null without one. The last line is what the metric counted.",
    ),
});

export const provenanceSchema = z.strictObject({
  version: z.string(),
  plan: z.strictObject({ sha256: fingerprint, text: z.string() }),
  inputs: z.array(file),
  lists: z.array(file),
  engine: z.strictObject({ name: z.string(), version: z.string() }),
});

/** report.json (DESIGN 7) as a schema: keys of the contract are closed, only a check's figures are open. */
export const reportSchema = z.strictObject({
  format: z.literal(1),
  experiment: z.string(),
  conclusion: z.strictObject({
    decision,
    variant: z.string().nullable().describe("The adopted variant, else null."),
    sentence: z.string(),
    reasons: z.array(z.string()),
  }),
  flow: flowSchema,
  checks: z.array(checkSchema),
  effects: z.array(effect),
  subgroups: z.array(subgroup),
  accrual: z.array(accrual),
  sinceEnrolment: z.array(sinceEnrolment),
  sensitivity: z
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
    .describe("Each contrast under other reasonable choices. agrees: it stands where the plan's own choice puts it."),
  askedAfterwards: z
    .strictObject({ effects: z.array(effect), subgroups: z.array(subgroup) })
    .nullable()
    .describe("What was asked after the test began: unplanned, it decides nothing."),
  changes: changesSchema,
  provenance: provenanceSchema.extend({
    cells: fingerprint.nullable().describe("SHA-256 of cells.json beside the report."),
    fromCells: z.boolean().describe("Made from cells that an earlier report had kept, without reading the log."),
  }),
});

/** The JSON Schema (draft 2020-12) that `closeout schema report` prints. */
export function reportJsonSchema(): Record<string, unknown> {
  const { $schema, ...rest } = z.toJSONSchema(reportSchema);
  return { $schema, title: "closeout report.json", ...rest };
}
