import { createHash } from "node:crypto";
import type { Metric, Plan } from "./types.ts";

/** The parts of a plan that decide, in the order of their digests in a fingerprint. */
export const SEALED_PARTS = ["metrics", "allocation", "enrolment", "follow-up", "decision", "looks"] as const;
export type SealedPart = (typeof SEALED_PARTS)[number];

/** What decides, each part as canonical text, and their common fingerprint. */
export interface Seal {
  /** 32 hex digits of the whole, "-", then 4 of each part: so that a difference can be given its place. */
  readonly fingerprint: string;
  readonly parts: Readonly<Record<SealedPart, string>>;
}
export const SEAL = /^[0-9a-f]{32}-[0-9a-f]{24}$/;

/**
 * The fingerprint of the rule: metrics that decide or must not get worse, allocation, enrolment, follow-up, decision and
 * planned looks. Filters, texts and metrics for information are not in it, nor how the plan writes a value: 5% and 0.05
 * are one rule. Keys at their default are left out, so that a key of a later version does not change it.
 */
export function sealOf(plan: Plan): Seal {
  const parts = partsOf(plan);
  const texts = SEALED_PARTS.map((part) => `${part} ${parts[part]}`);
  const whole = sha256(["closeout rule 1", ...texts].join("\n")).slice(0, 32);
  return { fingerprint: `${whole}-${texts.map((text) => sha256(text).slice(0, 4)).join("")}`, parts };
}

/** The parts by which two fingerprints differ; none where they are equal. */
export function sealDifference(before: string, after: string): readonly SealedPart[] {
  if (before === after) return [];
  const digests = (fingerprint: string) => fingerprint.slice(33).match(/.{4}/g) ?? [];
  const [a, b] = [digests(before), digests(after)];
  const found = SEALED_PARTS.filter((_, i) => a[i] !== b[i]);
  // the wholes differ and no digest does: chance, one in 65,536 a part; then any of them may be meant
  return found.length > 0 ? found : SEALED_PARTS;
}

function partsOf(plan: Plan): Record<SealedPart, string> {
  const { event, fromUs, beforeUs, inTwoVariants } = plan.enrolment;
  const shares = plan.variants.reduce((sum, { allocation }) => sum + allocation, 0);
  return {
    metrics: canonical(plan.metrics.filter(({ role }) => role !== "secondary").map(decidingPart)),
    allocation: canonical(
      plan.variants.map(({ name, isControl, allocation }) => ({
        name,
        isControl: isControl || null,
        share: Number((allocation / shares).toPrecision(12)),
      })),
    ),
    enrolment: canonical({
      event,
      fromUs,
      beforeUs,
      inTwoVariants: inTwoVariants === "first" ? null : inTwoVariants,
      timezone: plan.timezone,
    }),
    "follow-up": canonical(plan.followUp),
    decision: canonical({
      ...plan.decision,
      adoptWhen: plan.decision.adoptWhen === "shown-better" ? null : plan.decision.adoptWhen,
      primaries: plan.decision.primaries === "all" ? null : plan.decision.primaries,
      interval: plan.decision.interval === "normal" ? null : plan.decision.interval,
    }),
    looks: canonical(plannedLooks(plan)),
  };
}

/** Which looks were planned; not which of them this is. */
function plannedLooks(plan: Plan): object | null {
  const looks = "looks" in plan ? (plan.looks as object | null) : null;
  return looks === null ? null : { ...looks, at: null, reached: null };
}

/** A metric without what is for the reader or for sizing. */
function decidingPart(metric: Metric): object {
  const { unitOfMeasure: _unit, expected: _expected, ...rest } = metric;
  return { ...rest, withoutRows: rest.withoutRows === "zero" ? null : rest.withoutRows };
}

/** JSON with sorted keys; keys without a value are not there. */
export function canonical(value: unknown): string {
  if (typeof value === "bigint") return `"${value}"`;
  if (Array.isArray(value)) return `[${value.map(canonical).join(",")}]`;
  if (typeof value !== "object" || value === null) return JSON.stringify(value ?? null);
  const entries = Object.entries(value).filter(([, item]) => item !== null && item !== undefined);
  const sorted = entries.sort(([a], [b]) => (a < b ? -1 : 1));
  return `{${sorted.map(([key, item]) => `${JSON.stringify(key)}:${canonical(item)}`).join(",")}}`;
}

function sha256(text: string): string {
  return createHash("sha256").update(text).digest("hex");
}
