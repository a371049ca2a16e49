import { readFile } from "node:fs/promises";
import { loadPlan, type Plan, placeProblems, sealOf, unreadablePlan } from "./plan/index.ts";
import { list } from "./words/index.ts";

export interface Sealed {
  readonly status: 0 | 2;
  /** The fingerprint on a line of its own, then what it covers and how it is used; or what is wrong with the plan. */
  readonly text: string;
}

/** The fingerprint of a plan's rule (plan/seal.ts). The log is not looked at: it need not be there yet. */
export async function seal(planPath: string): Promise<Sealed> {
  let planText: string;
  try {
    planText = await readFile(planPath, "utf8");
  } catch (error) {
    return { status: 2, text: unreadablePlan(planPath, (error as NodeJS.ErrnoException).code ?? "unknown") };
  }
  const loaded = loadPlan(planText);
  if ("problems" in loaded) return { status: 2, text: placeProblems(loaded.source, planPath, loaded.problems) };
  const { fingerprint } = sealOf(loaded.plan);
  return { status: 0, text: [fingerprint, "", ...explained(loaded.plan, fingerprint)].join("\n") };
}

function explained(plan: Plan, fingerprint: string): string[] {
  const deciding = plan.metrics.filter(({ role }) => role !== "secondary").map(({ name }) => name);
  const isSame = plan.registered?.fingerprint === fingerprint;
  return [
    `It stands for what decides: ${list(deciding)}; the variants' shares, enrolment, follow-up and the decision's rule.`,
    "Filters, texts and what is for information are not in it.",
    ...(plan.registered === null
      ? [
          "Keep it in a ticket or a repository before the start. Then say in the plan where:",
          `registered: {on: DATE, where: PLACE, fingerprint: ${fingerprint}}`,
        ]
      : [
          isSame
            ? "It is the one that the plan says was kept."
            : `The plan says that another was kept: ${plan.registered.fingerprint}`,
        ]),
  ];
}
