import { z } from "zod";
import { changesSchema } from "./changes/schema.ts";
import { effect, sensitivity } from "./schema-effects.ts";
import { accrual, sinceEnrolment, subgroup } from "./schema-groups.ts";
import { count, decision, fingerprint, numberOrNull, outcome, share } from "./schema-values.ts";

const figure: z.ZodType = z.lazy(() =>
  z.union([z.number(), z.string(), z.boolean(), z.null(), z.array(figure), z.record(z.string(), figure)]),
);
const byVariant = z.record(z.string(), count);

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

const looks = z
  .strictObject({
    planned: z.array(share).describe("Shares of the planned size, rising; the last is 1."),
    spending: z.enum(["obrien-fleming", "pocock"]),
    at: count.describe("This look's number, from 1."),
    reached: numberOrNull.describe("Analysed of planned units; null where the plan states no size."),
    shares: z
      .array(count)
      .describe("Of the planned size, at which the looks so far count: earlier ones as planned, the last is this one."),
    metrics: z
      .array(
        z.strictObject({
          metric: z.string(),
          alpha: share.describe("Two-sided, of one interval, all looks together."),
          boundary: count.describe("The interval is estimate -+ boundary x standard error, on the normal's scale."),
          spent: share.describe("Of alpha, by this look."),
        }),
      )
      .describe("What decides or must not get worse, for each of its intervals."),
  })
  .nullable()
  .describe("Planned interim looks; null where the plan has none.");

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
  looks,
  flow: flowSchema,
  checks: z.array(checkSchema),
  effects: z.array(effect),
  subgroups: z.array(subgroup),
  accrual: z.array(accrual),
  sinceEnrolment: z.array(sinceEnrolment),
  sensitivity,
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
