import { z } from "zod";
import { metric } from "./schema-metric.ts";
import { column, days, moment, percentage, shareBetween0And1, shareOfWhole, text, where } from "./schema-values.ts";
import { SEAL } from "./seal.ts";

/**
 * The plan as its YAML has it: the one source of truth. The types, the messages about a wrong key or value and
 * `closeout schema` come from here; what only several parts of the plan together can show is in rules/.
 */

const source = z.strictObject({
  files: z.union([text("A path or a glob, relative to the plan."), z.array(text("A path or a glob.")).min(1)]).meta({
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

const filter = z.strictObject({
  name: text("The filter's name, as the reader will see it."),
  why: text("Why, in one sentence for the reader.").optional(),
  drop: z.enum(["units", "rows"]).meta({ description: "What it removes." }),
  where: where.optional(),
  "listed-in": text("A file of unit ids: one a line, or a column headed like the unit's.").optional(),
  when: z
    .enum(["at-enrolment", "ever"])
    .meta({ description: "Units only: judged by the enrolling row (default), or by any row of the unit." })
    .optional(),
});

const incident = z.strictObject({
  name: text("The incident's name, as the reader will see it."),
  from: moment("It counts from here on."),
  before: moment("It counts up to here, this moment not included."),
  where: where.optional(),
  what: text("What happened, in one sentence for the reader.").optional(),
});

const looks = z.strictObject({
  planned: z.array(shareOfWhole("A share of the planned size.")).min(2).max(10).meta({
    description: "When to look: shares of the planned size, rising, the last 1.",
    expected: "a list of 2 to 10 shares of the planned size, such as [0.25, 0.5, 0.75, 1]",
  }),
  at: z.int().gt(0).meta({
    description: "Which of the planned looks this one is, from 1.",
    expected: "a whole number above 0",
  }),
  spending: z
    .enum(["obrien-fleming", "pocock"])
    .meta({ description: "How the looks share what may go wrong: little early on, or evenly." })
    .default("obrien-fleming"),
});

const variant = z.strictObject({
  name: text("The variant's name, as the log has it."),
  what: text("What it is, in one sentence for the reader.").optional(),
  control: z.boolean().meta({ description: "The one that the others are compared with." }).default(false),
  allocation: z
    .union([z.number().gt(0), percentage((share) => share > 0)])
    .meta({
      description: "The planned share of units, as 1 to 1 or 50%.",
      expected: "a number above 0, such as 1, or a share such as 50%",
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
        from: moment("Enrolment counts from here on.").optional(),
        before: moment("Enrolment counts up to here, this moment not included.").optional(),
        "in-two-variants": z
          .enum(["first", "exclude"])
          .meta({ description: "A unit seen in two variants counts where it was first enrolled, or not at all." })
          .default("first"),
      })
      .meta({ description: "Who enters the experiment, and when." })
      .prefault({}),
    variants: z.array(variant).min(2).meta({ description: "Two or more, exactly one the control." }),
    ended: text("Why the experiment ended.").optional(),
    "follow-up": z
      .strictObject({
        days: days("Days of 24 hours after enrolment."),
        incomplete: z
          .enum(["exclude", "keep"])
          .meta({ description: "Units not followed to the end are left out, or kept." })
          .default("exclude"),
      })
      .meta({ description: "How long after its enrolment a unit counts." })
      .optional(),
    metrics: z.array(metric).min(1).meta({ description: "At least one primary." }),
    filters: z.array(filter).meta({ description: "Units or rows that do not count, in this order." }).default([]),
    incidents: z
      .array(incident)
      .max(20)
      .meta({
        description: "What happened while units enrolled; one of the other choices leaves out those enrolled then.",
        expected: "a list of at most 20 incidents, each with a dash",
      })
      .default([]),
    subgroups: z
      .array(text("A column of the log."))
      .meta({ description: "Columns whose value at enrolment divides the units." })
      .default([]),
    "asked-afterwards": z
      .strictObject({
        subgroups: z.array(text("A column of the log.")).meta({ description: "Further subgroups." }).default([]),
        metrics: z
          .array(metric.omit({ role: true, worthwhile: true, expected: true, margin: true }))
          .meta({ description: "Further metrics, without a role: they decide nothing." })
          .default([]),
      })
      .meta({ description: "What was asked after the test began; reported apart, as unplanned, and never decides." })
      .prefault({}),
    decision: z
      .strictObject({
        confidence: shareBetween0And1("The confidence of the intervals.").default(0.95),
        power: shareBetween0And1("The power used for sizing.").default(0.8),
        "adopt-when": z
          .enum(["shown-better", "shown-worthwhile"])
          .meta({ description: "The interval lies above 0, or above the worthwhile effect." })
          .default("shown-better"),
        primaries: z.enum(["all", "any"]).meta({ description: "How many primary metrics must pass." }).default("all"),
        interval: z
          .enum(["normal", "skew-corrected"])
          .meta({ description: "Which interval decides." })
          .default("normal"),
      })
      .meta({ description: "The rule that the conclusion applies." })
      .prefault({}),
    planned: z
      .strictObject({
        units: z.int().gt(0).meta({ description: "All variants together.", expected: "a whole number above 0" }),
      })
      .meta({ description: "What the sizing asked for." })
      .optional(),
    looks: looks.meta({ description: "Interim looks, planned before the test started." }).optional(),
    forecast: z
      .strictObject({
        "units-per-month": z.int().gt(0).meta({
          description: "How many units will enrol in a month, all variants together.",
          expected: "a whole number above 0",
        }),
      })
      .meta({ description: "What is expected of the time after the test." })
      .optional(),
    registered: z
      .strictObject({
        on: text("When the rule was kept."),
        where: text("Where it was kept: a ticket, a repository.").optional(),
        fingerprint: z.string().regex(SEAL).meta({
          description: "What closeout seal printed for the plan of that day.",
          expected: "the fingerprint that closeout seal prints",
        }),
      })
      .meta({ description: "Proof that the rule came before the result; without effect on any number." })
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
export type MetricYaml = PlanYaml["metrics"][number];
export type PartYaml = MetricYaml["of"];
export type WhereYaml = NonNullable<PartYaml["where"]>;
export type AmountYaml = NonNullable<MetricYaml["worthwhile"]>;

/** The JSON Schema of a plan, for editors; draft 7, which they know best. */
export function planJsonSchema(): object {
  return z.toJSONSchema(planSchema, {
    io: "input",
    target: "draft-7",
    override: ({ jsonSchema }) => {
      delete jsonSchema.expected; // for our messages, no word of JSON Schema
    },
  });
}
