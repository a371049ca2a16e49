import { type LoadedPlan, loadPlan, type Plan, placeProblems } from "../../src/plan/index.ts";

/** A small plan that is right, by its sections; a test replaces those that it is about. */
export const SECTIONS = {
  experiment: "experiment: Fare calendar",
  question: "question: Does it raise bookings?",
  log: `log:
  - files: data/*.csv
    columns: {unit: visitor, time: at, event: event, variant: arm}`,
  variants: `variants:
  - {name: list, control: true}
  - {name: calendar}`,
  metrics: `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}`,
};
export type Sections = Readonly<Record<string, string>>;

export function planText(sections: Sections = {}): string {
  return Object.values({ ...SECTIONS, ...sections })
    .filter((section) => section !== "")
    .map((section) => `${section}\n`)
    .join("");
}

/** The plan of a text that must be right; the message otherwise. Nothing is refused as not built yet, for the format has it. */
export function planOf(text: string): Plan {
  const loaded = loadPlan(text, { later: [] });
  if ("problems" in loaded) throw new Error(messageOf(loaded));
  return loaded.plan;
}

export function messageOf(loaded: LoadedPlan): string {
  return placeProblems(loaded.source, "plan.yaml", "problems" in loaded ? loaded.problems : []);
}
