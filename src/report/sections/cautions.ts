import type { Plan } from "../../plan/types.ts";
import { capital, list, quoted } from "../../words/index.ts";
import { lookCaution } from "./look-methods.ts";

/** What every report says of its own limits, at the end of section 7. */
export function cautions(plan: Plan): string[] {
  return [
    "Statistical evidence is not the whole decision: cost, law, strategy and the people concerned are not in the figures.",
    "Experiments on people need the consent and the privacy that the law of the place asks for; event logs are personal data.",
    "Not for clinical, safety or other regulated decisions: these need a registered protocol and a licensed practitioner.",
    lookCaution(plan),
    suggestions(plan),
  ];
}

/** What the report shows and the rule does not look at. */
function suggestions({ metrics, subgroups, askedAfterwards }: Plan): string {
  const secondary = metrics.filter(({ role }) => role === "secondary").map(({ name }) => name);
  const planned = [
    ...(subgroups.length === 0 ? [] : [`subgroups (by ${list(subgroups.map(quoted))})`]),
    ...(secondary.length === 0 ? [] : [`measures for information (${list(secondary)})`]),
  ];
  const isAsked = askedAfterwards.metrics.length + askedAfterwards.subgroups.length > 0;
  const asked = isAsked ? ["what was asked after the test began"] : [];
  if (planned.length > 0) return `${capital(list([...planned, ...asked]))} suggest; they do not decide.`;
  return isAsked
    ? `${capital(list(asked))} suggests; it does not decide.`
    : "What was not named beforehand as deciding can suggest; it does not decide.";
}
