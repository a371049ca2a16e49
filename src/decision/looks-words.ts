import type { Plan } from "../plan/types.ts";
import { lookCritical, normalCritical } from "../stats/index.ts";
import { count, percent, planPercent } from "../words/index.ts";
import { alphaAtLooks, isInterim, looksSoFar } from "./looks.ts";
import type { Conclusion } from "./types.ts";

/** What page one says of planned looks: which one this is, what it costs, and before the last that it exaggerates. */
export function lookSentences(plan: Plan, { decision }: Conclusion): string[] {
  if (plan.looks === null || decision === "undecidable") return [];
  const early = isInterim(plan)
    ? ["Tests stopped early exaggerate: an effect shown before the last look is likely smaller than the one found."]
    : [];
  return [`${whichLook(plan)}${widerText(plan)}`, ...early];
}

/** "This is look 3 of 4, at 71.0% of the planned 100,000 visitors." */
function whichLook({ looks, plannedUnits, unitCalled }: Plan): string {
  if (looks === null) return "";
  const { planned, at, reached } = looks;
  const where =
    reached === null || plannedUnits === null
      ? `planned at ${planPercent(planned[at - 1] ?? 1)} of the size`
      : `at ${percent(reached)} of the planned ${count(plannedUnits)} ${unitCalled.many}`;
  return `This is look ${at} of ${planned.length}, ${where}.`;
}

/** " What decides has intervals 1.2 times as wide as with a single look, …": nothing where they are as good as alike. */
function widerText(plan: Plan): string {
  const times = widening(plan);
  if (times === null || times < 1.005) return "";
  const factor = times < 1.095 ? times.toFixed(2) : times.toFixed(1);
  return ` Intervals of what decides are ${factor} times as wide as with a single look, so that several looks together make a false "adopt" no more likely.`;
}

/** How many times as wide as with one look; of the primaries' intervals. */
function widening(plan: Plan): number | null {
  const looks = looksSoFar(plan);
  const primary = plan.metrics.find(({ role }) => role === "primary");
  if (looks === null || primary === undefined) return null;
  const alpha = alphaAtLooks(plan, primary);
  return lookCritical(looks, alpha) / normalCritical(alpha);
}

/** After an interim look that settles nothing: 'What would settle it: going on as planned. The next look is at 75% …' */
export function goOnSentence({ looks, plannedUnits, unitCalled }: Plan): string {
  if (looks === null) throw new Error("a plan without looks has no next one");
  const reached = looks.reached ?? looks.planned[looks.at - 1] ?? 0;
  const next = looks.planned.slice(looks.at).find((share) => share > reached) ?? 1;
  const size = plannedUnits === null ? "size" : `${count(plannedUnits)} ${unitCalled.many}`;
  const last = next === 1 ? ", and the last" : "";
  return `What would settle it: going on as planned. The next look is at ${planPercent(next)} of the planned ${size}${last}. Looks at other times make a false "adopt" more likely.`;
}

/** After the last look. */
export const ALL_LOOKS_MADE =
  'Adding days to this test now and looking again would make a false "adopt" more likely: all its planned looks have been made.';
