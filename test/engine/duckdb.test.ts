import { afterEach, describe, expect, it, vi } from "vitest";
import { sql } from "../../src/engine/sql/index.ts";
import { inEngine } from "./duck.ts";

afterEach(() => vi.unstubAllEnvs());

describe("the engine", () => {
  it("writes a time with a zone alike on every machine", async () => {
    // A column of such times may be a unit's, a filter's or one that settles the order of rows: all of them by its text.
    vi.stubEnv("TZ", "Asia/Tokyo");
    await inEngine(async (engine) => {
      const rows = await engine.query(sql`SELECT CAST(TIMESTAMPTZ '2026-03-02 10:00:00+00' AS VARCHAR) AS text`);
      expect(rows).toEqual([{ text: "2026-03-02 10:00:00+00" }]);
    });
  });
  it("gives whole numbers, decimals, doubles, texts and nothing as they are", async () => {
    await inEngine(async (engine) => {
      const rows = await engine.query(sql`
        SELECT 1 AS small, CAST(2 AS BIGINT) AS big, CAST(3 AS HUGEINT) AS huge, CAST('-1.5' AS DECIMAL(38, 9)) AS wide,
          CAST('0.25' AS DECIMAL(4, 2)) AS narrow, CAST('0.1' AS DOUBLE) AS double, 'text' AS text, TRUE AS yes, NULL AS nothing`);
      expect(rows).toEqual([
        {
          small: 1,
          big: 2n,
          huge: 3n,
          wide: { nano: -1_500_000_000n },
          narrow: { nano: 250_000_000n },
          double: 0.1,
          text: "text",
          yes: true,
          nothing: null,
        },
      ]);
    });
  });
  it("says its name and version, and fetches nothing from outside", async () => {
    await inEngine(async (engine) => {
      expect([engine.name, engine.version]).toEqual(["duckdb", expect.stringMatching(/^\d+\.\d+\.\d+/)]);
      await expect(engine.query(sql`SELECT * FROM read_csv('https://localhost:1/x.csv')`)).rejects.toThrow();
      const settings = await engine.query(sql`
        SELECT current_setting('autoinstall_known_extensions') AS install, current_setting('autoload_known_extensions') AS load`);
      expect(settings).toEqual([{ install: false, load: false }]);
    });
  });
  it("stops a statement that runs, when it is told to", async () => {
    await inEngine(async (engine) => {
      const long = engine.query(
        sql`SELECT count(*) AS n FROM range(1000000000) AS a(i), range(1000000) AS b(j) WHERE i % 7 = j % 11`,
      );
      setTimeout(() => engine.interrupt(), 50);
      await expect(long).rejects.toThrow(/INTERRUPT/i);
      expect(await engine.query(sql`SELECT 1 AS one`)).toEqual([{ one: 1 }]);
    });
  });
});
