import type { Check } from "../checks/types.ts";
import { type Choices, type ContrastNormality, type Effect, lookAccount } from "../decision/index.ts";
import type { Contrast } from "../stats/types.ts";
import { changesJson } from "./changes/changes.ts";
import { twelveDigits } from "./digits.ts";
import { flowJson } from "./flow.ts";
import { accrualJson, sinceEnrolmentJson, subgroupJson } from "./groups-json.ts";
import type { CheckJson, EffectJson, ReportJson, SensitivityJson } from "./json-types.ts";
import { provenanceJson } from "./provenance.ts";
import type { ReportInputs } from "./types.ts";

/** The report's data as DESIGN 7 lays it down. */
export function reportJson(inputs: ReportInputs): ReportJson {
  const { plan, reduction, conclusion, rerun } = inputs;
  const report: ReportJson = {
    format: 1,
    experiment: plan.experiment,
    conclusion: {
      decision: conclusion.decision,
      variant: conclusion.variant,
      sentence: conclusion.sentence,
      reasons: conclusion.reasons,
    },
    looks: lookAccount(plan),
    flow: flowJson(plan, reduction),
    checks: inputs.checks.map(checkJson),
    effects: inputs.effects.map(effectJson),
    subgroups: inputs.subgroups.map((subgroup) => subgroupJson(subgroup, inputs.effects, plan)),
    accrual: inputs.accruals.map(accrualJson),
    sinceEnrolment: inputs.daysSince.map(sinceEnrolmentJson),
    sensitivity: inputs.choices.map(sensitivityJson),
    askedAfterwards: afterwardsJson(inputs),
    changes: null,
    provenance: {
      ...provenanceJson(inputs),
      cells: inputs.cellsSha256 ?? null,
      fromCells: inputs.fromCells === true,
    },
  };
  const rounded = twelveDigits(report);
  return rerun === undefined ? rounded : { ...rounded, changes: twelveDigits(changesJson(rerun, rounded)) };
}

function afterwardsJson({ plan, effects, afterwards }: ReportInputs): ReportJson["askedAfterwards"] {
  const { subgroups, metrics } = afterwards;
  if (subgroups.length === 0 && metrics === null) return null;
  return {
    effects: (metrics?.effects ?? []).map(effectJson),
    subgroups: subgroups.map((subgroup) => subgroupJson(subgroup, effects, plan)),
  };
}

export function checkJson(check: Check): CheckJson {
  const own = {
    id: check.id,
    result: check.result,
    strong: check.strong,
    sentence: check.sentence,
    remedy: check.remedy,
    parts: check.parts.map(({ about, result, sentence, figures }) =>
      besideFigures({ about, result, sentence }, figures, `${check.id}, ${about}`),
    ),
  };
  return besideFigures(own, check.figures, check.id) as CheckJson;
}

/** The figures stand beside the check's own keys; one that would overwrite a key is a mistake of the check. */
function besideFigures<T extends object, F extends object>(own: T, figures: F, of: string): T & F {
  const clash = Object.keys(figures).find((key) => Object.hasOwn(own, key));
  if (clash !== undefined) throw new Error(`the check ${of} has a figure called "${clash}", which is a key of its own`);
  return { ...own, ...figures };
}

function effectJson(effect: Effect): EffectJson {
  const { contrast, adjusted } = effect;
  return {
    metric: effect.metric,
    role: effect.role,
    summary: effect.summary,
    variant: effect.variant,
    control: effect.control,
    arms: { control: contrast.control, variant: contrast.variant },
    difference: differenceJson(contrast, adjusted === null ? effect.pAdjusted : adjusted.pAdjustedOfPlain),
    relative: relativeJson(contrast),
    adjusted:
      adjusted === null
        ? null
        : {
            difference: differenceJson(adjusted.contrast, effect.pAdjusted),
            relative: relativeJson(adjusted.contrast),
            theta: adjusted.theta,
            varianceReduction: adjusted.varianceReduction,
          },
    zone: effect.zone,
    power: { detectable: effect.power.detectable, unitsForWorthwhile: effect.power.unitsForWorthwhile },
    normality: normalityJson(effect.normality),
  };
}

function differenceJson({ difference }: Contrast, pAdjusted: number | null): EffectJson["difference"] {
  const { estimate, standardError, low, high, z, p, method } = difference;
  return { estimate, standardError, low, high, z, p, pAdjusted, method };
}

function relativeJson({ relative }: Contrast): EffectJson["relative"] {
  return "absent" in relative ? null : { estimate: relative.estimate, low: relative.low, high: relative.high };
}

/** The worse of pooled and own shapes; the larger of the arms' shares; of the rules of thumb the stricter one. */
function normalityJson(normality: ContrastNormality | null): EffectJson["normality"] {
  if (normality === null) return null;
  const { tails, corrected, unitsForTails, unitsByRule, largest } = normality;
  const shares = [largest?.control, largest?.variant].flatMap((share) => (share == null ? [] : [share.ofSquares]));
  return {
    skew: tails.skew,
    lowerTail: tails.reported.lowerTail,
    upperTail: tails.reported.upperTail,
    own: { lowerTail: tails.own.lowerTail, upperTail: tails.own.upperTail },
    skewCorrected: { low: corrected.low, high: corrected.high },
    unitsForTails,
    unitsByRule: unitsByRule.kohavi,
    largestShare: shares.length === 0 ? null : Math.max(...shares),
  };
}

function sensitivityJson({ metric, variant, rows }: Choices): SensitivityJson {
  return {
    metric,
    variant,
    rows: rows.map(({ choice, difference: { estimate, low, high, p }, sign, agrees }) => ({
      choice,
      estimate,
      low,
      high,
      sign,
      p,
      agrees,
    })),
  };
}
