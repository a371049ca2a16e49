import type { Level } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { isAbsent } from "../stats/index.ts";
import { capital, fixed, plural, pText, quoted } from "../words/index.ts";
import { because } from "./absent.ts";
import type { Subgroup, SubgroupLevel } from "./subgroups.ts";
import { told } from "./told.ts";
import type { Effect } from "./types.ts";

/** A level as a reader sees it: its value as it is, and in words what is none. */
export function levelText(level: Level): string {
  switch (level.kind) {
    case "value":
      return level.text;
    case "rest":
      return level.levels === 1 ? "the 1 other value" : `the ${level.levels} other values`;
    case "missing":
      return "no value";
    default:
      return unknown(level);
  }
}

/** A level at the head of its row: a value of the log as it is, our own words with a capital. */
export function levelHead(level: Level): string {
  return level.kind === "value" ? level.text : capital(levelText(level));
}

/** What a level says, one sentence: "DE": 9.1% more (95% interval: …), not against the whole. */
export function levelSentence(row: SubgroupLevel, subgroup: Subgroup, effect: Effect, plan: Plan): string {
  const { one, many } = plan.unitCalled;
  const name = row.level.kind === "value" ? quoted(row.level.text) : levelText(row.level);
  const { control, variant } = row.units;
  const counted = `${plural(variant, one, many)} with ${quoted(effect.variant)}, ${control} with ${quoted(effect.control)}`;
  if (isAbsent(row.contrast)) {
    return `${name}: too few to tell, since ${because(row.contrast.absent, one, many)} (${counted}).`;
  }
  if (row.standing === "too-few") return `${name}: too few to tell (${counted}).`;
  const found = told(ofLevel(effect, row), plan)?.found ?? counted;
  return row.standing === "against"
    ? `${name}: ${found}. It points against the whole, also at the wider interval that ${subgroup.levels.length} levels ask for.`
    : `${name}: ${found}. It does not point against the whole.`;
}

/** The effect as if the level's units were all. */
export function ofLevel(effect: Effect, { contrast }: SubgroupLevel): Effect {
  return isAbsent(contrast) ? effect : { ...effect, contrast, adjusted: null, notAdjusted: null };
}

/** Whether the levels differ by more than chance: Cochran's Q in words; null where fewer than two levels are large enough. */
export function heterogeneitySentence({ column, heterogeneity }: Subgroup, plan: Plan): string {
  if (heterogeneity === null)
    return `Whether the levels of ${quoted(column)} differ cannot be told: fewer than two of them are large enough.`;
  const { q, df, p } = heterogeneity;
  const figures = `(Cochran’s Q ${fixed(q, 1)} on ${df} ${df === 1 ? "degree" : "degrees"} of freedom, ${pText(p)})`;
  return p < 1 - plan.decision.confidence
    ? `The levels of ${quoted(column)} differ from each other by more than chance explains ${figures}.`
    : `The levels of ${quoted(column)} differ from each other by no more than chance explains ${figures}.`;
}

function unknown(level: never): never {
  throw new Error(`no words for the level ${JSON.stringify(level)}`);
}
