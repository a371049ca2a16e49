import { copyFileSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { type ReportJson, verify } from "../../src/index.ts";
import { type Bench, bench, filesOf, LOG, PLAN, STAFF } from "./small.ts";

let on: Bench;
beforeEach(() => {
  on = bench();
});
afterEach(() => on.remove());

async function reported(plan: string, options?: { previous?: string }): Promise<ReportJson> {
  const outcome = await on.run(plan, options);
  if (outcome.status !== 0) throw new Error(outcome.text);
  return outcome.report;
}
const history = () => readdirSync(join(on.report, "history")).sort();

describe("a rerun", () => {
  it("keeps the earlier report as it was, and names it by its fingerprint", async () => {
    expect((await reported(PLAN)).changes).toBeNull();
    const first = filesOf(on.report);
    const { changes } = await reported(PLAN + STAFF);
    expect(changes).toMatchObject({ run: 2, log: [], rule: [], plan: [{ place: "filters, staff", kind: "added" }] });
    const [kept = ""] = history();
    expect(kept).toBe(`1-${changes?.replaces.slice(0, 8)}`);
    const { "rejects.csv": _rejects, ...rest } = first;
    expect(filesOf(join(on.report, "history", kept))).toEqual(rest);
  });

  it("of the same plan and log leaves every file as it is, byte for byte, history/ included, however often", async () => {
    await reported(PLAN);
    const first = filesOf(on.report);
    await reported(PLAN);
    expect(filesOf(on.report)).toEqual(first);
    await reported(PLAN + STAFF);
    const second = filesOf(on.report);
    for (let i = 0; i < 2; i++) await reported(PLAN + STAFF);
    expect(filesOf(on.report)).toEqual(second);
  });

  // figures of the report before lay beside the new one, and could be pasted as its own
  it("takes the earlier report's figures with it into history/, and has none beside it but its own", async () => {
    const isExtra = (name: string) => /^(figures\/|page-one|decision)/.test(name);
    const extras = () => Object.fromEntries(Object.entries(filesOf(on.report)).filter(([name]) => isExtra(name)));
    await on.run(PLAN, { figures: true });
    const first = extras();
    expect(Object.keys(first)).toContain("figures/forest.svg");
    await reported(PLAN); // the same report to the byte: they are its own
    expect(extras()).toEqual(first);
    await reported(PLAN + STAFF);
    expect(extras()).toEqual({});
    expect(readdirSync(on.report)).not.toContain("figures");
    const [kept = ""] = history();
    expect(filesOf(join(on.report, "history", kept))).toMatchObject(first);
    await on.run(PLAN + STAFF, { figures: true });
    expect(Object.keys(extras()).sort()).toEqual([...Object.keys(first), "figures/before-after.svg"].sort());
    expect(extras()["decision.csv"]).not.toBe(first["decision.csv"]);
  });

  it("holds the rule to the first run's, not only to the run before", async () => {
    await reported(PLAN);
    await reported(PLAN.replace("5%", "3%"));
    const third = await reported(PLAN.replace("5%", "3%") + STAFF);
    expect(third.changes?.plan.map(({ place }) => place)).toEqual(["filters, staff"]);
    expect(third.changes?.rule).toMatchObject([{ place: "metrics, Stopped: worthwhile", before: "{relative: 5%}" }]);
    expect(third.checks.find(({ id }) => id === "plan-changed")).toMatchObject({ strong: true });
    const back = await reported(PLAN + STAFF);
    expect(back.changes?.rule).toEqual([]);
  });

  it("says which change did it: each alone and added in order, the last one being the report itself", async () => {
    await reported(PLAN);
    const plan = PLAN.replace("{at: 30}", "{at: 10}") + STAFF;
    const { changes, effects } = await reported(plan);
    const [cap, staff] = changes?.steps?.changes ?? [];
    const of = (step: typeof cap, how: "alone" | "added", metric: string) =>
      step?.[how]?.effects.find((effect) => effect.metric === metric)?.estimate;
    expect([cap?.change, staff?.change]).toEqual(["metrics, Minutes: cap", "filters, staff: added"]);
    // a cap of minutes does not move who stopped; the filter does not know of caps
    expect(of(cap, "alone", "Stopped")).toBe(changes?.steps?.start.effects[0]?.estimate);
    expect(of(staff, "added", "Stopped")).toBe(effects[0]?.difference.estimate);
    expect(of(staff, "alone", "Stopped")).toBe(effects[0]?.difference.estimate);
    // as if each had been the only change, in a folder of its own
    const alone = bench();
    const outcome = await alone.run(PLAN + STAFF);
    alone.remove();
    if (outcome.status !== 0) throw new Error(outcome.text);
    expect(of(staff, "alone", "Minutes")).toBe(outcome.report.effects[1]?.difference.estimate);
    expect(staff?.alone?.analysed).toEqual(outcome.report.flow.analysed);
  });

  it("tells a changed file of the log from a changed plan, and starts the steps with the earlier plan on the new log", async () => {
    await reported(PLAN);
    writeFileSync(join(on.folder, "log.csv"), LOG.split("\n").slice(0, -40).join("\n"));
    const { changes } = await reported(PLAN + STAFF);
    expect(changes?.log).toMatchObject([{ name: "log.csv", before: { rows: 600 }, after: { rows: 560 } }]);
    expect(changes?.steps?.start.analysed).toEqual({ old: 300, new: 260 });
    expect(changes?.steps?.changes).toMatchObject([{ change: "filters, staff: added" }]);
  });

  it("compares with the report that is named, which is kept too, or with none", async () => {
    await reported(PLAN);
    copyFileSync(join(on.report, "report.json"), join(on.folder, "old.json"));
    await reported(PLAN + STAFF);
    rmSync(on.report, { recursive: true });
    const named = await reported(PLAN.replace("{at: 30}", "{at: 10}"), { previous: join(on.folder, "old.json") });
    expect(named.changes).toMatchObject({ run: 2, plan: [{ place: "metrics, Minutes: cap" }] });
    expect(history()).toEqual([`1-${named.changes?.replaces.slice(0, 8)}`]);
    expect((await reported(PLAN + STAFF, { previous: "none" })).changes).toBeNull();
    expect(history()).toHaveLength(2);
  });

  it.each([
    ["is not there", "gone.json", /cannot be read/],
    ["is no report", "log.csv", /is no report\.json/],
  ])("is refused with status 2 where the report that is named %s, and nothing is written", async (_, name, words) => {
    await reported(PLAN);
    const before = filesOf(on.report);
    expect(await on.run(PLAN + STAFF, { previous: join(on.folder, name) })).toMatchObject({
      status: 2,
      text: expect.stringMatching(words),
    });
    expect(filesOf(on.report)).toEqual(before);
    expect(readdirSync(on.folder).sort()).toEqual(["log.csv", "plan.yaml", "report"]);
  });

  it("is refused where the report it had replaced is gone from history/, since it could not be the same", async () => {
    await reported(PLAN);
    await reported(PLAN + STAFF);
    rmSync(join(on.report, "history"), { recursive: true });
    expect(await on.run(PLAN + STAFF)).toMatchObject({ status: 2, text: expect.stringContaining("--previous") });
  });

  it("is refused where report.json is not one any more, unless it is told to start afresh", async () => {
    await reported(PLAN);
    const file = join(on.report, "report.json");
    writeFileSync(file, readFileSync(file, "utf8").replace('"effects"', '"efects"'));
    expect(await on.run(PLAN + STAFF)).toMatchObject({ status: 2, text: expect.stringContaining("--previous none") });
    expect((await reported(PLAN + STAFF, { previous: "none" })).changes).toBeNull();
  });
});

describe("a rerun, verified", () => {
  it("holds, and so does every report in history/, from wherever it lies", async () => {
    await reported(PLAN);
    await reported(PLAN + STAFF);
    await reported(PLAN.replace("{at: 30}", "{at: 10}"));
    for (const name of ["report.html", ...history().map((run) => `history/${run}/report.html`)]) {
      expect(await verify(join(on.report, name)), name).toMatchObject({ status: 0 });
    }
  });

  it("cannot be shown to hold where the report it replaced is not kept any more", async () => {
    await reported(PLAN);
    await reported(PLAN + STAFF);
    rmSync(join(on.report, "history"), { recursive: true });
    expect(await verify(join(on.report, "report.html"))).toMatchObject({
      status: 4,
      text: expect.stringMatching(/replaces the report with the fingerprint [0-9a-f]{64}/),
    });
  });
});
