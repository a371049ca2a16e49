import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { arms } from "../../../src/cells/index.ts";
import { type Check, checks } from "../../../src/checks/index.ts";
import { type Conclusion, conclusion, contrastFigures, effects } from "../../../src/decision/index.ts";
import { withReduction } from "../../../src/engine/index.ts";
import { loadPlan, placeProblems } from "../../../src/plan/index.ts";

/** Logs with one fault planted, read by the engine itself; what a check says of them is all that is looked at. */

export interface PlantedRow {
  readonly visitor: string;
  readonly at: string;
  readonly event: string;
  readonly arm?: string;
  readonly id?: string;
  readonly robot?: string;
  readonly fare?: string;
}

const COLUMNS = ["visitor", "at", "event", "arm", "id", "robot", "fare"] as const;
export const HOUR = 3600;
export const DAY = 24 * HOUR;
export const START = Date.UTC(2026, 2, 2) / 1000; // a Monday

/** Seconds since the start of 2 March 2026, in UTC, as a log writes them. */
export const timeText = (seconds: number): string => new Date((START + Math.floor(seconds)) * 1000).toISOString();

/** So many visitors of one variant, each with the row that enrols it, evenly over the days from one to before another. */
export function enrolled(arm: string, n: number, from = 0, before = 14): PlantedRow[] {
  return Array.from({ length: n }, (_, i) => ({
    visitor: `${arm} ${from} ${i}`,
    at: timeText(from * DAY + ((i + 0.5) * (before - from) * DAY) / n),
    event: "open",
    arm,
  }));
}

/** A later row of each of some visitors, so many seconds after the first. */
export function later(
  rows: readonly PlantedRow[],
  event: string,
  seconds: number,
  more: Partial<PlantedRow> = {},
): PlantedRow[] {
  return rows.map((row) => ({
    visitor: row.visitor,
    at: timeText(Date.parse(row.at) / 1000 - START + seconds),
    event,
    ...more,
  }));
}

/** A plan of two variants, half and half; `rest` are further keys, `metrics` replaces the only measure. */
export interface PlanShape {
  readonly metrics?: string;
  readonly rest?: string;
  readonly columns?: string;
  readonly enrolment?: string;
  readonly variants?: string;
  /** A second entry of the log: bookings.csv. */
  readonly second?: boolean;
}

export function planText(shape: PlanShape = {}): string {
  const columns = shape.columns ?? "unit: visitor, time: at, event: event, variant: arm";
  return `experiment: Planted
question: Which check finds the fault?
unit-called: {one: visitor, many: visitors}
log:
  - {files: log.csv, columns: {${columns}}}${shape.second === true ? `\n  - {files: bookings.csv, columns: {unit: visitor, time: at, event: event}}` : ""}
${shape.enrolment ?? "enrolment: {event: open}"}
variants: ${shape.variants ?? "[{name: list, control: true}, {name: calendar}]"}
metrics:
${shape.metrics ?? "  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}"}
${shape.rest ?? ""}
`;
}

export interface Judged {
  readonly checks: readonly Check[];
  readonly conclusion: Conclusion;
  readonly find: (id: string) => Check | undefined;
}

export interface PlantedLog {
  readonly rows: readonly PlantedRow[];
  readonly second?: readonly PlantedRow[];
  /** Further files by name, such as a list of ids. */
  readonly files?: Readonly<Record<string, string>>;
}

/** What all checks, and the rule, say of a log. */
export async function judged(plan: string, log: PlantedLog): Promise<Judged> {
  const folder = mkdtempSync(join(tmpdir(), "closeout-planted-"));
  try {
    writeFileSync(join(folder, "log.csv"), csv(log.rows));
    if (log.second !== undefined) writeFileSync(join(folder, "bookings.csv"), csv(log.second));
    for (const [name, text] of Object.entries(log.files ?? {})) writeFileSync(join(folder, name), text);
    const loaded = loadPlan(plan);
    if (!("plan" in loaded)) throw new Error(placeProblems(loaded.source, "plan.yaml", loaded.problems));
    const found = await withReduction(loaded.plan, loaded.source, folder, { threads: 1 }, async (own, reduction) => {
      const all = own.metrics.map((metric, m) => {
        const cells = reduction.metrics[m];
        if (cells === undefined) throw new Error(`no cells of ${metric.name}`);
        return arms(metric, cells, own.variants.length);
      });
      const compared = effects(own, all, reduction, []);
      const made = checks(own, reduction, compared.map(contrastFigures));
      return { checks: made, conclusion: conclusion(own, compared, made, reduction, all) };
    });
    if ("problems" in found) throw new Error(placeProblems(loaded.source, "plan.yaml", found.problems));
    return { ...found, find: (id) => found.checks.find((check) => check.id === id) };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function csv(rows: readonly PlantedRow[]): string {
  const lines = rows.map((row) => COLUMNS.map((column) => row[column] ?? "").join(","));
  return `${COLUMNS.join(",")}\n${lines.join("\n")}\n`;
}
