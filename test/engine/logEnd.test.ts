import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Layout } from "../../src/engine/layout.ts";
import { logEnd } from "../../src/engine/logEnd.ts";
import { hoursOfLog } from "../../src/engine/rowsByHour.ts";
import { join, sql } from "../../src/engine/sql/index.ts";
import { ascending } from "../oracle/number.ts";
import { inEngine } from "./duck.ts";

const DAY = 86_400_000_000n;
interface LogRow {
  readonly source: number;
  readonly atUs: bigint;
  readonly counted: boolean;
}

/** The log's end as the product finds it: hours from the rows, then the runs of hours. */
function endOf(rows: readonly LogRow[]): Promise<bigint | null> {
  return inEngine(async (engine) => {
    await engine.run(sql`CREATE TABLE rows (source SMALLINT, at_us BIGINT, m0 BOOLEAN, fate SMALLINT)`);
    if (rows.length > 0) {
      const values = rows.map(({ source, atUs, counted }) => sql`(${source}, ${atUs}, ${counted}, 0)`);
      // A rejected row lies far outside, and says nothing about the end.
      await engine.run(sql`INSERT INTO rows VALUES ${join([...values, sql`(0, ${900_000n * DAY}, TRUE, 1)`], ", ")}`);
    }
    const times = rows.map(({ atUs }) => atUs).sort(ascending);
    const span = { firstUs: times[0] ?? 0n, lastUs: times.at(-1) ?? 0n };
    const { spans } = await hoursOfLog({ matches: [{}] } as unknown as Layout, span, engine);
    return logEnd(spans);
  });
}

/** DESIGN 4, rule 7, row by row. */
function endByRule(rows: readonly LogRow[]): bigint | null {
  const counting = new Set(rows.filter(({ counted }) => counted).map(({ source }) => source));
  const sources = [...new Set(rows.map(({ source }) => source))];
  const ends = sources
    .filter((source) => counting.size === 0 || counting.has(source))
    .map((source) => {
      const times = rows.filter((row) => row.source === source).map(({ atUs }) => atUs);
      times.sort(ascending);
      const runs: bigint[][] = [];
      for (const [i, at] of times.entries()) {
        if (i === 0 || at - (times[i - 1] ?? at) > 7n * DAY) runs.push([]);
        runs.at(-1)?.push(at);
      }
      const most = Math.max(...runs.map((run) => run.length));
      return (
        runs
          .filter((run) => run.length === most)
          .at(-1)
          ?.at(-1) ?? 0n
      );
    });
  return ends.sort(ascending)[0] ?? null;
}

const rows = (source: number, ...days: number[]): LogRow[] =>
  days.map((day) => ({ source, atUs: BigInt(Math.round(day * 1e6)) * (DAY / 1_000_000n), counted: false }));
const counted = (source: number, ...days: number[]): LogRow[] =>
  rows(source, ...days).map((row) => ({ ...row, counted: true }));

describe("the end of the log", () => {
  it.each([
    ["is the last time of its rows", rows(0, 1, 2, 3), 3],
    ["goes on over a gap of exactly 7 days", rows(0, 1, 8), 8],
    ["stops before a longer gap, where more rows lie before it", rows(0, 1, 1.5, 9), 1.5],
    ["is past the gap where more rows lie after it", rows(0, 1, 9, 9.5), 9.5],
    ["takes the later of runs with equally many rows", rows(0, 1, 2, 20, 21), 21],
    ["takes the later of three such runs", rows(0, 1, 20, 40), 40],
    ["is the earliest of the sources'", [...rows(0, 1, 5), ...rows(1, 1, 4)], 4],
    ["leaves out sources that no metric counts", [...rows(0, 1, 2), ...counted(1, 1, 9)], 9],
    ["takes a source with one counted row whole", [...rows(0, 1, 2), ...counted(0, 1), ...rows(1, 0.5)], 2],
    ["lies before 1970 like any other", rows(0, -20, -19.5, -1), -19.5],
    ["goes over 1970 without a break", rows(0, -6.9, 0.1), 0.1],
  ])("%s", async (_, log, day) => {
    const end = BigInt(Math.round(day * 1e6)) * (DAY / 1_000_000n);
    expect(endByRule(log)).toBe(end);
    expect(await endOf(log)).toBe(end);
  });
  it("tells a gap of 7 days from one that is a microsecond longer", async () => {
    const at = (atUs: bigint): LogRow => ({ source: 0, atUs, counted: false });
    const [first, near, far] = [at(5n), at(5n + 7n * DAY), at(6n + 7n * DAY)];
    expect(await endOf([at(4n), first, near])).toBe(near.atUs);
    expect(await endOf([at(4n), first, far])).toBe(first.atUs);
  });
  it("is none without rows", async () => {
    expect(await endOf([])).toBeNull();
    expect(logEnd([])).toBeNull();
  });
  it("is what the rule says, row by row", async () => {
    const row = fc.record({
      source: fc.integer({ min: 0, max: 2 }),
      atUs: fc
        .tuple(fc.integer({ min: -40, max: 40 }), fc.constantFrom(0n, 1n, DAY - 1n, DAY / 2n))
        .map(([day, rest]) => BigInt(day) * DAY + rest),
      counted: fc.boolean(),
    });
    await fc.assert(
      fc.asyncProperty(fc.array(row, { maxLength: 12 }), async (log) => {
        expect(await endOf(log)).toBe(endByRule(log));
      }),
      { numRuns: 30 },
    );
  });
});
