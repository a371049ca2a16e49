import type { Plan } from "../plan/index.ts";
import { isWhole } from "./compression.ts";
import { count, type Engine } from "./engine.ts";
import { fingerprint } from "./files.ts";
import { FATE, type Layout } from "./layout.ts";
import { rowsPerFile } from "./ledger.ts";
import type { OpenLog } from "./open.ts";
import { rewritten } from "./rewrite.ts";
import type { FileGroup } from "./source.ts";
import { type Dialect, rows, sql, unreadableRows } from "./sql/index.ts";
import { endsEarly, firstLine, UnusableLog } from "./unusable.ts";
import type { Step } from "./zone.ts";

/** Bytes and hash of every file, one after the other; a compressed file that ends early stops the run. */
export async function inputFingerprints(log: OpenLog): Promise<{ bytes: number; sha256: string }[]> {
  const prints: { bytes: number; sha256: string }[] = [];
  for (const file of log.files) {
    if ((await isWhole(file.path)) === false) throw endsEarly(file.name);
    prints.push(await fingerprint(file.path));
  }
  return prints;
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
  signal: AbortSignal | undefined,
): Promise<FileGroup[]> {
  const groups: FileGroup[] = [];
  for (const [i, found] of log.groups.entries()) {
    const read = (group: FileGroup) =>
      engine.run(rows(plan, layout, group, i === 0 ? "create" : "insert", zone, dialect));
    const names = found.files.map((file) => log.files[file.index]?.name ?? "").join(", ");
    let group = found;
    try {
      await read(group).catch(async (cause: unknown) => {
        if (!isRefused(group, cause)) throw cause;
        await dropRejects(engine);
        group = await rewritten(group, workFolder);
        await read(group);
      });
    } catch (cause) {
      signal?.throwIfAborted();
      const told = group.files.reduce(
        (text, file) => text.replaceAll(file.path, log.files[file.index]?.name ?? ""),
        firstLine(cause, workFolder, ""),
      );
      throw new UnusableLog(`The engine could not read ${names}: ${told}`, { cause });
    }
    groups.push(group);
    if (group.format !== "parquet") {
      await engine.run(unreadableRows(group));
      await dropRejects(engine);
    }
  }
  return groups;
}

/** The reader gives up on a whole file that mixes line ends. */
const isRefused = (group: FileGroup, cause: unknown) =>
  (group.format === "csv" || group.format === "tsv") &&
  cause instanceof Error &&
  cause.message.includes("reached an invalid state");

async function dropRejects(engine: Engine): Promise<void> {
  await engine.run(sql`DROP TABLE IF EXISTS reject_errors`);
  await engine.run(sql`DROP TABLE IF EXISTS reject_scans`);
}

/** A log of which no row can be used is refused. */
export async function refuseWithoutRows(log: OpenLog, engine: Engine): Promise<void> {
  const isReadable =
    log.groups.length > 0 &&
    (await engine.query(sql`SELECT count(*) AS rows FROM rows WHERE fate <> ${FATE.rejected}`)).some(
      (row) => count(row, "rows") > 0,
    );
  if (!isReadable) {
    const rejected =
      log.groups.length === 0 ? 0 : (await rowsPerFile(log.files.length, engine)).reduce((a, b) => a + b, 0);
    throw new UnusableLog(
      rejected === 0
        ? "The log has no rows: its files are empty or hold only a header. Look at the paths in the plan's log."
        : `None of the log's ${rejected} rows could be read. Look at the columns and the time format that the plan names.`,
    );
  }
}
