import { covariates } from "../../checks/index.ts";
import { levelHead } from "../../decision/index.ts";
import type { Reduction, SubgroupColumn } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import type { ArmFigures } from "../../stats/index.ts";
import { balance, standardisedShares } from "../../stats/index.ts";
import { capital, count, fixed, percent, quoted } from "../../words/index.ts";
import { NONE, sideBySide } from "../effect-text.ts";

/**
 * The arms side by side before enrolment (CONSORT 2010 item 15, 2025 item 25): one row a quantity, then under each column of
 * subgroups one a level.
 */
export interface BaselineTable {
  readonly variants: readonly string[];
  readonly rows: readonly BaselineRow[];
  readonly columns: readonly { readonly head: string; readonly rows: readonly BaselineRow[] }[];
  /** Of cells in a row. */
  readonly width: number;
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
  const known = covariateRows(plan, reduction);
  const columns = reduction.facts.subgroups
    .map((column) => ({ head: `${quoted(column.column)} at enrolment`, rows: levelRows(plan, column) }))
    .filter(({ rows }) => rows.length > 0);
  if (known.length + columns.length === 0) return null;
  const { many } = plan.unitCalled;
  const readings = [
    ...(known.length === 0
      ? []
      : [`Mean with its standard deviation, or share, over the ${many} counted that have a value.`]),
    ...(columns.length === 0
      ? []
      : [
          `Of a value at enrolment: the share of all ${many} enrolled with that variant, counted or not, and how many they are.`,
        ]),
    "Standardised difference: over the standard deviation of both groups, so that it does not grow with their size; beyond 0.1 it is worth a look. Whether chance explains a difference is judged in section 3.",
  ];
  return {
    variants: plan.variants.map(({ name }) => name),
    rows: known,
    columns,
    width: plan.variants.length + 2,
    reading: readings.join(" "),
  };
}

/** The cells of a level's effect hold the counted alone; randomisation made those who are enrolled alike. */
function levelRows(plan: Plan, { levels }: SubgroupColumn): BaselineRow[] {
  const control = plan.variants.findIndex(({ isControl }) => isControl);
  const all = plan.variants.map((_, v) => levels.reduce((sum, { enrolled }) => sum + (enrolled[v] ?? 0), 0));
  return levels.map(({ level, enrolled }) => {
    const arms = all.map((of, v) => ({ units: enrolled[v] ?? 0, of }));
    const own = arms[control];
    return {
      what: levelHead(level),
      cells: arms.map(({ units, of }) => ({
        figure: of === 0 ? NONE : percent(units / of),
        beside: count(units),
      })),
      standardised: largest(
        arms.filter((_, v) => v !== control).map((arm) => (own === undefined ? null : standardisedShares(own, arm))),
      ),
    };
  });
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
