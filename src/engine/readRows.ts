import type { Plan } from "../plan/index.ts";
import { list, plural } from "../words/index.ts";
import { contentOf, isWhole } from "./compression.ts";
import { count, type Engine, type Row } from "./engine.ts";
import { fingerprint, type LogFile, states } from "./files.ts";
import { FATE, type Layout } from "./layout.ts";
import { reasonText } from "./ledger.ts";
import type { OpenLog } from "./open.ts";
import { delimiterOf } from "./records.ts";
import { rewritten } from "./rewrite.ts";
import type { FileGroup } from "./source.ts";
import {
  brokenQuotes,
  type Dialect,
  forgetRows,
  linesWithSurplus,
  REASON,
  rows,
  rowsByReason,
  sql,
  unreadableRows,
} from "./sql/index.ts";
import { surplusFinder } from "./surplus.ts";
import { firstLine, notWhole, UnusableLog } from "./unusable.ts";
import type { Step } from "./zone.ts";

/** What is known of a file from its bytes. */
export interface Fingerprint {
  readonly bytes: number;
  readonly sha256: string;
  /** Whether it has rows with empty cells more than the header; null where its text was not looked at. */
  readonly surplus: boolean | null;
}

/** Of every file, one after the other; a compressed file that ends early stops the run. */
export function inputFingerprints(log: OpenLog): Promise<Fingerprint>[] {
  let before: Promise<unknown> = Promise.resolve();
  return log.files.map((file, index) => {
    const own = before.then(() => fingerprintOf(log, file, index));
    // A failure is met where it is awaited; until then it must not count as unhandled.
    own.catch(() => undefined);
    before = own;
    return own;
  });
}

async function fingerprintOf(log: OpenLog, { name, path, format }: LogFile, index: number): Promise<Fingerprint> {
  const group = log.groups.find(({ files }) => files.some((member) => member.index === index));
  const finder =
    group !== undefined && (format === "csv" || format === "tsv")
      ? surplusFinder(delimiterOf(format), group.columns.length)
      : null;
  const whole = await isWhole(path, finder?.add);
  if (whole === false) throw await notWhole(name, path);
  const print = await fingerprint(path, whole === null ? finder?.add : undefined);
  const isSeen = whole === null || /\.gz$/i.test(path);
  return { ...print, surplus: finder === null ? false : isSeen ? finder.end() : null };
}

/** Reads every group into `rows`; gives the groups as they were read in the end. */
export async function readRows(
  plan: Plan,
  layout: Layout,
  log: OpenLog,
  zone: readonly Step<bigint>[],
  workFolder: string,
  engine: Engine,
  dialect: Dialect,
  prints: readonly Promise<Fingerprint>[],
  signal: AbortSignal | undefined,
): Promise<FileGroup[]> {
  const groups: FileGroup[] = [];
  const read = async (group: FileGroup, into: "create" | "insert") => {
    await engine.run(rows(plan, layout, group, into, zone, dialect));
    if (group.format !== "parquet") await engine.run(unreadableRows(group));
  };
  for (const [i, group] of log.groups.entries()) {
    try {
      groups.push(await readGroup(group, i === 0 ? "create" : "insert", read, prints, workFolder, engine));
      await dropRejects(engine);
    } catch (cause) {
      signal?.throwIfAborted();
      if (cause instanceof UnusableLog) throw cause;
      const names = group.files.map((file) => log.files[file.index]?.name ?? "").join(", ");
      const told = group.files.reduce(
        (text, file) => text.replaceAll(file.path, log.files[file.index]?.name ?? ""),
        firstLine(cause, workFolder, ""),
      );
      throw new UnusableLog(`The engine could not read ${names}: ${told}`, { cause });
    }
  }
  return groups;
}

/**
 * One group, or a copy of it in one form where the engine's reader refuses its files or cannot be trusted with them: behind
 * a cell whose quote closes in its middle it may take two records for one, or cut the next one elsewhere; and it lets rows
 * pass that have empty cells more than the header.
 */
async function readGroup(
  group: FileGroup,
  into: "create" | "insert",
  read: (group: FileGroup, into: "create" | "insert") => Promise<void>,
  prints: readonly Promise<Fingerprint>[],
  workFolder: string,
  engine: Engine,
): Promise<FileGroup> {
  const isText = group.format === "csv" || group.format === "tsv";
  let next = into;
  try {
    await read(group, into);
    if (!isText || !((await hasBrokenQuotes(engine)) || (await hasSurplus(group, prints, engine)))) return group;
    await engine.run(forgetRows(group));
    next = "insert";
  } catch (cause) {
    if (!isText || !isRefusal(cause)) throw cause;
  }
  await dropRejects(engine);
  const copy = await rewritten(group, workFolder);
  await read(copy, next);
  return copy;
}

const hasBrokenQuotes = async (engine: Engine) =>
  (await engine.query(brokenQuotes())).some((row) => count(row, "records") > 0);

/** Zstandard is unpacked by the engine first, which says whether any line may have it: it is quicker at that. */
async function hasSurplus(group: FileGroup, prints: readonly Promise<Fingerprint>[], engine: Engine): Promise<boolean> {
  const delimiter = delimiterOf(group.format);
  for (const { index, path } of group.files) {
    const surplus = (await prints[index])?.surplus ?? null;
    if (surplus === true) return true;
    if (surplus === false) continue;
    const [lines] = await engine.query(linesWithSurplus(delimiter, group.columns.length, path));
    if (lines === undefined || count(lines, "lines") === 0) continue;
    const finder = surplusFinder(delimiter, group.columns.length);
    for await (const piece of contentOf(path)) finder.add(piece);
    if (finder.end()) return true;
  }
  return false;
}

/** The reader gives up on a whole file that mixes line ends. */
const isRefusal = (cause: unknown) => cause instanceof Error && cause.message.includes("reached an invalid state");

async function dropRejects(engine: Engine): Promise<void> {
  await engine.run(sql`DROP TABLE IF EXISTS reject_errors`);
  await engine.run(sql`DROP TABLE IF EXISTS reject_scans`);
}

/** A file that was written to meanwhile: its rows and its fingerprint may be of two moments. */
export async function refuseChanged({ files, opened }: OpenLog): Promise<void> {
  const now = await states(files);
  const changed = files.find((_, i) => now[i] !== opened[i]);
  if (changed !== undefined)
    throw new UnusableLog(`${changed.name} was changed while it was read. Run this again when nothing writes to it.`);
}

/** A log of which no row can be used is refused. */
export async function refuseWithoutRows(log: OpenLog, layout: Layout, engine: Engine): Promise<void> {
  const isReadable =
    log.groups.length > 0 &&
    (await engine.query(sql`SELECT count(*) AS rows FROM rows WHERE fate <> ${FATE.rejected}`)).some(
      (row) => count(row, "rows") > 0,
    );
  if (!isReadable) {
    const rejected = log.groups.length === 0 ? [] : await engine.query(rowsByReason());
    throw new UnusableLog(rejected.length === 0 ? NO_ROWS : noneReadable(rejected, layout));
  }
}

const NO_ROWS = "The log has no rows: its files are empty or hold only a header. Look at the paths in the plan's log.";

/** All reasons, the commonest first, and how what it misses is written. */
function noneReadable(rejected: readonly Row[], layout: Layout): string {
  const reasons = rejected
    .map((row) => ({ reason: count(row, "reason"), rows: count(row, "rows") }))
    .sort((a, b) => b.rows - a.rows || a.reason - b.reason);
  const all = reasons.reduce((sum, { rows }) => sum + rows, 0);
  const told = reasons.map(({ reason, rows }) => `${reasonText(reason, layout)} (${plural(rows, "row", "rows")})`);
  return `None of the log's ${all} rows could be read: ${list(told)}. ${remedyFor(reasons[0]?.reason ?? 0)}`;
}

function remedyFor(reason: number): string {
  if (reason === REASON.notObject)
    return "Each line of such a file is one JSON object: no list around them, no object over several lines.";
  if (reason === REASON.noTime)
    return "A time is written as 2026-03-02T08:15:30, or as a whole number of seconds, milliseconds or microseconds since 1970. Look at the column that the plan names.";
  if (reason >= REASON.outOfRange) return "Numbers of up to 18 digits before the point are read.";
  if (reason >= REASON.notNumber)
    return "A number is written as 1234.5, without a unit or separators. Look at the column that the plan names.";
  return "Look at the columns that the plan names.";
}
