/**
 * `npm run bench`: closeout against hand-written SQL on the same log, in turn, in one run. Ratios and medians of processor
 * time: a machine that is shared changes its speed, and both feel it alike.
 *
 * The rival is what a careful analyst writes for one mean and one proportion: enrolment by min(time), follow-up, sums of x
 * and x^2 in doubles; no duplicates, no rejects, no ledger, no exactness.
 */
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { DuckDBInstance } from "@duckdb/node-api";
import { reduce } from "../../src/engine/index.ts";
import { loadPlan } from "../../src/plan/index.ts";

const ROWS = Number(process.env.ROWS ?? 2_000_000);
const RUNS = Number(process.env.RUNS ?? 5);

const folder = await mkdtemp(path.join(os.tmpdir(), "closeout-bench-"));
try {
  await writeLog(folder);
  for (const format of ["parquet", "csv"] as const) {
    for (const [what, eventId] of [
      ["with duplicates looked for", true],
      ["without event ids", false],
    ] as const) {
      const ours = () => closeoutSeconds(planOf(format, eventId));
      const theirs = () => sqlSeconds(format);
      await ours();
      await theirs();
      const pairs: { ours: number; theirs: number }[] = [];
      for (let run = 0; run < RUNS; run++) pairs.push({ ours: await ours(), theirs: await theirs() });
      const ratio = median(pairs.map((pair) => pair.ours / pair.theirs));
      const seconds = `${median(pairs.map((pair) => pair.ours)).toFixed(2)} s against ${median(pairs.map((pair) => pair.theirs)).toFixed(2)} s`;
      process.stdout.write(
        `${format}, ${ROWS} rows, ${what}: ${ratio.toFixed(2)} times the plain statements (${seconds})\n`,
      );
    }
  }
  process.stdout.write(`peak memory ${Math.round(process.resourceUsage().maxRSS / 1024)} MiB\n`);
} finally {
  await rm(folder, { recursive: true, force: true });
}

async function writeLog(to: string): Promise<void> {
  const connection = await (await DuckDBInstance.create(":memory:")).connect();
  const units = Math.round(ROWS / 10);
  await connection.run(`
    CREATE TABLE log AS
    SELECT 'e' || i AS id, 'u' || u AS visitor, TIMESTAMP '2026-03-02' + to_microseconds(CAST((i * 1209600.0 / ${ROWS}) * 1000000 AS BIGINT)) AS "at",
      CASE WHEN i % 5 = 0 THEN 'search_opened' WHEN i % 17 = 0 THEN 'booking' ELSE 'page_view' END AS event,
      CASE WHEN hash(u) % 2 = 0 THEN 'list' ELSE 'calendar' END AS arm,
      CASE WHEN i % 17 = 0 THEN CAST(i % 977 AS DECIMAL(9, 2)) END AS fare
    FROM (SELECT range AS i, (hash(range) % ${units}) AS u FROM range(${ROWS}))`);
  await connection.run(`COPY log TO '${path.join(to, "log.parquet")}' (FORMAT parquet)`);
  await connection.run(
    `COPY (SELECT * REPLACE (strftime("at", '%Y-%m-%dT%H:%M:%S.%gZ') AS "at") FROM log) TO '${path.join(to, "log.csv")}' (FORMAT csv, HEADER)`,
  );
}

function planOf(format: string, eventId: boolean): string {
  return `
experiment: Bench
question: How fast?
log:
  - files: log.${format}
    columns: {unit: visitor, time: at, event: event, variant: arm${eventId ? ", event-id: id" : ""}}
enrolment: {event: search_opened, from: 2026-03-02, before: 2026-03-09}
variants: [{name: list, control: true}, {name: calendar}]
follow-up: {days: 7, incomplete: keep}
metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}
  - {name: Fare, summary: mean, of: {event: booking, sum: fare}}
`;
}

async function closeoutSeconds(planText: string): Promise<number> {
  await writeFile(path.join(folder, "plan.yaml"), planText);
  const loaded = loadPlan(planText);
  if (!("plan" in loaded)) throw new Error("the bench's plan has mistakes");
  const from = process.cpuUsage();
  const outcome = await reduce(loaded.plan, loaded.source, folder);
  if ("problems" in outcome) throw new Error("the bench's log has problems");
  return secondsSince(from);
}

async function sqlSeconds(format: string): Promise<number> {
  const instance = await DuckDBInstance.create(":memory:");
  const connection = await instance.connect();
  const log = path.join(folder, `log.${format}`);
  const from = process.cpuUsage();
  await connection.runAndReadAll(`
    WITH log AS (SELECT visitor, "at", event, arm, fare FROM '${log}'),
    enrolled AS (
      SELECT visitor, min("at") AS since, arg_min(arm, "at") AS arm FROM log
      WHERE event = 'search_opened' GROUP BY visitor
      HAVING min("at") >= TIMESTAMP '2026-03-02' AND min("at") < TIMESTAMP '2026-03-09'
    ), units AS (
      SELECT e.visitor, any_value(e.arm) AS arm, max(CASE WHEN event = 'booking' THEN 1 ELSE 0 END) AS booked,
        sum(CASE WHEN event = 'booking' THEN CAST(fare AS DOUBLE) ELSE 0 END) AS fare
      FROM log JOIN enrolled AS e ON e.visitor = log.visitor
      WHERE "at" >= since AND "at" < since + INTERVAL 7 DAY
      GROUP BY e.visitor
    )
    SELECT arm, count(*), avg(booked), avg(fare), var_samp(fare) FROM units GROUP BY arm`);
  const seconds = secondsSince(from);
  connection.closeSync();
  instance.closeSync();
  return seconds;
}

function secondsSince(from: NodeJS.CpuUsage): number {
  const { user, system } = process.cpuUsage(from);
  return (user + system) / 1e6;
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[sorted.length >> 1] ?? Number.NaN;
}
