import { z } from "zod";
import { amount, column, days, eitherOf, shareBetween0And1, text, where } from "./schema-values.ts";

const part = (description: string) =>
  z
    .strictObject({
      event: text("Only rows of this event.").optional(),
      where: where.optional(),
      count: z.literal(true).meta({ description: "The number of rows (default)." }).optional(),
      sum: column("The sum of this column.").optional(),
      days: z.literal(true).meta({ description: "The number of distinct local days with a row." }).optional(),
      max: column("The largest value of this column.").optional(),
      min: column("The smallest value of this column.").optional(),
      first: column("The earliest value of this column.").optional(),
      last: column("The latest value of this column.").optional(),
    })
    .meta({ description, expected: "a mapping such as {event: booking} or {event: booking, sum: fare}" });

/** One of `metrics`. */
export const metric = z.strictObject({
  name: text("The metric's name, as the reader will see it."),
  role: z
    .enum(["primary", "secondary", "guardrail"])
    .meta({ description: "Decides, is for information, or must not get worse." })
    .default("secondary"),
  summary: z
    .enum(["mean", "proportion", "quantile", "ratio-of-totals"])
    .meta({ description: "How the units' values become one figure per variant." }),
  of: part("What is taken of a unit's rows."),
  per: part("The denominator of a ratio of totals.").optional(),
  quantile: shareBetween0And1("Which quantile.").optional(),
  in: text("The unit of measurement, for the reader.").optional(),
  "good-is": z.enum(["higher", "lower"]).meta({ description: "Which way is good." }).default("higher"),
  worthwhile: amount("The smallest effect worth adopting; primary metrics only.").optional(),
  expected: amount("The effect hoped for; used for sizing only.").optional(),
  margin: amount("The largest harm tolerated; guardrails only, and there required.").optional(),
  cap: z
    .strictObject({
      quantile: shareBetween0And1("Cap at this quantile of the units' values.").optional(),
      at: z.number().meta({ description: "Cap at this value." }).optional(),
    })
    .superRefine(eitherOf("quantile", "at"))
    .meta({
      description: "Larger values count as the cap.",
      expected: "{quantile: 0.999} or {at: 500}",
      minProperties: 1,
      maxProperties: 1,
    })
    .optional(),
  "adjust-for": z
    .strictObject({
      "days-before": days("The same quantity, so many days before enrolment.").optional(),
      column: column("A column with a value known at enrolment.").optional(),
    })
    .superRefine(eitherOf("days-before", "column"))
    .meta({
      description: "A covariate.",
      expected: "{days-before: 14} or {column: past_fares}",
      minProperties: 1,
      maxProperties: 1,
    })
    .optional(),
  "without-rows": z
    .literal([0, "leave-out"])
    .meta({ description: "A unit without rows counts as 0, or is left out." })
    .optional(),
});
