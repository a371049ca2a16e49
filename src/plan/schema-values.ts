import { z } from "zod";
import { PERCENT, parsePercent } from "./number.ts";
import { isWholeMicroseconds } from "./time.ts";

/**
 * The values that the plan's schema is made of. `description` is for editors; `expected` is how a message names what
 * may stand there, where the shape alone would not say it well.
 */

/** Text with something in it. */
export const text = (description: string) => z.string().regex(/\S/).meta({ description });
/** A date or time as in a log; rules/enrolment.ts reads it. */
export const moment = (description: string) =>
  z
    .string()
    .regex(/\S/)
    .meta({ description, expected: "a date such as 2026-03-02, or a time such as 2026-03-02T08:00" });

/** The name of a column of the log. */
export const column = text;

/** A percentage as text; `isIn` says which shares are taken. */
export const percentage = (isIn: (share: number) => boolean) =>
  z
    .string()
    .regex(PERCENT)
    .refine((written) => isIn(Number(parsePercent(written))));

export const shareBetween0And1 = (description: string) =>
  z
    .union([z.number().gt(0).lt(1), percentage((share) => share > 0 && share < 1)])
    .meta({ description, expected: "a number between 0 and 1" });

export const shareOfWhole = (description: string) =>
  z
    .union([z.number().gt(0).lte(1), percentage((share) => share > 0 && share <= 1)])
    .meta({ description, expected: "a share above 0 and up to 1, such as 0.5 or 50%" });

/** Exactly one of two keys. */
export const eitherOf =
  <K extends string>(one: K, other: K) =>
  (value: { readonly [key in K]?: unknown }, context: z.RefinementCtx): void => {
    const has = [one, other].filter((key) => value[key] !== undefined);
    if (has.length === 1) return;
    const message =
      has.length === 0 ? `Expected ${one} or ${other}.` : `Only one of ${one} and ${other} can hold. Remove one.`;
    context.addIssue({ code: "custom", message, path: has.slice(1) });
  };

/** An effect size. A bare number above 1 is more often a percentage without its sign than several times the level. */
export const amount = (description: string) =>
  z
    .strictObject({
      relative: z
        .union([z.number().gt(0).lte(1), percentage((share) => share > 0)])
        .meta({ description: "A share of the control's level.", expected: "a share above 0, such as 0.05 or 5%" })
        .optional(),
      absolute: z
        .union([z.number().gt(0), percentage((share) => share > 0)])
        .meta({
          description: "An amount in the metric's own unit; of a proportion a share.",
          expected: "a number above 0, in the metric's own unit",
        })
        .optional(),
    })
    .superRefine(eitherOf("relative", "absolute"))
    .meta({ description, expected: "{relative: 5%} or {absolute: 0.002}", minProperties: 1, maxProperties: 1 });

export const days = (description: string) =>
  z
    .number()
    .gt(0)
    .lte(36_500)
    .refine(
      isWholeMicroseconds,
      "Expected a number of days that is a whole number of microseconds. Write fewer decimals.",
    )
    .meta({ description, expected: "a number of days above 0 and up to 36,500" });

function isNotEmpty(mapping: object): boolean {
  return Object.keys(mapping).length > 0;
}

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
        above: z.number().meta({ description: "Numbers above this." }).optional(),
        below: z.number().meta({ description: "Numbers below this." }).optional(),
        "at-least": z.number().meta({ description: "Numbers of this or more." }).optional(),
        "at-most": z.number().meta({ description: "Numbers of this or less." }).optional(),
        missing: z.boolean().meta({ description: "true matches empty cells, false all others." }).optional(),
        matches: z
          .union([z.string(), z.array(z.string()).min(1)])
          .meta({
            description: "Patterns over the whole value: * for any text, ? for one character.",
            expected: "a pattern or a list of patterns",
          })
          .optional(),
      })
      .refine(isNotEmpty, "Expected at least one test, such as {above: 3}.")
      .meta({ minProperties: 1, description: "Tests of the column that must all hold." }),
  ])
  .meta({ expected: "a value, a list of values, or tests such as {above: 3}" });

export const where = z
  .record(z.string().min(1), condition)
  .refine(isNotEmpty, "Expected at least one column and what it must hold.")
  .meta({ description: "Columns and what they must hold; all of them together.", minProperties: 1 });
