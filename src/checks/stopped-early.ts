import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, percent } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { unitsOn } from "./ledger.ts";
import type { Check } from "./types.ts";
import { units } from "./words.ts";

/**
 * Were as many units counted as the plan asked for? A test that ends before looks like one that was read until it suited;
 * not at a look that was planned, whose interval allows for it.
 */
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
  const { looks } = plan;
  const at = `at ${percent(share)} of the planned size: ${counted}.`;
  if (looks !== null && looks.at < looks.planned.length) {
    return passed("units", `This is look ${looks.at} of ${looks.planned.length} that were planned, ${at}`, figures);
  }
  const isSaid = plan.texts.ended !== null;
  const ended =
    looks === null
      ? `The test ended at ${percent(share)} of its planned size, and no earlier look was planned: ${counted}.`
      : `The last of the ${looks.planned.length} planned looks came ${at}`;
  const next = looks === null ? "time plan the looks, or wait for the planned size" : "time wait for the planned size";
  return {
    about: "units",
    result: "caution",
    strong: false,
    sentence: `${ended}${isSaid ? "" : " The plan does not say why it ended."}`,
    remedy: `If it was ended for what the figures showed, they overstate the difference. ${isSaid ? "Next" : "State why it ended (ended), and next"} ${next}.`,
    figures,
  };
}
