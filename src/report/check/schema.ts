import { z } from "zod";
import { checkSchema, flowSchema, provenanceSchema } from "../schema.ts";
import { count, numberOrNull, role } from "../schema-values.ts";

const day = z
  .string()
  .regex(/^\d{4,6}-\d{2}-\d{2}$/)
  .nullable();

/** check.json as a schema: only a check's figures are open. */
export const blindSchema = z.strictObject({
  format: z.literal(1),
  experiment: z.string(),
  rule: z
    .strictObject({
      sentences: z.array(z.string()),
      metrics: z.array(z.strictObject({ metric: z.string(), role, asked: z.string() })),
    })
    .describe("The plan's rule in words."),
  schedule: z
    .strictObject({
      timezone: z.string(),
      logEnd: day,
      enrolment: z.strictObject({
        first: day,
        last: day,
        plannedLast: day,
        isOpen: z.boolean().nullable().describe("Null where neither plan nor log can tell."),
      }),
      units: z.strictObject({
        enrolled: count.describe("Counted, or that will be once followed to the end."),
        followed: count.nullable(),
        planned: count.nullable(),
        byPlannedEnd: count.nullable().describe("Enrolled by the last planned day, at the pace seen."),
      }),
      perDay: z.strictObject({ seen: numberOrNull, planned: numberOrNull }),
      plannedSizeOn: day,
      followUpCompleteOn: day,
      sentences: z.array(z.string()),
    })
    .describe("How far the test is. Days are of the plan's time zone."),
  flow: flowSchema,
  checks: z.array(checkSchema).describe("As far as they may be seen before the end."),
  withheld: z.array(z.strictObject({ what: z.string(), why: z.string() })),
  provenance: provenanceSchema,
});

/** The JSON Schema (draft 2020-12) that `closeout schema check` prints. */
export function blindJsonSchema(): Record<string, unknown> {
  const { $schema, ...rest } = z.toJSONSchema(blindSchema);
  return { $schema, title: "closeout check.json", ...rest };
}
