import type { AdjustedContrast, Effect } from "../../src/decision/types.ts";
import type { Metric } from "../../src/plan/types.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { adopt } from "./cases.ts";
import { handContrast } from "./contrasts.ts";
import { booked, contacts, fare } from "./plans.ts";

const N = 50_150;

const ofPast: Metric = { ...fare, adjustFor: { kind: "days-before", days: 14 } };
const ofColumn: Metric = { ...contacts, adjustFor: { kind: "column", column: "past_contacts" } };
const ofNothing: Metric = { ...booked, adjustFor: { kind: "column", column: "always_5" } };

const past = handContrast({ units: N, mean: 61.2, sd: 240 }, { units: N, mean: 60.8, sd: 236 });

function adjustedBy(more: Partial<AdjustedContrast> & Pick<AdjustedContrast, "contrast">): AdjustedContrast {
  return {
    theta: 0.62,
    centre: 61,
    varianceReduction: 0.36,
    withoutCovariate: { control: 0, variant: 0 },
    balance: {
      control: past.control,
      variant: past.variant,
      difference: past.difference,
      p: past.difference.p,
      standardised: -0.00168,
    },
    pAdjustedOfPlain: 0.0049,
    ...more,
  };
}

function changed(effect: Effect): Partial<Effect> {
  switch (effect.metric) {
    case fare.name: {
      const contrast = handContrast({ units: N, mean: 96.3, sd: 328 }, { units: N, mean: 104.0, sd: 344 });
      return { adjusted: adjustedBy({ contrast }), zone: "better" };
    }
    case contacts.name: {
      const contrast = handContrast({ units: N, mean: 0.081, sd: 0.32 }, { units: N, mean: 0.0798, sd: 0.32 });
      const missing = { control: 1_204, variant: 1 };
      return {
        adjusted: adjustedBy({ contrast, theta: -0.1, varianceReduction: 0.0004, withoutCovariate: missing }),
      };
    }
    default:
      return { notAdjusted: { absent: "same-covariate" } };
  }
}

/** The case adopt with covariates: the fare's past, a column missing for some that says nothing, one that does not vary. */
export const adjustedCase: ReportInputs = {
  ...adopt,
  plan: { ...adopt.plan, metrics: [ofNothing, ofColumn, ofPast] },
  choices: [],
  effects: adopt.effects.map((effect) => ({ ...effect, ...changed(effect) })),
};
