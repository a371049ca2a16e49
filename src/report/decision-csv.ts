import { createHash } from "node:crypto";
import { measure } from "../decision/index.ts";
import { dayOf } from "./plan-words.ts";
import type { ReportInputs } from "./types.ts";

const HEAD = "experiment,from,to,decision,variant,measure,estimate,low,high,scale,fingerprint";

/**
 * decision.csv: the head and one line, to add to a log of decisions. Estimate and interval are of the measure that decides
 * first, a share of the control's level ("relative") or in the measure's own unit; of a report that decides nothing none.
 * @param json report.json as it is written: the fingerprint is its SHA-256
 */
export function decisionCsv({ plan, reduction, effects, conclusion }: ReportInputs, json: string): string {
  const { firstEnrolledUs, lastEnrolledUs } = reduction.facts;
  const day = (us: bigint | null) => (us === null ? "" : dayText(us, plan.timezone));
  const variant = conclusion.variant ?? onlyVariant(plan.variants);
  const primary =
    conclusion.decision === "undecidable"
      ? undefined
      : effects.find((effect) => effect.role === "primary" && effect.variant === variant);
  const shown = primary === undefined ? null : measure(primary, plan);
  const figure = (value: number | null | undefined) => (value == null ? "" : String(Number(value.toPrecision(12))));
  const cells = [
    plan.experiment,
    day(firstEnrolledUs),
    day(lastEnrolledUs),
    conclusion.decision,
    variant ?? "",
    primary?.metric ?? "",
    figure(shown?.interval?.estimate),
    figure(shown?.interval?.low),
    figure(shown?.interval?.high),
    shown === null || shown.interval === null ? "" : shown.scale.kind === "percent" ? "relative" : "absolute",
    createHash("sha256").update(json).digest("hex"),
  ];
  return `${HEAD}\r\n${cells.map(quotedCell).join(",")}\r\n`;
}

function onlyVariant(variants: ReportInputs["plan"]["variants"]): string | null {
  const others = variants.filter(({ isControl }) => !isControl);
  return others.length === 1 ? (others[0]?.name ?? null) : null;
}

function dayText(us: bigint, timezone: string): string {
  const { year, month, day } = dayOf(us, timezone);
  const two = (n: number) => String(n).padStart(2, "0");
  return `${String(year).padStart(4, "0")}-${two(month)}-${two(day)}`;
}

/** RFC 4180; a text that a spreadsheet would take for a formula begins with an apostrophe. */
function quotedCell(cell: string): string {
  const text = /^[=+@\t\r]|^-(?!\d)/.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
