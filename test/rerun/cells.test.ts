import { copyFileSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type ReportJson, verify } from "../../src/index.ts";
import { readCells } from "../../src/kept/file.ts";
import { type Bench, bench, PLAN, STAFF } from "./small.ts";

/** A primary share, an adjusted mean with a cap, a ratio and, in a plan of its own, a quantile. */
const METRICS = `  - name: Minutes a stop
    summary: ratio-of-totals
    of: {sum: minutes}
    per: {sum: stopped}
  - name: Minutes, adjusted
    summary: mean
    of: {sum: minutes}
    adjust-for: {column: past}
`;

/** 24,000 visitors a sign, so that every one of the 1,024 buckets holds 10 or more; or 300. */
function log(visitors: number): string {
  const rows = ["old", "new"].flatMap((sign, s) =>
    Array.from({ length: visitors }, (_, i) => {
      const past = (i * 13) % 29;
      return `${sign}${i},${sign},${Number(i % 10 < 3 + 3 * s)},${((i * 7) % 43) + past},${Number(i % 10 === 9)},${past}`;
    }),
  );
  return ["visitor,sign,stopped,minutes,is_staff,past", ...rows].join("\n");
}

async function reported(on: Bench, plan: string, options?: Parameters<Bench["run"]>[1]): Promise<ReportJson> {
  const outcome = await on.run(plan, options);
  if (outcome.status !== 0) throw new Error(outcome.text);
  return outcome.report;
}

describe.each([
  ["300 visitors a sign, whose buckets are too small to be kept", 300],
  ["40,000 visitors a sign, whose buckets are kept", 40_000],
])("cells.json of %s", (_, visitors) => {
  let on: Bench;
  const plan = PLAN + METRICS + STAFF;
  beforeAll(async () => {
    on = bench();
    writeFileSync(join(on.folder, "log.csv"), log(visitors));
    await reported(on, plan);
  });
  afterAll(() => on.remove());
  const cells = () => readFileSync(join(on.report, "cells.json"), "utf8");

  it("holds no id of a visitor, and is of constant size", () => {
    expect(cells()).not.toMatch(/(old|new)\d/);
    expect(cells().length).toBeLessThan(visitors > 1_000 ? 4_000_000 : 60_000);
  });

  it("keeps sums by bucket only where each holds 10 visitors or more", () => {
    const file = readCells(cells());
    const rows = file?.reduction.metrics.map(({ of, covariate, ratio }) => [of, covariate?.joint, ratio?.joint]) ?? [];
    const counts = rows.flat().flatMap((table) => table?.n ?? []);
    expect(Math.min(...counts)).toBeGreaterThanOrEqual(10);
    expect(counts.length > 2_000).toBe(visitors > 1_000);
  });

  it("gives every statistic again without the log, and says what that does not prove", async () => {
    renameSync(join(on.folder, "log.csv"), join(on.folder, "away"));
    const { status, text } = await verify(join(on.report, "report.html"), { cells: true });
    renameSync(join(on.folder, "away"), join(on.folder, "log.csv"));
    expect(text).toContain("every statistic, the checks, the rule and its conclusion are the same");
    expect(text).toContain("Not proven without the log:");
    expect(/drawn and dealt for Stopped, /.test(text)).toBe(visitors < 1_000);
    expect(status).toBe(0);
  });

  it("shows an edited figure of the report, and an edited sum of its own", async () => {
    const file = join(on.report, "report.html");
    const html = readFileSync(file, "utf8");
    writeFileSync(file, html.replace(/(Stopped: )(\d)/, "$19"));
    expect(await verify(file, { cells: true })).toMatchObject({ status: 4 });
    writeFileSync(file, html);
    const kept = cells();
    writeFileSync(
      join(on.report, "cells.json"),
      kept.replace(/("high1":\{"\$whole":"-?\d)(\d)/, (_all, a, b) => a + ((Number(b) + 1) % 10)),
    );
    expect(await verify(file, { cells: true })).toMatchObject({ status: 4 });
    writeFileSync(join(on.report, "cells.json"), kept);
  });

  it("makes the report with another confidence and another amount, as the log does, without the log", async () => {
    const other = plan.replace("5%", "40%").concat("decision: {confidence: 90%}\n");
    const from = bench();
    rmSync(join(from.folder, "log.csv"));
    copyFileSync(join(on.report, "cells.json"), join(from.folder, "cells.json"));
    const made = await reported(from, other, { fromCells: join(from.folder, "cells.json") });
    const whole = bench();
    writeFileSync(join(whole.folder, "log.csv"), log(visitors));
    const expected = await reported(whole, other);
    expect(made.effects).toEqual(expected.effects);
    expect([made.conclusion, made.flow]).toEqual([expected.conclusion, expected.flow]);
    expect(made.provenance.fromCells).toBe(true);
    expect(readFileSync(join(from.report, "report.html"), "utf8")).toContain("the log was not read");
    // that report holds too, with the log at hand
    expect(await verify(join(from.report, "report.html"), { base: whole.folder })).toMatchObject({ status: 0 });
    from.remove();
    whole.remove();
  });

  it("does not serve a plan that counts others, and says in which place", async () => {
    const outcome = await on.run(PLAN + METRICS, { fromCells: join(on.report, "cells.json") });
    expect(outcome).toMatchObject({ status: 2, text: expect.stringContaining('"filters, staff"') });
    expect(await on.run(plan, { fromCells: join(on.folder, "plan.yaml") })).toMatchObject({
      status: 2,
      text: expect.stringContaining("cannot be read as cells"),
    });
  });
});

describe("cells.json of a quantile and of a rerun", () => {
  it("keeps the ordered values that were asked for and which change did it, and verifies them as kept", async () => {
    const on = bench();
    const quantile = "  - {name: Long, summary: quantile, quantile: 0.9, of: {sum: minutes}}\n";
    await reported(on, PLAN + quantile);
    await reported(on, PLAN.replace("{at: 30}", "{at: 10}") + quantile + STAFF);
    rmSync(join(on.folder, "log.csv"));
    const { status, text } = await verify(join(on.report, "report.html"), { cells: true });
    expect(text).toContain("which change did it (section 2): taken as kept");
    expect(status).toBe(0);
    on.remove();
  });
});

it("keeps what the best two of several variants need of each other", async () => {
  const on = bench();
  const three = ["old", "new", "third"].flatMap((sign, s) =>
    Array.from({ length: 400 }, (_, i) => `${sign}${i},${sign},${Number(i % 10 < 2 + 2 * s)},${(i * 7) % 43},0`),
  );
  writeFileSync(join(on.folder, "log.csv"), ["visitor,sign,stopped,minutes,is_staff", ...three].join("\n"));
  const plan = `${PLAN.replace("  - {name: new}\n", "  - {name: new}\n  - {name: third}\n")}decision: {interval: skew-corrected}\n`;
  const { conclusion } = await reported(on, plan);
  expect(conclusion.reasons.join(" ")).toContain("Between the two");
  expect(await verify(join(on.report, "report.html"), { cells: true })).toMatchObject({ status: 0 });
  on.remove();
});
