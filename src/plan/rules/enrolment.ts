import { nearest } from "../nearest.ts";
import { parseTime, timeZoneNamed } from "../time.ts";
import type { Problem } from "../types.ts";
import { type Loose, mapping } from "./loose.ts";

/** The time zone, and the days between which units enrol. */
export function enrolmentRules(plan: Loose): readonly Problem[] {
  const stated = plan.timezone;
  const zone = typeof stated === "string" ? timeZoneNamed(stated) : "UTC";
  const enrolment = mapping(plan.enrolment) ?? {};
  const { from, before } = enrolment;
  const problems = [
    ...(typeof stated === "string" && stated.trim() !== "" && zone === null ? [noZone(stated)] : []),
    ...(["from", "before"] as const).flatMap((key) => unreadable(key, enrolment[key], zone ?? "UTC")),
  ];
  if (typeof from !== "string" || typeof before !== "string") return problems;

  const [first, end] = [parseTime(from, zone ?? "UTC"), parseTime(before, zone ?? "UTC")];
  if (first === null || end === null || first < end) return problems;
  const message = `No unit could enrol: from (${from}) is not before this. Before is the first moment that no longer counts.`;
  return [...problems, { path: ["enrolment", "before"], at: "value", message }];
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

function unreadable(key: string, value: unknown, zone: string): readonly Problem[] {
  if (typeof value !== "string" || value.trim() === "") return [];
  // a log may count time in seconds since 1970; a plan is to be read
  if (parseTime(value, zone) !== null && !/^[+-]?\d+$/.test(value)) return [];
  const message = "Expected a date such as 2026-03-02, or a time such as 2026-03-02T08:00 or 2026-03-02T08:00+01:00.";
  return [{ path: ["enrolment", key], at: "value", message }];
}
