import type { Incident, Looks } from "../../src/plan/types.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { adopt, effectOf, notSettled } from "./cases.ts";
import { handChoices } from "./choices.ts";
import { shareArm } from "./contrasts.ts";
import { accrualOf, grouped } from "./groups.ts";
import { booked, farePlan } from "./plans.ts";

const hour = (day: number, hours: number) => BigInt(Date.UTC(2026, 2, day, hours)) * 1000n;

export const outage: Incident = {
  name: "payment outage",
  what: "cards were refused",
  fromUs: hour(4, 7), // Oslo is an hour ahead of UTC
  beforeUs: hour(4, 23),
  fromText: "2026-03-04T08:00",
  beforeText: "2026-03-05",
  where: [{ column: "country", kind: "in", values: [{ kind: "text", text: "NO" }] }],
};
const strike: Incident = { ...outage, name: "strike", what: null, fromUs: hour(7, 8), beforeUs: hour(9, 8), where: [] };

/** Two incidents; the decision depends on the first. */
export const meanwhile: ReportInputs = withIncidents({ ...adopt, plan: { ...farePlan, incidents: [outage, strike] } });

function withIncidents(inputs: ReportInputs): ReportInputs {
  const [first] = inputs.effects;
  if (first === undefined) throw new Error("no effect");
  const rows = handChoices(effectOf(booked, "calendar", first.contrast, "worthwhile"), booked, [
    ["without-incident:payment outage", shareArm(9_000, 0.12), shareArm(9_000, 0.1204)],
    ["without-incident:strike", shareArm(48_000, 0.1198), shareArm(48_000, 0.1321)],
  ]);
  const { facts } = inputs.reduction;
  return {
    ...inputs,
    choices: [rows],
    accruals: [
      accrualOf("Booked", [0.02, 0.016, 0.013, 0.012, 0.012, 0.012]),
      accrualOf("Fare per visitor", [9, 8, 7]),
    ],
    reduction: {
      ...inputs.reduction,
      facts: {
        ...facts,
        analysedByDay: grouped.reduction.facts.analysedByDay,
        inIncidents: [
          [41_150, 41_150],
          [2_120, 2_181],
        ],
      },
    },
  };
}

const looks: Looks = { planned: [0.25, 0.5, 0.75, 1], at: 2, spending: "obrien-fleming", reached: 0.42828 };

/** The second of four looks, which settles nothing. */
export const atALook: ReportInputs = { ...notSettled, plan: { ...notSettled.plan, looks } };
