import { z } from "zod";
import { decision, fingerprint, numberOrNull, outcome, role, zone } from "../schema-values.ts";

const byVariant = z.record(z.string(), z.number());
const relative = z.strictObject({ estimate: z.number(), low: numberOrNull, high: numberOrNull }).nullable();

const planChange = z.strictObject({
  place: z.string(),
  section: z.string(),
  item: z.string().nullable(),
  kind: z.enum(["added", "removed", "changed", "moved"]),
  before: z.string().nullable(),
  after: z.string().nullable(),
  decides: z.boolean().describe("It belongs to the rule."),
  counts: z.boolean().describe("False for a text that no figure depends on."),
});
const file = z.strictObject({ bytes: z.number(), sha256: fingerprint, rows: z.number() }).nullable();
const ends = { estimate: numberOrNull, low: numberOrNull, high: numberOrNull, relative };
const shown = z
  .strictObject({
    ...ends,
    zone,
    units: z.strictObject({ control: z.number(), variant: z.number() }),
    totals: z.strictObject({ control: numberOrNull, variant: numberOrNull }),
  })
  .nullable();
const conclusion = z.strictObject({ decision, variant: z.string().nullable(), sentence: z.string() });
const step = z.strictObject({
  decision,
  variant: z.string().nullable(),
  analysed: byVariant,
  effects: z.array(z.strictObject({ metric: z.string(), variant: z.string(), ...ends })),
});

/** `changes` of report.json (types.ts). */
export const changesSchema = z
  .strictObject({
    run: z.int().min(2),
    replaces: fingerprint.describe("SHA-256 of the report.json that this one replaces."),
    first: z.strictObject({ sha256: fingerprint, text: z.string() }).describe("The plan of the first report."),
    plan: z.array(planChange).describe("Since the report that this one replaces."),
    rule: z.array(planChange).describe("What decides and is not as in the first report."),
    log: z.array(z.strictObject({ name: z.string(), list: z.boolean(), before: file, after: file })),
    flow: z.array(
      z.strictObject({
        of: z.enum(["rows", "units"]),
        id: z.string(),
        line: z.string(),
        before: numberOrNull,
        after: numberOrNull,
        byVariant: z.strictObject({ before: byVariant.nullable(), after: byVariant.nullable() }).nullable(),
      }),
    ),
    effects: z.array(
      z.strictObject({
        metric: z.string(),
        variant: z.string(),
        role,
        before: shown,
        after: shown,
      }),
    ),
    checks: z.array(z.strictObject({ id: z.string(), before: outcome.nullable(), after: outcome.nullable() })),
    conclusion: z.strictObject({ before: conclusion, after: conclusion }),
    steps: z
      .strictObject({
        start: step.describe("The earlier plan on this log."),
        changes: z.array(z.strictObject({ change: z.string(), alone: step.nullable(), added: step.nullable() })),
      })
      .nullable()
      .describe("Each change alone, and one added to the other; null where there is only one."),
  })
  .nullable()
  .describe("What is not as it was in the report that this one replaces; null in a first report.");
