import { ruleOf } from "../../decision/index.ts";
import type { Metric, Plan, PlanChange } from "../../plan/index.ts";
import { count, type Interval, list, quoted, type Scale, signedEstimate, signedInterval } from "../../words/index.ts";
import { controlOf } from "../plan-words.ts";
import type { ChangesJson, ConclusionJson, EffectChange, LineChange } from "./types.ts";

const ORDINALS = ["first", "second", "third", "fourth", "fifth", "sixth", "seventh", "eighth", "ninth", "tenth"];

/** "first", "second", … "11th". */
export function ordinal(n: number): string {
  const word = ORDINALS[n - 1];
  if (word !== undefined) return word;
  const ending = n % 100 >= 11 && n % 100 <= 13 ? "th" : (["th", "st", "nd", "rd"][n % 10] ?? "th");
  return `${n}${ending}`;
}

/** 'The first run said the same.' or what it said. */
export function saidBefore({ conclusion: { before, after }, run }: Pick<ChangesJson, "conclusion" | "run">): string {
  const who = `The ${ordinal(run - 1)} run`;
  if (!isOtherConclusion(before, after)) return `${who} said the same.`;
  return `${who} said: ${before.sentence}`;
}

export function isOtherConclusion(
  before: Pick<ConclusionJson, "decision" | "variant">,
  after: Pick<ConclusionJson, "decision" | "variant">,
): boolean {
  return before.decision !== after.decision || before.variant !== after.variant;
}

/** 'adopt "calendar"', 'stay with "list"', "not settled", "nothing can be decided". */
export function conclusionText(
  { decision, variant }: Pick<ConclusionJson, "decision" | "variant">,
  plan: Plan,
): string {
  switch (decision) {
    case "adopt":
      return variant === null ? "adopt" : `adopt ${quoted(variant)}`;
    case "keep-control":
      return `stay with ${quoted(controlOf(plan).name)}`;
    case "not-settled":
      return "not settled";
    case "undecidable":
      return "nothing can be decided";
  }
}

/** 'the filter "staff accounts" was added (staff book for training)', '"decision: confidence" was 95%, is 90%'. */
export function changeText({ place, section, item, kind, before, after }: PlanChange, plan: Plan): string {
  if (section === "filters" && item !== null && place === `filters, ${item}`) {
    const why = plan.filters.find(({ name }) => name === item)?.why ?? null;
    return `the filter ${quoted(item)} was ${kind}${why === null ? "" : ` (${why})`}`;
  }
  if (section === "metrics" && item !== null && place === `metrics, ${item}`) return `${quoted(item)} was ${kind}`;
  switch (kind) {
    case "added":
      return `${quoted(place)} was added: ${after ?? ""}`;
    case "removed":
      return `${quoted(place)} was removed: ${before ?? ""}`;
    case "changed":
    case "moved":
      return `${quoted(place)} was ${before ?? ""}, is ${after ?? ""}`;
  }
}

/** "The log is the same.", "The log is another: 2 files changed, 1 came new." */
export function logText(log: ChangesJson["log"]): string {
  if (log.length === 0) return "The log is the same.";
  const of = (kind: "changed" | "came new" | "is gone") =>
    log.filter(({ before, after }) =>
      kind === "changed" ? before !== null && after !== null : kind === "came new" ? before === null : after === null,
    ).length;
  const parts = (["changed", "came new", "is gone"] as const).flatMap((kind) => {
    const n = of(kind);
    const verb = kind === "is gone" && n !== 1 ? "are gone" : kind;
    return n === 0 ? [] : [`${n} ${n === 1 ? "file" : "files"} ${verb}`];
  });
  return `The log is another: ${list(parts)}.`;
}

const MOST_TOLD = 3;

/** 'the filter "staff accounts" was added (staff book for training). The log is the same.' */
export function whatChanged({ plan: all, log }: Pick<ChangesJson, "plan" | "log">, plan: Plan): string {
  const counted = all.filter(({ counts }) => counts);
  const told = counted.slice(0, MOST_TOLD).map((change) => changeText(change, plan));
  const more = counted.length - told.length;
  const parts = more > 0 ? [...told, `${more} more (section 2)`] : told;
  const said =
    counted.length > 0
      ? `${parts.join("; ")}.`
      : all.length > 0
        ? "only texts of the plan, on which no figure depends."
        : "nothing in the plan.";
  return `${said} ${logText(log)}`;
}

/**
 * How an estimate is shown before and after: in percent where both reports have it so, else as a difference; as a
 * difference also where the plan states its amount in the metric's own unit. Drawn in percent in any case.
 */
export function shownTexts(
  { before, after }: Pick<EffectChange, "before" | "after">,
  metric: Metric | null,
): { readonly before: Figure; readonly after: Figure } {
  const both = [before, after].filter((one) => one !== null);
  const hasRelative = both.every(({ relative }) => relative !== null);
  const isRelative = hasRelative && (metric === null || ruleOf(metric)?.kind !== "absolute");
  const scale: Scale = isRelative
    ? { kind: "percent" }
    : metric?.summary === "proportion"
      ? { kind: "points" }
      : { kind: "amount", unit: metric?.unitOfMeasure ?? null };
  const of = (one: EffectChange["before"]): Figure => {
    if (one === null) return { estimate: "not there", interval: "", drawn: null };
    const { estimate, low, high } = one;
    const interval: Interval | null = isRelative ? one.relative : estimate === null ? null : { estimate, low, high };
    const drawn = hasRelative ? one.relative : null;
    if (interval === null) return { estimate: "\u2013", interval: "no interval", drawn };
    return { estimate: signedEstimate(interval, scale), interval: signedInterval(interval, scale), drawn };
  };
  return { before: of(before), after: of(after) };
}
export interface Figure {
  readonly estimate: string;
  readonly interval: string;
  /** Relative to the control's level; null where only a difference exists. */
  readonly drawn: Interval | null;
}

/** "+1,204", "−310", "0", "–" where one of the reports has no such line. */
export function movedText({ before, after }: Pick<LineChange, "before" | "after">): string {
  if (before === null || after === null) return "\u2013";
  const by = after - before;
  return by > 0 ? `+${count(by)}` : count(by);
}

export function nameOf(effect: Pick<EffectChange, "metric" | "variant">, plan: Plan): string {
  return `${effect.metric}${withVariant(effect, plan)}`;
}

/** ' with "map"', where there are several variants. */
export function withVariant({ variant }: Pick<EffectChange, "variant">, plan: Plan): string {
  return plan.variants.length > 2 ? ` with ${quoted(variant)}` : "";
}
