import { mkdtemp, rm } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { logProblems, noSuchList, type Plan, type PlanSource, type Problem } from "../plan/index.ts";
import { openDuckdb } from "./duckdb.ts";
import { type Engine, wholeOrNull } from "./engine.ts";
import { isFile, neighbours } from "./files.ts";
import { type Layout, layout as layoutOf, unitLineIds } from "./layout.ts";
import { facts, ledger, rowsPerFile } from "./ledger.ts";
import { levels } from "./levels.ts";
import { readLists } from "./lists.ts";
import { logEnd } from "./logEnd.ts";
import { metricLedgers, refuseOtherCounts } from "./metricLedger.ts";
import { type MetricValue, metricCells, metricValues } from "./metrics.ts";
import { type OpenLog, openLog } from "./open.ts";
import { inputFingerprints, readRows, refuseChanged, refuseWithoutRows } from "./readRows.ts";
import { writeRejects } from "./rejects.ts";
import { hoursOfLog, hoursOfUnits } from "./rowsByHour.ts";
import { openSession, type Session } from "./session.ts";
import { sinceEnrolment } from "./sinceEnrolment.ts";
import { soundness } from "./soundness.ts";
import {
  atEnrolment,
  candidates,
  copies,
  type Dialect,
  duckdb,
  enrolmentKey,
  enrolmentRange,
  enrolments,
  markDuplicates,
  matched,
  name,
  needsEnrollingRow,
  seen,
  timeRange,
  units,
} from "./sql/index.ts";
import type { Reduction } from "./types.ts";
import { type DayRun, dayAt, dayRuns, offsetsByLocalTime, type Step } from "./zone.ts";

export interface ReduceOptions {
  readonly threads?: number | undefined;
  readonly memory?: string | undefined;
  /** Where rejects.csv is to be written; nowhere without it. */
  readonly rejectsTo?: string | undefined;
  readonly progress?: ((progress: Progress) => void) | undefined;
  readonly signal?: AbortSignal | undefined;
}
export interface Progress {
  readonly stage: string;
  readonly rows: number;
  /** Of the whole work, roughly; null: not known. */
  readonly share: number | null;
}

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

/** An opened log, and the engine to read it with. */
export interface Opened {
  readonly log: OpenLog;
  readonly engine: Engine;
  /** For what is gone afterwards. */
  readonly workFolder: string;
}

/** Opens a plan's log, uses it and tidies up. @returns what `use` gives, or what is wrong between plan and log */
export async function withLog<T>(
  planned: Plan | null,
  source: PlanSource,
  folder: string,
  options: ReduceOptions,
  use: (plan: Plan, opened: Opened) => Promise<T>,
): Promise<T | { problems: readonly Problem[] }> {
  const workFolder = await mkdtemp(path.join(os.tmpdir(), "closeout-"));
  const engine = await openDuckdb({ threads: options.threads, memory: options.memory, workFolder });
  const stop = () => engine.interrupt();
  options.signal?.addEventListener("abort", stop);
  try {
    const log = await openLog(source, folder, engine, workFolder);
    const problems = [...log.problems, ...logProblems(source, log.found), ...(await missingLists(source, folder))];
    if (planned === null || problems.length > 0) return { problems };
    return await use(planned, { log, engine, workFolder });
  } finally {
    options.signal?.removeEventListener("abort", stop);
    engine.close();
    await rm(workFolder, { recursive: true, force: true });
  }
}

/** Stages 1 to 6: the rows read, their duplicates marked, and the units enrolled. */
export async function enrolUnits(
  plan: Plan,
  folder: string,
  { log, engine, workFolder }: Opened,
  dialect: Dialect,
  options: ReduceOptions,
) {
  const layout = layoutOf(plan, log.groups);
  let rowsRead = 0;
  const stage = (name: string, share: number) => {
    options.signal?.throwIfAborted();
    options.progress?.({ stage: name, rows: rowsRead, share });
  };
  stage("reading the log", 0);
  const prints = inputFingerprints(log);
  const fingerprints = Promise.all(prints);
  // A failure is met where it is awaited; until then it must not count as unhandled.
  fingerprints.catch(() => undefined);
  const zone = offsetsByLocalTime(plan.timezone);
  const groups = await readRows(plan, layout, log, zone, workFolder, engine, dialect, prints, options.signal);
  // A file that ends early is the cause, the missing rows are what comes of it: so the cause is told first.
  await refuseWithoutRows(log, layout, engine).catch(async (error: unknown) => {
    await fingerprints;
    throw error;
  });
  const perFile = await rowsPerFile(log.files.length, engine);
  rowsRead = perFile.reduce((sum, n) => sum + n, 0);
  const lists = await readLists(plan, layout, folder, workFolder, engine);

  if (layout.hasEventId) {
    stage("looking for duplicates", 0.5);
    await engine.run(copies(layout, dialect));
    await engine.run(markDuplicates());
  }
  stage("enrolling units", 0.65);
  const [range = {}] = await engine.query(timeRange());
  const firstUs = wholeOrNull(range, "first_us");
  const lastUs = wholeOrNull(range, "last_us");
  const span = {
    firstUs: wholeOrNull(range, "first_of_all_us") ?? 0n,
    lastUs: wholeOrNull(range, "last_of_all_us") ?? 0n,
  };
  const { spans, hours } = layout.hasTime ? await hoursOfLog(layout, span, engine) : { spans: [], hours: [] };
  const logEndUs = logEnd(spans);
  const key = enrolmentKey(plan, firstUs, lastUs);
  await engine.run(seen(plan, layout, key));
  if (needsEnrollingRow(layout)) await engine.run(atEnrolment(layout, key));
  await engine.run(enrolments(plan, layout, key, logEndUs));
  return {
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
  };
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

async function missingLists(source: PlanSource, folder: string): Promise<Problem[]> {
  const problems = await Promise.all(
    source.lists.map(async ({ filter, file }) =>
      (await isFile(path.resolve(folder, file))) ? [] : [noSuchList(filter, file, await neighbours(file, folder))],
    ),
  );
  return problems.flat();
}
