import type { Plan, PlanSource, Problem } from "../plan/index.ts";
import { type Engine, wholeOrNull } from "./engine.ts";
import { enrolUnits } from "./enrolUnits.ts";
import { type Layout, unitLineIds } from "./layout.ts";
import { facts, ledger } from "./ledger.ts";
import { levels } from "./levels.ts";
import { metricLedgers, refuseOtherCounts } from "./metricLedger.ts";
import { type MetricValue, metricCells, metricValues } from "./metrics.ts";
import { refuseChanged } from "./readRows.ts";
import { writeRejects } from "./rejects.ts";
import { hoursOfUnits } from "./rowsByHour.ts";
import { openSession, type Session } from "./session.ts";
import { sinceEnrolment } from "./sinceEnrolment.ts";
import { soundness } from "./soundness.ts";
import { candidates, type Dialect, duckdb, enrolmentRange, matched, name, units } from "./sql/index.ts";
import type { Reduction } from "./types.ts";
import { type Opened, type ReduceOptions, withLog } from "./withLog.ts";
import { type DayRun, dayAt, dayRuns, type Step } from "./zone.ts";

/** The reduction of a log, without what can be asked afterwards. */
export const reduce = (planned: Plan | null, source: PlanSource, folder: string, options: ReduceOptions = {}) =>
  withReduction(planned, source, folder, options, async (_plan, reduction) => ({ reduction }));

/**
 * The log of a plan, reduced to cells and counts, while the engine still holds the units: what needs a figure of these
 * sums first (an adjusted value, an order statistic) is asked of the session.
 * @param planned the plan, or null where it has mistakes: then only the log's own problems are looked for
 * @returns what `use` gives, or what is wrong between plan and log
 * @throws UnusableLog when the log is there but cannot be used
 */
export function withReduction<T>(
  planned: Plan | null,
  source: PlanSource,
  folder: string,
  options: ReduceOptions,
  use: (plan: Plan, reduction: Reduction, session: Session) => Promise<T>,
): Promise<T | { problems: readonly Problem[] }> {
  return withLog(planned, source, folder, options, async (plan, opened) => {
    const { reduction, values } = await stages(plan, folder, opened, duckdb, options);
    return use(plan, reduction, openSession(plan, values, opened.engine, duckdb));
  });
}

async function stages(
  plan: Plan,
  folder: string,
  opened: Opened,
  dialect: Dialect,
  options: ReduceOptions,
): Promise<{ reduction: Reduction; values: MetricValue[] }> {
  const { log, engine } = opened;
  const enrolled = await enrolUnits(plan, folder, opened, dialect, options);
  const {
    layout,
    zone,
    groups,
    lists,
    perFile,
    fingerprints,
    firstUs,
    lastUs,
    span,
    spans,
    hours,
    key,
    logEndUs,
    stage,
  } = enrolled;
  stage("adding up each unit", 0.75);
  const subgroups = await levels(plan, layout, engine, dialect);
  const levelCodes = subgroups.map(({ code }) => code);
  const days = dayRuns(plan.timezone, firstUs ?? 0n, lastUs ?? 0n);
  const firstDay = await firstEnrolmentDay(plan, layout, days, engine);
  await engine.run(matched(plan, layout));
  await engine.run(candidates(plan, layout, days, firstDay, levelCodes, logEndUs, dialect));
  await engine.run(units());
  stage("adding up cells", 0.9);
  const values = await metricValues(plan, layout, engine, dialect);
  const groupings = { day: layout.hasTime ? name("day") : null, levels: subgroups.map((_, s) => name(`k${s}`)) };
  const { ledgers, counted } = await metricLedgers(plan, layout, engine);
  const { metrics, groups: grouped } = await metricCells(plan, values, groupings, counted, engine, dialect);
  const since = await sinceEnrolment(plan, layout, values, logEndUs, engine, dialect);
  const ofUnits = layout.hasTime ? await hoursOfUnits(plan, layout, span, engine) : [];
  const account = await ledger(plan, layout, ofUnits, engine);
  await refuseOtherCounts(plan, layout, ledgers, engine);
  const found = await facts(plan, layout, engine, logEndUs);
  const bySubgroup = subgroups.map((subgroup) => subgroup.found);
  const sound = await soundness(
    plan,
    { layout, key, days, levels: levelCodes, spans, hours, rowsOfUnits: ofUnits, span, logEndUs, account },
    found.enrolled,
    engine,
  );
  const prints = await fingerprints;
  if (options.rejectsTo !== undefined) {
    await writeRejects(options.rejectsTo, { plan, layout, files: log.files, groups, zone }, engine, dialect);
  }
  await refuseChanged(log);
  stage("done", 1);
  const reduction = {
    engine: { name: engine.name, version: engine.version },
    inputs: log.files.map((file, i) => ({
      name: file.name,
      bytes: prints[i]?.bytes ?? 0,
      sha256: prints[i]?.sha256 ?? "",
      rows: perFile[i] ?? 0,
    })),
    lists,
    ...account,
    facts: {
      ...found,
      subgroups: bySubgroup.slice(0, plan.subgroups.length),
      subgroupsAfterwards: bySubgroup.slice(plan.subgroups.length),
      soundness: sound,
    },
    metrics,
    groups: grouped.map((group, m) => ({ ...group, sinceEnrolment: since[m] ?? null })),
    metricLedgers: ledgers,
  };
  return { reduction, values };
}

/** The local day on which the first analysed unit was enrolled. */
async function firstEnrolmentDay(
  plan: Plan,
  layout: Layout,
  days: readonly Step<DayRun>[],
  engine: Engine,
): Promise<number | null> {
  if (!layout.hasTime) return null;
  const [range = {}] = await engine.query(enrolmentRange(unitLineIds(plan).length - 1));
  const firstUs = wholeOrNull(range, "first_us");
  return firstUs === null ? null : dayAt(firstUs, days);
}
