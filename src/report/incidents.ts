import type { Incident, Plan } from "../plan/types.ts";
import type { Day } from "../words/index.ts";
import { dayOf } from "./plan-words.ts";

/** An incident as a figure over days marks it: the first and the last local day that it touches. */
export interface IncidentDays {
  readonly name: string;
  readonly first: Day;
  readonly last: Day;
}

/** In plan order, in the plan's time zone. */
export function incidentDays({ incidents, timezone }: Plan): IncidentDays[] {
  return incidents.map(({ name, fromUs, beforeUs }: Incident) => ({
    name,
    first: dayOf(fromUs, timezone),
    last: dayOf(beforeUs - 1n, timezone),
  }));
}
