import { z } from "zod";
import { fingerprintOf } from "./history.ts";
import { decision, numberOrNull, outcome, role, zone } from "./schema-values.ts";

/** An earlier report, as far as a comparison needs it. */
export interface PreviousReport {
  /** Its report.json, byte for byte, and the fingerprint of that. */
  readonly text: string;
  readonly sha256: string;
  readonly report: EarlierReport;
}

const relative = z.object({ estimate: z.number(), low: numberOrNull, high: numberOrNull }).nullable();
const difference = z.object({ estimate: numberOrNull, low: numberOrNull, high: numberOrNull });
const arm = z.object({ units: z.number(), total: numberOrNull });
const file = z.object({ name: z.string(), bytes: z.number(), sha256: z.string(), rows: z.number() });

/** Looser than the schema of report.json: what other versions add or leave out does not matter here. */
const earlier = z.object({
  format: z.literal(1),
  experiment: z.string(),
  conclusion: z.object({
    decision,
    variant: z.string().nullable(),
    sentence: z.string(),
  }),
  flow: z.object({
    rowsRead: z.number(),
    rows: z.array(z.object({ id: z.string(), line: z.string(), rows: z.number() })),
    unitsSeen: z.number(),
    units: z.array(
      z.object({
        id: z.string(),
        line: z.string(),
        units: z.number(),
        byVariant: z.record(z.string(), z.number()).nullable(),
      }),
    ),
    analysed: z.record(z.string(), z.number()),
  }),
  checks: z.array(z.object({ id: z.string(), result: outcome })),
  effects: z.array(
    z.object({
      metric: z.string(),
      variant: z.string(),
      role,
      zone,
      arms: z.object({ control: arm, variant: arm }),
      difference,
      relative,
      adjusted: z.object({ difference, relative }).nullable(),
    }),
  ),
  changes: z
    .object({
      run: z.number(),
      replaces: z.string(),
      first: z.object({ sha256: z.string(), text: z.string() }),
    })
    .nullable(),
  provenance: z.object({
    version: z.string(),
    plan: z.object({ sha256: z.string(), text: z.string() }),
    inputs: z.array(file),
    lists: z.array(file),
    engine: z.object({ name: z.string(), version: z.string() }),
    fromCells: z.boolean().default(false),
  }),
});
export type EarlierReport = z.infer<typeof earlier>;

/** A report.json as an earlier report; null for a text that is none. */
export function previousReport(text: string): PreviousReport | null {
  try {
    const read = earlier.safeParse(JSON.parse(text));
    return read.success ? { text, sha256: fingerprintOf(text), report: read.data } : null;
  } catch {
    return null;
  }
}

/** The number of a report's run: 1 for a first report. */
export function runOf({ changes }: Pick<EarlierReport, "changes">): number {
  return changes?.run ?? 1;
}

/** The plan of the first run of a report's line of runs. */
export function firstPlanOf({ changes, provenance }: EarlierReport): {
  readonly sha256: string;
  readonly text: string;
} {
  return changes?.first ?? provenance.plan;
}
