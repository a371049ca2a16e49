import type { ByVariant, Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { count, percent } from "../../words/index.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { flowStem, type Stem } from "../charts/flow.ts";
import { NONE } from "../effect-text.ts";
import { unitLine } from "../ledger.ts";

/** The flow of units as CONSORT draws it: one stem to enrolment, then one for each variant, and at each line who left. */
export interface FlowFigure {
  readonly caption: string;
  readonly trunk: readonly FlowStep[];
  readonly arms: readonly {
    readonly variant: string;
    readonly control: boolean;
    readonly steps: readonly FlowStep[];
  }[];
  /** The pieces of the stem, drawn once; a step names its own. */
  readonly stems: Readonly<Record<Stem, Drawing>>;
}
export interface FlowStep {
  readonly stem: Stem;
  readonly text: string;
  readonly units: string;
  /** Of those enrolled; "" where it says nothing. */
  readonly share: string;
  readonly total: boolean;
}

const BEFORE_ENROLMENT = ["not-enrolled", "outside-enrolment", "unknown-variant"];

export async function flowFigure(plan: Plan, { unitLines, unitsSeen }: Reduction): Promise<FlowFigure> {
  const before = unitLines.filter(({ id }) => BEFORE_ENROLMENT.includes(id));
  const after = unitLines.filter(({ id }) => !BEFORE_ENROLMENT.includes(id));
  const enrolled = plan.variants.map((_, v) => after.reduce((sum, line) => sum + ofVariant(line.byVariant, v), 0));
  const total = (stem: Stem, text: string, units: number, share = ""): FlowStep => ({
    stem,
    text,
    units: count(units),
    share,
    total: true,
  });
  const stems = {
    begins: await draw(flowStem("begins"), "flow-begins", null),
    "goes-on": await draw(flowStem("goes-on"), "flow-goes-on", null),
    leaves: await draw(flowStem("leaves"), "flow-leaves", null),
    ends: await draw(flowStem("ends"), "flow-ends", null),
  };
  return {
    caption: `The flow of ${plan.unitCalled.many}: from those seen in the log to those counted`,
    trunk: [
      total("begins", "Seen in the log", unitsSeen),
      ...before.filter(({ units }) => units > 0).map((line) => left(plan, line.id, line.units, null)),
      total(
        "ends",
        "Enrolled in a variant of the plan",
        enrolled.reduce((a, b) => a + b, 0),
      ),
    ],
    arms: plan.variants.map(({ name, isControl }, v) => {
      const all = enrolled[v] ?? 0;
      const steps = after.filter(({ id }) => id !== "analysed");
      const counted = ofVariant(after.find(({ id }) => id === "analysed")?.byVariant ?? null, v);
      return {
        variant: name,
        control: isControl,
        steps: [
          total("begins", "enrolled", all, shareOf(all, all)),
          ...steps.map((line) => left(plan, line.id, ofVariant(line.byVariant, v), all)),
          total("ends", "counted", counted, shareOf(counted, all)),
        ],
      };
    }),
    stems,
  };
}

function left(plan: Plan, id: string, units: number, enrolled: number | null): FlowStep {
  return {
    stem: "leaves",
    text: unitLine(id, plan),
    units: count(units),
    share: enrolled === null ? "" : shareOf(units, enrolled),
    total: false,
  };
}

/** All of them are 100%, without a place after the point. */
function shareOf(units: number, enrolled: number): string {
  if (enrolled === 0) return NONE;
  return units === enrolled ? "100%" : percent(units / enrolled);
}

function ofVariant(byVariant: ByVariant | null, v: number): number {
  return byVariant?.[v] ?? 0;
}
