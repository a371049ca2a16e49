import { z } from "zod";
import { PERCENT } from "./number.ts";

/**
 * The plan as its YAML has it: the one source of truth. The types, the messages about a wrong key or value and
 * `closeout schema` come from here; what only a combination of keys can show is in rules/.
 */

const text = (description: string) => z.string().min(1).meta({ description });
const column = (description: string) => text(description);

/** A number or a percentage. Its range is checked in rules/amounts.ts, which can say what to write instead. */
const share = (description: string, limits: Record<string, number>) =>
  z
    .union([z.number().meta(limits), z.string().regex(PERCENT)])
    .meta({ description, expected: "a share such as 0.05 or 5%" });

const BETWEEN_0_AND_1 = { exclusiveMinimum: 0, exclusiveMaximum: 1 };
const ABOVE_0 = { exclusiveMinimum: 0 };

const amount = (description: string) =>
  z
    .strictObject({
      relative: share("A share of the control's level.", { ...ABOVE_0, maximum: 1 }).optional(),
      absolute: z
        .union([z.number().meta(ABOVE_0), z.string().regex(PERCENT)])
        .meta({
          description: "An amount in the metric's own unit; of a proportion a share.",
          expected: "a number in the metric's own unit",
        })
        .optional(),
    })
    .meta({ description, minProperties: 1, maxProperties: 1 });

const scalar = z.union([z.string(), z.number(), z.boolean()]).meta({ expected: "a text, a number, true or false" });
const scalars = z.array(scalar).min(1).meta({ expected: "a list of values" });
const values = z.union([scalar, scalars]).meta({ expected: "a value or a list of values" });

const condition = z
  .union([
    scalar,
    scalars,
    z
      .strictObject({
        not: values.meta({ description: "Matches what is there and is none of these." }).optional(),
        in: values.meta({ description: "Matches any of these." }).optional(),
        above: z.number().optional(),
        below: z.number().optional(),
        "at-least": z.number().optional(),
        "at-most": z.number().optional(),
        missing: z.boolean().meta({ description: "true matches empty cells, false all others." }).optional(),
        matches: z
          .union([z.string(), z.array(z.string()).min(1)])
          .meta({
            description: "Patterns over the whole value: * for any text, ? for one character.",
            expected: "a pattern or a list of patterns",
          })
          .optional(),
      })
      .meta({ minProperties: 1, description: "Tests of the column that must all hold." }),
  ])
  .meta({ expected: "a value, a list of values, or tests such as {above: 3}" });

const where = z
  .record(z.string().min(1), condition)
  .meta({ description: "Columns and what they must hold; all of them together.", minProperties: 1 });

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
    .meta({ description });

const source = z.strictObject({
  files: z.union([text("A path or a glob, relative to the plan."), z.array(z.string().min(1)).min(1)]).meta({
    description:
      "csv, tsv, ndjson or parquet; plain, .gz or .zst; a path, a glob or a list of them, relative to the plan.",
    expected: "a path, or a list of paths",
  }),
  columns: z
    .strictObject({
      unit: column("The column that holds what was randomised."),
      time: column("The column that holds the time of the row.").optional(),
      event: column("The column that holds the name of the event.").optional(),
      variant: column("The column that holds the variant.").optional(),
      "event-id": column("The column whose value is the same in copies of one event.").optional(),
    })
    .meta({ description: "Our names and yours." }),
});

const metric = z.strictObject({
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
  quantile: share("Which quantile.", BETWEEN_0_AND_1).optional(),
  in: text("The unit of measurement, for the reader.").optional(),
  "good-is": z.enum(["higher", "lower"]).default("higher"),
  worthwhile: amount("The smallest effect worth adopting; primary metrics only.").optional(),
  expected: amount("The effect hoped for; used for sizing only.").optional(),
  margin: amount("The largest harm tolerated; guardrails only, and there required.").optional(),
  cap: z
    .strictObject({
      quantile: share("Cap at this quantile of the units' values.", BETWEEN_0_AND_1).optional(),
      at: z.number().meta({ description: "Cap at this value." }).optional(),
    })
    .meta({ description: "Larger values count as the cap.", minProperties: 1, maxProperties: 1 })
    .optional(),
  "adjust-for": z
    .strictObject({
      "days-before": z
        .number()
        .meta({ ...ABOVE_0, description: "The same quantity, so many days before enrolment." })
        .optional(),
      column: column("A column with a value known at enrolment.").optional(),
    })
    .meta({ description: "A covariate.", minProperties: 1, maxProperties: 1 })
    .optional(),
  "without-rows": z
    .literal([0, "leave-out"])
    .meta({ description: "A unit without rows counts as 0, or is left out." })
    .optional(),
});

const filter = z.strictObject({
  name: text("The filter's name, as the reader will see it."),
  why: text("Why, in one sentence for the reader.").optional(),
  drop: z.enum(["units", "rows"]),
  where: where.optional(),
  "listed-in": text("A file of unit ids: one a line, or a column headed like the unit's.").optional(),
  when: z
    .enum(["at-enrolment", "ever"])
    .meta({ description: "Units only: judged by the enrolling row (default), or by any row of the unit." })
    .optional(),
});

const variant = z.strictObject({
  name: text("The variant's name, as the log has it."),
  what: text("What it is, in one sentence for the reader.").optional(),
  control: z.boolean().default(false),
  allocation: z
    .union([z.number().meta(ABOVE_0), z.string().regex(PERCENT)])
    .meta({
      description: "The planned share of units, as 1 to 1 or 50%.",
      expected: "a number such as 1, or a share such as 50%",
    })
    .default(1),
});

export const planSchema = z
  .strictObject({
    experiment: text("The experiment's name."),
    question: text("The question it was to answer."),
    "unit-called": z
      .strictObject({ one: text("One of them."), many: text("Many of them.") })
      .meta({ description: "What a unit is called in the report." })
      .default({ one: "unit", many: "units" }),
    log: z.array(source).min(1).meta({ description: "The sources of rows." }),
    timezone: text("An IANA name; how days are cut and times without offset are read.").default("UTC"),
    enrolment: z
      .strictObject({
        event: text("Only rows of this event enrol.").optional(),
        from: text("A date or time; inclusive.").optional(),
        before: text("A date or time; exclusive.").optional(),
        "in-two-variants": z.enum(["first", "exclude"]).default("first"),
      })
      .prefault({}),
    variants: z.array(variant).min(2).meta({ description: "Two or more, exactly one the control." }),
    ended: text("Why the experiment ended.").optional(),
    "follow-up": z
      .strictObject({
        days: z.number().meta({ ...ABOVE_0, description: "Days of 24 hours after enrolment." }),
        incomplete: z.enum(["exclude", "keep"]).default("exclude"),
      })
      .optional(),
    metrics: z.array(metric).min(1).meta({ description: "At least one primary." }),
    filters: z.array(filter).default([]),
    subgroups: z.array(z.string().min(1)).optional(),
    decision: z
      .strictObject({
        confidence: share("The confidence of the intervals.", BETWEEN_0_AND_1).default(0.95),
        power: share("The power used for sizing.", BETWEEN_0_AND_1).default(0.8),
        "adopt-when": z.enum(["shown-better", "shown-worthwhile"]).default("shown-better"),
        primaries: z.enum(["all", "any"]).default("all"),
        interval: z.enum(["normal", "skew-corrected"]).default("normal"),
      })
      .prefault({}),
    planned: z
      .strictObject({ units: z.number().meta({ ...ABOVE_0, description: "All variants together." }) })
      .meta({ description: "What the sizing asked for." })
      .optional(),
    owner: text("Who owns the experiment.").optional(),
    link: text("Where more is written.").optional(),
    limits: text("What the test does not answer.").optional(),
    notes: text("Anything else for the reader.").optional(),
    decided: z
      .strictObject({
        what: text("What was decided."),
        by: text("By whom.").optional(),
        on: text("When.").optional(),
        because: text("Why.").optional(),
      })
      .meta({ description: "What was decided afterwards; without effect on any number." })
      .optional(),
  })
  .meta({ title: "closeout plan", description: "The analysis plan of one A/B test." });

/** The plan after its shape was checked, defaults filled in, keys as in the YAML. */
export type PlanYaml = z.output<typeof planSchema>;
export type PartYaml = PlanYaml["metrics"][number]["of"];
export type WhereYaml = NonNullable<PartYaml["where"]>;
export type AmountYaml = NonNullable<PlanYaml["metrics"][number]["worthwhile"]>;

/** The JSON Schema of a plan, for editors; draft 7, which they know best. */
export function planJsonSchema(): object {
  return z.toJSONSchema(planSchema, { io: "input", target: "draft-7" });
}
