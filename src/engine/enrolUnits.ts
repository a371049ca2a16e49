import type { Plan } from "../plan/index.ts";
import { wholeOrNull } from "./engine.ts";
import { layout as layoutOf } from "./layout.ts";
import { rowsPerFile } from "./ledger.ts";
import { readLists } from "./lists.ts";
import { logEnd } from "./logEnd.ts";
import { inputFingerprints, readRows, refuseWithoutRows } from "./readRows.ts";
import { hoursOfLog } from "./rowsByHour.ts";
import {
  atEnrolment,
  copies,
  type Dialect,
  enrolmentKey,
  enrolments,
  markDuplicates,
  needsEnrollingRow,
  seen,
  timeRange,
} from "./sql/index.ts";
import type { Opened, ReduceOptions } from "./withLog.ts";
import { offsetsByLocalTime } from "./zone.ts";

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
