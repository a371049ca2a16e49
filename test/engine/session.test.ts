import { describe, expect, it } from "vitest";
import { openSession } from "../../src/engine/session.ts";
import { duckdb, name, type Statement, sql } from "../../src/engine/sql/index.ts";
import { metricOf, planOf } from "../checks/make.ts";
import { inEngine } from "./duck.ts";

const PLAN = planOf({ metrics: [metricOf({ name: "First" }), metricOf({ name: "Second" })] });
const VALUES = ["x0", "x1"].map((column) => {
  const x: Statement = name(column);
  return { plain: x, cap: null, value: x, per: null, covariate: null };
});

/** Units of two arms: of x0 30, 10, 20, 20, nothing in the one and -5, 999,999,999,999.999999999 in the other. */
function inSession<T>(work: (session: ReturnType<typeof openSession>) => Promise<T>): Promise<T> {
  return inEngine(async (engine) => {
    await engine.run(sql`
      CREATE TABLE units AS
      SELECT variant, CAST(x0 AS DECIMAL(38, 9)) AS x0, CAST(x1 AS DECIMAL(38, 9)) AS x1
      FROM (VALUES (0, '30', '1'), (0, '10', '2'), (1, '-5', '7'), (0, '20', '3'), (0, NULL, '4'), (0, '20', '5'),
        (1, '999999999999.999999999', '6')) AS t(variant, x0, x1)`);
    return work(openSession(PLAN, VALUES, engine, duckdb));
  });
}

describe("the values at some ranks of an arm", () => {
  it("are those of its units in order, ties included and units without a value left out, as they were asked for", async () => {
    await inSession(async (session) => {
      expect(await session.atRanks(0, 0, [4, 1, 3, 2])).toEqual([30n, 10n, 20n, 20n].map((x) => x * 10n ** 9n));
      expect(await session.atRanks(0, 1, [1, 2])).toEqual([-5n * 10n ** 9n, 999_999_999_999_999_999_999n]);
      expect(await session.atRanks(1, 0, [5])).toEqual([5n * 10n ** 9n]);
      expect(await session.atRanks(0, 0, [2, 2])).toEqual([20n * 10n ** 9n, 20n * 10n ** 9n]);
      expect(await session.atRanks(0, 0, [])).toEqual([]);
    });
  });

  it("are asked for side by side", async () => {
    await inSession(async (session) => {
      const both = await Promise.all([session.atRanks(0, 0, [1]), session.atRanks(0, 1, [1])]);
      expect(both).toEqual([[10n ** 10n], [-5n * 10n ** 9n]]);
    });
  });

  it("are refused where the arm has no such rank, and where there is no such arm", async () => {
    await inSession(async (session) => {
      await expect(session.atRanks(0, 0, [5])).rejects.toThrow("arm 0 of metric 0 has no value at rank 5");
      await expect(session.atRanks(0, 0, [0])).rejects.toThrow("no value at rank 0");
      await expect(session.atRanks(2, 0, [1])).rejects.toThrow("no arm 0 of metric 2");
      await expect(session.atRanks(0, 2, [1])).rejects.toThrow("no arm 2 of metric 0");
    });
  });
});
