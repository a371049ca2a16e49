import { nearest } from "../nearest.ts";
import { parseTime, timeZoneNamed } from "../time.ts";
import type { Problem } from "../types.ts";
import type { Path } from "../yaml.ts";
import { type Loose, mapping } from "./loose.ts";

/** The time zone, and the days between which units enrol. */
export function enrolmentRules(plan: Loose): readonly Problem[] {
  const stated = plan.timezone;
  const isUnknown = typeof stated === "string" && stated.trim() !== "" && timeZoneNamed(stated) === null;
  const empty = (from: string) => `No unit could enrol: from (${from}) is not before this.`;
  return [
    ...(isUnknown ? [noZone(stated)] : []),
    ...periodProblems(plan, ["enrolment"], mapping(plan.enrolment) ?? {}, empty),
  ];
}

/** `from` and `before` of a mapping: each to be read, and the one before the other. */
export function periodProblems(
  plan: Loose,
  path: Path,
  { from, before }: Loose,
  empty: (from: string) => string,
): readonly Problem[] {
  const zone = (typeof plan.timezone === "string" ? timeZoneNamed(plan.timezone) : null) ?? "UTC";
  const problems = [...unreadable([...path, "from"], from, zone), ...unreadable([...path, "before"], before, zone)];
  if (typeof from !== "string" || typeof before !== "string") return problems;

  const [first, end] = [parseTime(from, zone), parseTime(before, zone)];
  if (first === null || end === null || first < end) return problems;
  const message = `${empty(from)} Before is the first moment that no longer counts.`;
  return [...problems, { path: [...path, "before"], at: "value", message }];
}

function noZone(name: string): Problem {
  const near = nearest(name, ["UTC", ...Intl.supportedValuesOf("timeZone")]);
  return {
    path: ["timezone"],
    at: "value",
    message: "Expected a time zone such as Europe/Oslo or UTC.",
    nearest: near,
  };
}

function unreadable(path: Path, value: unknown, zone: string): readonly Problem[] {
  if (typeof value !== "string" || value.trim() === "") return [];
  // a log may count time in seconds since 1970; a plan is to be read
  if (parseTime(value, zone) !== null && !/^[+-]?\d+$/.test(value)) return [];
  const day = /^\d{4}-\d\d-\d\d/.exec(value)?.[0];
  if (day !== undefined && parseTime(day, zone) === null)
    return [{ path, at: "value", message: `The calendar has no ${day}.` }];
  const message = "Expected a date such as 2026-03-02, or a time such as 2026-03-02T08:00 or 2026-03-02T08:00+01:00.";
  return [{ path, at: "value", message }];
}
