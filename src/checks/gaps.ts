import type { Silence, SourceHours } from "../engine/soundnessTypes.ts";
import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { list, plural, quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { gapsOf, type HourRun, hoursLike, runText } from "./hours.ts";
import { sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import type { Check } from "./types.ts";
import { byChance, entryName, units } from "./words.ts";

const RUNS_NAMED = 3;

/**
 * Hours in which an entry of the log has no row though the same hours of other weeks or days have many: one part an entry.
 * And hours in which one arm has none while the others have: what is lost there is lost by one group only, so that fails.
 */
export function gaps(plan: Plan, { facts }: Reduction): Check | null {
  const { sources, silences } = facts.soundness;
  const arms = byArm(plan, sources, silences, facts.enrolled);
  return check(plan, sources, arms === null ? [] : [arms]);
}

/** The same without its part by variant. */
export function gapsTogether(plan: Plan, { facts }: Reduction): Check | null {
  return check(plan, facts.soundness.sources, []);
}

function check(plan: Plan, sources: readonly SourceHours[], more: readonly Finding[]): Check | null {
  const found = sources.map((source) => ofSource(plan, source));
  const hours = sum(found.map(({ figures }) => Number(figures.hours)));
  return asCheck("gaps", [...found, ...more], { hours });
}

function ofSource(plan: Plan, source: SourceHours): Finding {
  const name = plan.log.length === 1 ? "the log" : entryName(source.source);
  const about = plan.log.length === 1 ? "hours" : entryName(source.source);
  const runs = gapsOf(source.hours);
  const hours = sum(runs.map(({ first, last }) => last - first + 1));
  const figures = { hours, runs: runs.slice(0, RUNS_NAMED).map((run) => runText(source.hours, run)) };
  if (hours === 0) return passed(about, `No hour of ${name} is empty that has rows on other days.`, figures);
  return {
    about,
    result: "caution",
    strong: false,
    sentence: `In ${plural(hours, "hour", "hours")} ${name} has no row, though the same hours of other days have: ${runsText(source, runs)}.`,
    remedy: `Find out whether nothing was recorded then, or rows were lost on the way. What ${plan.unitCalled.many} did in these hours is not counted; fill in the rows if they exist, and run the report again.`,
    figures,
  };
}

function runsText({ hours }: SourceHours, runs: readonly HourRun[]): string {
  const named = runs
    .toSorted((a, b) => b.last - b.first - (a.last - a.first))
    .slice(0, RUNS_NAMED)
    .map((run) => runText(hours, run));
  const more = runs.length - named.length;
  return list([...named, ...(more > 0 ? [`${more} more`] : [])]);
}

interface Judged {
  readonly silence: Silence;
  readonly source: SourceHours;
  readonly p: number;
}

/**
 * The chance that none of the n units with a row in a run of hours is of an arm with share s is (1 - s)^n; times the hours
 * and arms looked at (Bonferroni). s is the smallest share that the arm has of the enrolled, of the rows a day before and
 * after the run, and of the rows in the same hours of other weeks or days: what a variant makes more of is no silence of the
 * others. Without such other hours nothing is said.
 */
function byArm(
  plan: Plan,
  sources: readonly SourceHours[],
  silences: readonly Silence[],
  enrolled: ByVariant,
): Finding | null {
  const looks =
    sum(sources.map(({ hours }) => hours.filter(({ byVariant }) => sum(byVariant) > 0).length)) * plan.variants.length;
  if (looks === 0) return null;
  const judged = silences
    .flatMap((silence): Judged[] => {
      const source = sources.find((one) => one.source === silence.source);
      if (source === undefined) return [];
      const shares = [enrolled, ...hoursLike(source.hours, silence)].map((counts) => shareOf(counts, silence.variant));
      return [{ silence, source, p: Math.min(1, looks * (1 - Math.min(...shares)) ** silence.others) }];
    })
    .sort((a, b) => a.p - b.p);
  const [worst] = judged;
  const p = worst?.p ?? 1;
  const result = byP(p);
  if (worst === undefined || result === "pass") {
    const sentence = "No group is without rows in hours in which the others have more than chance can explain.";
    return passed("by variant", sentence, { p });
  }
  const { silence, source } = worst;
  const variant = plan.variants[silence.variant]?.name ?? "";
  const when = runText(source.hours, silence);
  const place = plan.log.length === 1 ? "" : ` in ${entryName(source.source)}`;
  const others = judged.filter((one) => byP(one.p) !== "pass").length - 1;
  const more =
    others > 0
      ? ` There ${others === 1 ? "is" : "are"} ${plural(others, "other run", "other runs")} of hours like it.`
      : "";
  return {
    about: "by variant",
    result,
    strong: false,
    sentence: `${quoted(variant)} has no row${place} ${when}, while ${units(plan, silence.others)} of the other ${plan.variants.length === 2 ? "group" : "groups"} have. ${byChance("so long a silence", p)}${more}`,
    remedy:
      "Find out why rows of one group were not recorded or got lost; if they exist, fill them in and run the report again. If that variant was not shown yet, or no more, count the days on which all were (enrolment: from, before).",
    figures: { p, variant, when, units: silence.others },
  };
}

/** Of no rows at all, no share: nothing can then be said. */
const shareOf = (counts: ByVariant, at: number): number => (counts[at] ?? 0) / Math.max(1, sum(counts));
