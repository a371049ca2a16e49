import { execFileSync, spawn } from "node:child_process";
import { existsSync, readdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { build } from "../cli/built.ts";
import { type Bench, bench, filesOf, PLAN, putBack, STAFF } from "./small.ts";

const MAIN = fileURLToPath(new URL("../../dist/cli/main.js", import.meta.url));
const KILLS = 50;
const LANES = 2;

interface Lane {
  readonly on: Bench;
  /** Whether the second run gives the figures as files too; the first does. */
  readonly figures: boolean;
  /** The folder with the first report, and as the second run leaves it. */
  readonly before: Readonly<Record<string, string>>;
  readonly after: Readonly<Record<string, string>>;
  /** How long the second run takes, ms, and how much of that lies behind the engine's last word. */
  readonly took: number;
  readonly writing: number;
}

/** The second run as a child; `done` settles when the engine has said its last word. */
function secondRun({ folder }: Bench, figures: boolean) {
  const options = ["--out", "report", "--threads", "1", ...(figures ? ["--figures"] : [])];
  const child = spawn(process.execPath, [MAIN, "report", "plan.yaml", ...options], {
    cwd: folder,
    stdio: ["ignore", "ignore", "pipe"],
  });
  const ended = new Promise<number | null>((resolve) => child.on("close", resolve));
  const done = new Promise<void>((resolve) => {
    child.stderr.on("data", (text) => String(text).includes("done") && resolve());
    child.on("close", () => resolve());
  });
  return { child, ended, done };
}

async function lane(figures: boolean): Promise<Lane> {
  const on = bench();
  const first = await on.run(PLAN, { figures: true });
  if (first.status !== 0) throw new Error(first.text);
  const before = filesOf(on.report);
  writeFileSync(join(on.folder, "plan.yaml"), PLAN + STAFF);
  const began = performance.now();
  const { ended, done } = secondRun(on, figures);
  await done;
  const engine = performance.now() - began;
  expect(await ended).toBe(0);
  const took = performance.now() - began;
  return { on, figures, before, after: filesOf(on.report), took, writing: took - engine };
}

/** Kills the second run at one moment; half of them while the report is written. */
async function interrupt(
  { on, figures, before, after, took, writing }: Lane,
  i: number,
): Promise<"before" | "after" | "between"> {
  putBack(on.report, before);
  const { child, ended, done } = secondRun(on, figures);
  const share = (i * 0.6180339887) % 1; // spread evenly, however many there are
  if (i % 2 === 0) await wait(share * took);
  else {
    await done;
    await wait(share * writing);
  }
  child.kill(i % 5 === 4 ? "SIGINT" : "SIGKILL");
  await ended;
  const found = filesOf(on.report);
  for (const [name, text] of Object.entries(found)) {
    expect([before[name], after[name]], `${name}, kill ${i}`).toContain(text);
  }
  if (Object.keys(before).every((name) => found[name] === before[name])) return "before";
  if (Object.keys({ ...found, ...after }).every((name) => found[name] === after[name])) return "after";
  // Between two renames, a fraction of a millisecond: report.json is the last, so the next run takes up from there.
  expect(found["report.json"]).toBe(before["report.json"]);
  expect(await secondRun(on, figures).ended).toBe(0);
  expect(filesOf(on.report)).toEqual(after);
  return "between";
}

describe("a run that is interrupted", () => {
  let lanes: Lane[];
  beforeAll(async () => {
    build();
    lanes = [];
    for (let i = 0; i < LANES; i++) lanes.push(await lane(i % 2 === 0));
  });
  afterAll(() => {
    for (const { on } of lanes) on.remove();
  });

  it(`leaves the earlier report as it was, or the new one whole: killed at ${KILLS} moments`, async () => {
    const ends = await Promise.all(
      lanes.map(async (own, l) => {
        const found: string[] = [];
        for (let i = l; i < KILLS; i += LANES) found.push(await interrupt(own, i));
        return found;
      }),
    );
    const all = ends.flat();
    expect(all).toHaveLength(KILLS);
    // most moments lie before the end
    expect(all.filter((end) => end === "before").length).toBeGreaterThan(KILLS / 2);
    // what killed runs left beside the folder goes with the next run
    for (const { on, figures, before, after } of lanes) {
      putBack(on.report, before);
      expect(await secondRun(on, figures).ended).toBe(0);
      expect(filesOf(on.report)).toEqual(after);
      expect(Object.keys(after).filter((name) => /^(figures|page-one|decision)/.test(name)).length > 0).toBe(figures);
      expect(readdirSync(on.folder).sort()).toEqual(["log.csv", "plan.yaml", "report"]);
    }
    // half a minute of two cores to itself; far longer where others work beside it
  }, 900_000);

  // A limit on the size of a file stands for a full disk: the write fails in the middle of the report.
  it("leaves the earlier report as it was when the disk is full, and says so", () => {
    const [own] = lanes;
    if (own === undefined || !existsSync("/bin/sh")) throw new Error("no shell to limit the size of files in");
    putBack(own.on.report, own.before);
    const command = `ulimit -f 40; exec "${process.execPath}" "${MAIN}" report plan.yaml --out report --threads 1`;
    let stderr = "";
    try {
      execFileSync("/bin/sh", ["-c", command], { cwd: own.on.folder, stdio: ["ignore", "ignore", "pipe"] });
    } catch (error) {
      stderr = String((error as { stderr?: Buffer }).stderr);
      expect((error as { status?: number }).status).toBe(2);
    }
    expect(stderr).toMatch(/cannot be written/);
    expect(filesOf(own.on.report)).toEqual(own.before);
    expect(readdirSync(own.on.folder).sort()).toEqual(["log.csv", "plan.yaml", "report"]);
  });
});
