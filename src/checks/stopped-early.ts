import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, percent } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { unitsOn } from "./ledger.ts";
import type { Check } from "./types.ts";
import { units } from "./words.ts";

/** Were as many units counted as the plan asked for? A test that ends before looks like one that was read until it suited. */
export function stoppedEarly(plan: Plan, reduction: Reduction): Check | null {
  if (plan.plannedUnits === null) return null;
  const finding = judge(plan, unitsOn(reduction, "analysed").units, plan.plannedUnits);
  return asCheck("stopped-early", [finding], finding.figures);
}

function judge(plan: Plan, analysed: number, planned: number): Finding {
  const share = analysed / planned;
  const figures = { units: analysed, planned, share };
  const counted = `${units(plan, analysed)} ${analysed === 1 ? "was" : "were"} counted; the plan asked for ${count(planned)}`;
  if (analysed >= planned) return passed("units", `${counted}.`, figures);
  const why = plan.texts.ended === null ? " The plan does not say why it ended." : "";
  return {
    about: "units",
    result: "caution",
    strong: false,
    sentence: `The test ended at ${percent(share)} of its planned size, and no earlier look was planned: ${counted}.${why}`,
    remedy: `If it was ended for what the figures showed, they overstate the difference. ${plan.texts.ended === null ? "State why it ended (ended), and next" : "Next"} time plan the looks, or wait for the planned size.`,
    figures,
  };
}
