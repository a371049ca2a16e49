import type { Plan } from "../plan/index.ts";
import { count, type Engine, nano, type Row } from "./engine.ts";
import { cellsOfGroups, type Group, groupsOfCells, groupsOfPairs, pairsOfGroups, together, without } from "./groups.ts";
import { armsOfCells, armsOfPairs, type MeasuredMetric, type Scales, widened } from "./measuredMetric.ts";
import { type Dialect, extremes, NOT_ANALYSED, type Over, otherwise, standingCounts } from "./sql/index.ts";
import { decimalTables, jointTables, measured } from "./tables.ts";
import type { CellTable, ChoiceCells, JointTable, OtherCells } from "./types.ts";

/** A choice of units: whether one of a standing (sql/cells.ts) is among them. */
interface UnitChoice {
  readonly choice: OtherCells;
  readonly has: (standing: number) => boolean;
}

const ANALYSED = 1;
const isAnalysed = (standing: number): boolean => (standing & ANALYSED) !== 0;

const FIRST_INCIDENT = 16;

function unitChoicesOf({ incidents }: Plan): UnitChoice[] {
  return [
    { choice: "other-way-in-two-variants", has: (standing) => (standing & 2) !== 0 },
    { choice: "any-follow-up", has: (standing) => (standing & 4) !== 0 },
    { choice: "without-first-day", has: (standing) => (standing & 9) === ANALYSED },
    ...incidents.map(({ name }, k): UnitChoice => {
      const bits = ANALYSED | (FIRST_INCIDENT << k);
      return { choice: `without-incident:${name}`, has: (standing) => (standing & bits) === ANALYSED };
    }),
  ];
}

/**
 * Other choices of units, one list a metric. Asked for are the sums of those units only that stand otherwise than most:
 * switched, not followed to the end, of the first day, enrolled in an incident.
 */
export async function unitChoices(
  plan: Plan,
  metrics: readonly MeasuredMetric[],
  engine: Engine,
  dialect: Dialect,
): Promise<ChoiceCells[][]> {
  const incidents = plan.incidents.length;
  const counts = await engine.query(standingCounts(incidents));
  const choices = unitChoicesOf(plan).filter((choice) => differs(choice, counts) && leavesArms(plan, choice, counts));
  if (choices.length === 0 || metrics.length === 0) return metrics.map(() => []);
  const isBeyond = counts.some((row) => !isAnalysed(count(row, "standing")));
  const scales = await scalesWithOthers(metrics, isBeyond, engine);
  const apart = await tablesApart(metrics, scales, otherwise(incidents), engine, dialect);
  return metrics.map((one, m) => {
    const own = scales[m] ?? { y: 1, x: 1 };
    const tables = apart[m];
    if (tables === undefined) throw new Error(`no sums apart for metric ${m} of ${apart.length}`);
    const arms = { y: armsOfCells(one, own), pairs: armsOfPairs(one, own) };
    return choices
      .filter(({ has }) => tables.of.bucket.some((standing) => has(standing) !== isAnalysed(standing)))
      .map(({ choice, has }) => ({
        choice,
        of: cellsOfGroups(one.y.pivot, own.y, chosen(arms.y, groupsOfCells(tables.of), has)),
        joint:
          one.paired === null || tables.joint === null
            ? null
            : pairsOfGroups(
                [one.y.pivot, one.paired.x.pivot],
                [own.y, own.x],
                chosen(arms.pairs, groupsOfPairs(tables.joint), has),
              ),
      }));
  });
}

/** The plan's arms, less the units that a choice leaves out, and with those that it takes in. */
function chosen(arms: readonly Group[], apart: readonly Group[], has: UnitChoice["has"]): Group[] {
  const variants = [...new Set([...arms, ...apart].map(({ variant }) => variant))].sort((a, b) => a - b);
  return variants.flatMap((variant) => {
    const own = apart.filter((group) => group.variant === variant);
    const gone = own.filter(({ bucket }) => isAnalysed(bucket) && !has(bucket));
    const come = own.filter(({ bucket }) => !isAnalysed(bucket) && has(bucket));
    const arm = arms.find((group) => group.variant === variant);
    const left = arm === undefined ? [] : [without(arm, together(gone))];
    return together([...left, ...come]) ?? [];
  });
}

function differs({ has }: UnitChoice, counts: readonly Row[]): boolean {
  return counts.some((row) => has(count(row, "standing")) !== isAnalysed(count(row, "standing")));
}

/** A test of one day without its first day is none. */
function leavesArms(plan: Plan, { has }: UnitChoice, counts: readonly Row[]): boolean {
  return plan.variants.every((_, variant) => {
    const own = counts.filter((row) => count(row, "variant") === variant).map((row) => count(row, "standing"));
    return own.some(has) || !own.some(isAnalysed);
  });
}

/** The scales that reach the units too that the plan does not count. */
async function scalesWithOthers(
  metrics: readonly MeasuredMetric[],
  isBeyond: boolean,
  engine: Engine,
): Promise<Scales[]> {
  const values = metrics.flatMap(({ y, paired }) => (paired === null ? [y] : [y, paired.x]));
  const [ends = {}] = isBeyond
    ? await engine.query(
        extremes(
          values.map(({ x }) => x),
          NOT_ANALYSED,
        ),
      )
    : [];
  let next = 0;
  const scale = ({ pivot, scale: own }: { readonly pivot: string; readonly scale: number }) => {
    const at = next++;
    return ends[`least${at}`] == null ? own : widened(own, pivot, [nano(ends, `least${at}`), nano(ends, `most${at}`)]);
  };
  return metrics.map(({ y, paired }) => ({ y: scale(y), x: paired === null ? 1 : scale(paired.x) }));
}

interface Tables {
  readonly of: CellTable;
  readonly joint: JointTable | null;
}

async function tablesApart(
  metrics: readonly MeasuredMetric[],
  scales: readonly Scales[],
  over: Over,
  engine: Engine,
  dialect: Dialect,
): Promise<Tables[]> {
  const ys = metrics.map(({ y }, m) => measured(y.x, y.pivot, scales[m]?.y ?? y.scale, [], dialect));
  const xs = metrics.flatMap(({ paired }, m) =>
    paired === null ? [] : [{ m, x: measured(paired.x.x, paired.x.pivot, scales[m]?.x ?? 1, [], dialect) }],
  );
  const tables = await decimalTables(
    [...ys, ...xs.map(({ x }) => x)].map((measure) => ({ measure, over })),
    engine,
  );
  const pairs = xs.flatMap(({ m, x }, i) => {
    const [y, ofY, ofX] = [ys[m], tables[m], tables[ys.length + i]];
    return y === undefined || ofY === undefined || ofX === undefined ? [] : [{ y, x, over, ofY, ofX }];
  });
  const joints = await jointTables(pairs, engine, dialect);
  return metrics.map((_, m) => {
    const of = tables[m];
    if (of === undefined) throw new Error(`no sums apart for metric ${m}`);
    return { of, joint: joints[xs.findIndex((one) => one.m === m)] ?? null };
  });
}
