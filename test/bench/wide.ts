/**
 * `npm run bench:wide`: a report of 40 metrics and 5 variants, on a log of 180,000 rows: processor time of the engine, and
 * of all that follows it, which a log of any length costs once.
 */
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { generator } from "../../src/stats/generator.ts";
import { build } from "../cli/built.ts";

// As it is installed: from its source it draws in one thread.
build();
const { closeout }: typeof import("../../src/index.ts") = await import(
  new URL("../../dist/index.js", import.meta.url).href
);

const VARIANTS = ["list", "calendar", "map", "slider", "table"];
const METRICS = 40;
const UNITS = 20_000;
const EVENTS = 20;
const RUNS = Number(process.env.RUNS ?? 3);

const folder = await mkdtemp(path.join(os.tmpdir(), "closeout-bench-"));
try {
  await writeFile(path.join(folder, "log.csv"), log());
  await writeFile(path.join(folder, "plan.yaml"), plan());
  const runs: { engine: number; after: number; wall: number }[] = [];
  for (let run = 0; run <= RUNS; run++) runs.push(await timed());
  const [, ...counted] = runs; // the first compiles
  const median = (of: "engine" | "after" | "wall") =>
    counted.map((run) => run[of]).sort((a, b) => a - b)[Math.floor(counted.length / 2)] ?? Number.NaN;
  process.stdout.write(
    `${METRICS} metrics, ${VARIANTS.length} variants: after the engine ${median("after").toFixed(2)} s of processor time, ${median("wall").toFixed(2)} s by the clock; the engine ${median("engine").toFixed(2)} s of processor time\n`,
  );
} finally {
  await rm(folder, { recursive: true, force: true });
}

async function timed() {
  const start = process.cpuUsage();
  let [engineDone, wallDone] = [0, 0];
  const outcome = await closeout(path.join(folder, "plan.yaml"), {
    out: path.join(folder, "report"),
    progress: ({ stage }) => {
      if (stage !== "done") return;
      engineDone = seconds(process.cpuUsage(start));
      wallDone = performance.now();
    },
  });
  if (outcome.status !== 0) throw new Error(outcome.text);
  const all = seconds(process.cpuUsage(start));
  return { engine: engineDone, after: all - engineDone, wall: (performance.now() - wallDone) / 1000 };
}

function seconds({ user, system }: NodeJS.CpuUsage): number {
  return (user + system) / 1e6;
}

function plan(): string {
  const metrics = Array.from({ length: METRICS }, (_, m) => {
    const role = m === 0 ? "primary" : m < 4 ? "guardrail, margin: {relative: 10%}" : "secondary";
    const of = `event: e${m % EVENTS}`;
    const summary = [
      `proportion, of: {${of}}`,
      `mean, of: {${of}, sum: fare}, cap: {quantile: 0.99}`,
      `ratio-of-totals, of: {${of}, sum: fare}, per: {event: open}`,
    ][m % 3];
    return `  - {name: Metric ${m}, role: ${role}, summary: ${summary}}`;
  });
  return [
    "experiment: Forty measures of five variants",
    "question: What does a report cost after the engine?",
    "log: [{files: log.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}]",
    "enrolment: {event: open}",
    "follow-up: {days: 7}",
    `variants: [${VARIANTS.map((name, v) => `{name: ${name}${v === 0 ? ", control: true" : ""}}`).join(", ")}]`,
    "metrics:",
    ...metrics,
    "",
  ].join("\n");
}

function log(): string {
  const words = generator([20, 26, 3, 2]);
  const uniform = () => (words() + 0.5) / 2 ** 32;
  const start = Date.UTC(2026, 2, 2);
  const day = 86_400_000;
  const rows = Array.from({ length: UNITS }, (_, unit) => {
    let at = start + uniform() * 13 * day;
    const open = `v${unit},${new Date(at).toISOString()},open,${VARIANTS[unit % VARIANTS.length]},`;
    const others = Array.from({ length: 8 }, () => {
      at += (uniform() * day) / 2;
      const fare = (-Math.log(uniform()) * 100).toFixed(2);
      return `v${unit},${new Date(at).toISOString()},e${Math.floor(uniform() * EVENTS)},,${fare}`;
    });
    return [open, ...others].join("\n");
  });
  return ["visitor,at,event,arm,fare", ...rows, `v0,2026-03-25T00:00:00Z,e1,,1`, ""].join("\n");
}
