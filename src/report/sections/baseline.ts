import { covariates } from "../../checks/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import type { ArmFigures } from "../../stats/index.ts";
import { balance } from "../../stats/index.ts";
import { capital, count, fixed, percent } from "../../words/index.ts";
import { NONE, sideBySide } from "../effect-text.ts";

/**
 * The arms side by side before enrolment (CONSORT 2010 item 15, 2025 item 25). One row a quantity; a row of another kind,
 * such as a level's share of each arm, is one more `BaselineRow`.
 */
export interface BaselineTable {
  readonly variants: readonly string[];
  readonly rows: readonly BaselineRow[];
  readonly reading: string;
}
export interface BaselineRow {
  readonly what: string;
  /** Of each variant in plan order. */
  readonly cells: readonly BaselineCell[];
  /** The largest standardised difference of a variant from the control. */
  readonly standardised: string;
}
export interface BaselineCell {
  readonly figure: string;
  /** What stands under it: the spread, the number of units. */
  readonly beside: string;
}

/** Null where the plan names nothing that was known before enrolment. */
export function baselineTable(plan: Plan, reduction: Reduction): BaselineTable | null {
  const rows = covariateRows(plan, reduction);
  if (rows.length === 0) return null;
  const { many } = plan.unitCalled;
  return {
    variants: plan.variants.map(({ name }) => name),
    rows,
    reading: `Mean with its standard deviation, or share, over the ${many} counted that have a value. Standardised difference: over the standard deviation of both groups, so that it does not grow with their size; beyond 0.1 it is worth a look. Whether chance explains a difference is judged in section 3.`,
  };
}

function covariateRows(plan: Plan, reduction: Reduction): BaselineRow[] {
  const control = plan.variants.findIndex(({ isControl }) => isControl);
  return covariates(plan, reduction).flatMap(({ about, isShare, arms }) => {
    const own = arms[control]?.covariate;
    if (own === undefined) return [];
    const compared = arms.map(({ covariate }) => balance(own, covariate, 1 - plan.decision.confidence));
    const figures = compared.map(({ variant }) => variant);
    return [
      {
        what: capital(about),
        cells: isShare ? shareCells(figures, plan) : meanCells(figures, plan),
        standardised: largest(compared.filter((_, v) => v !== control).map(({ standardised }) => standardised)),
      },
    ];
  });
}

function meanCells(arms: readonly ArmFigures[], { unitCalled: { many } }: Plan): BaselineCell[] {
  const means = sideBySide(arms.map(({ mean }) => mean));
  const sds = sideBySide(arms.map(({ sd }) => sd));
  return arms.map(({ units }, v) => ({
    figure: means[v] ?? NONE,
    beside: `(${sds[v] ?? NONE}), ${count(units)} ${many}`,
  }));
}

function shareCells(arms: readonly ArmFigures[], { unitCalled: { many } }: Plan): BaselineCell[] {
  return arms.map(({ mean, units }) => ({
    figure: mean === null ? NONE : percent(mean),
    beside: `${count(units)} ${many}`,
  }));
}

/** The largest in size, with its sign. */
export function largest(differences: readonly (number | null)[]): string {
  const known = differences.filter((difference) => difference !== null);
  const [most] = [...known].sort((a, b) => Math.abs(b) - Math.abs(a));
  return most === undefined ? NONE : fixed(most, 3);
}
