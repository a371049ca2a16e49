import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";

/** A log whose variants differ in everything that units do, by figures that occur nowhere else. */
export const PLANTED_PLAN = `experiment: Planted
question: Is it seen?
unit-called: {one: visitor, many: visitors}
log:
  - files: log.csv
    columns: {unit: visitor, time: at, event: event, variant: arm, event-id: id}
enrolment: {event: search, from: 2026-03-02, before: 2026-03-16}
variants:
  - {name: list, control: true}
  - {name: calendar}
follow-up: {days: 7}
planned: {units: 800}
metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}, worthwhile: {relative: 5%}}
  - {name: Fare, summary: mean, of: {event: booking, sum: fare}, adjust-for: {days-before: 14}}
  - {name: Fare a search, summary: ratio-of-totals, of: {event: booking, sum: fare}, per: {event: search}}
  - {name: Largest fare, summary: mean, of: {event: booking, max: fare}, without-rows: leave-out}
  - {name: Median fare, summary: quantile, quantile: 0.5, of: {event: booking, sum: fare}, without-rows: leave-out}
  - {name: Complaints, role: guardrail, summary: mean, of: {event: complaint}, good-is: lower, margin: {relative: 20%}}
filters:
  - {name: staff, why: they train, drop: units, where: {staff: true}}
`;

const MINUTE = 60_000;
const FROM = Date.UTC(2026, 2, 2, 6);

/** 400 visitors of each variant, 40 enrolled a day; `until` cuts the log off, as one that is still being written. */
export function plantedLog(until = "2026-04-01T00:00:00Z"): string {
  const rows: string[] = [];
  const row = (visitor: string, at: number, event: string, arm: string, fare: string, id: string) => {
    const time = new Date(at).toISOString();
    if (time < until) rows.push([visitor, time, event, arm, fare, id, "false"].join(","));
  };
  for (let i = 0; i < 800; i++) {
    const arm = i % 2 === 0 ? "list" : "calendar";
    const place = i >> 1;
    const visitor = `v${i}`;
    const at = FROM + i * 18 * MINUTE;
    row(visitor, at - 60 * MINUTE, "booking", "", i % 4 < 2 ? "31.7" : "29.3", `b${i}`);
    row(visitor, at, "search", arm, "", `s${i}`);
    // booked: 137 of 400 with the list, 211 with the calendar; every fare of a variant is its own
    if (place < (arm === "list" ? 137 : 211))
      row(visitor, at + MINUTE, "booking", "", arm === "list" ? "97.13" : "113.29", `o${i}`);
    // rejected, duplicates and complaints: 17, 19 and 23 visitors with the list; 71, 73 and 79 with the calendar
    if (place < (arm === "list" ? 17 : 71)) row(visitor, at + 2 * MINUTE, "booking", "", "much", `x${i}`);
    if (place < (arm === "list" ? 19 : 73)) row(visitor, at, "search", arm, "", `s${i}`);
    if (place < (arm === "list" ? 23 : 79)) row(visitor, at + 3 * MINUTE, "complaint", "", "", `c${i}`);
    // seen in two: 29 who began with the list, 85 with the calendar
    if (place < (arm === "list" ? 29 : 85))
      row(visitor, at + 4 * MINUTE, "search", arm === "list" ? "calendar" : "list", "", `t${i}`);
  }
  // a visitor who never enrols writes to the end of the log
  for (let day = 0; day < 24; day += 4) row("late", FROM + day * 24 * 60 * MINUTE, "complaint", "", "", `l${day}`);
  return `visitor,at,event,arm,fare,id,staff\n${rows.join("\n")}\n`;
}

/** Counts by variant of what visitors did, in the log above. */
export const PLANTED_COUNTS = [137, 211, 17, 71, 19, 73, 23, 79, 29, 85, 400 - 137, 400 - 211];

/** Work with plan and log in a folder that is gone afterwards. */
export async function inPlantedFolder<T>(log: string, work: (plan: string, folder: string) => Promise<T>): Promise<T> {
  const folder = mkdtempSync(join(tmpdir(), "closeout-planted-"));
  try {
    writeFileSync(join(folder, "plan.yaml"), PLANTED_PLAN);
    writeFileSync(join(folder, "log.csv"), log);
    return await work(join(folder, "plan.yaml"), folder);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

export const textsIn = (folder: string): Readonly<Record<string, string>> =>
  Object.fromEntries(
    readdirSync(folder)
      .sort()
      .map((name) => [name, readFileSync(join(folder, name), "utf8")]),
  );
