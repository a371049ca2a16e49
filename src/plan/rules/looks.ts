import { parsePercent } from "../number.ts";
import type { Problem } from "../types.ts";
import { type Loose, mapping } from "./loose.ts";

/** Looks nearer to one another than this share of the planned size are one look. */
const APART = 0.01;

/** Planned looks follow one another up to the whole size, and this one is among them. */
export function lookRules(plan: Loose): readonly Problem[] {
  const looks = mapping(plan.looks) ?? {};
  const planned = Array.isArray(looks.planned) ? looks.planned.map(shareOf) : [];
  if (planned.length < 2 || planned.some((share) => !(share > 0 && share <= 1))) return [];
  return [...notRising(planned), ...notWhole(planned), ...notAmong(looks.at, planned.length)];
}

function notRising(planned: readonly number[]): readonly Problem[] {
  return planned.flatMap((share, i): readonly Problem[] => {
    if (share - (planned[i - 1] ?? Number.NEGATIVE_INFINITY) > APART - 1e-9) return [];
    const message = "A look comes later than the one before it. Write rising shares, at least 1% apart.";
    return [{ path: ["looks", "planned", i], at: "value", message }];
  });
}

function notWhole(planned: readonly number[]): readonly Problem[] {
  if (planned.includes(1)) return [];
  const message = "The last look is at the whole planned size. Add 1 behind this.";
  return [{ path: ["looks", "planned", planned.length - 1], at: "value", message }];
}

function notAmong(at: unknown, looks: number): readonly Problem[] {
  if (typeof at !== "number" || !Number.isInteger(at) || at < 1 || at <= looks) return [];
  const message = `The plan has ${looks} looks. Write which of them this is, a number from 1 to ${looks}.`;
  return [{ path: ["looks", "at"], at: "value", message }];
}

/** NaN for what is no share; the schema tells that. */
function shareOf(written: unknown): number {
  if (typeof written === "number") return written;
  const percent = typeof written === "string" ? parsePercent(written) : null;
  return percent === null ? Number.NaN : Number(percent);
}
