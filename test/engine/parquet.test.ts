import { describe, expect, it } from "vitest";
import { fares, reduced } from "./small.ts";

const HEADER = "visitor,at,event,arm,fare";
const ROWS = "v1,2026-03-02,search,list,1.5\nv2,2026-03-02,search,calendar,2\n";
const ARMS = [["1: 1.5", "1: 2"]];

/** Two rows, v1 and v2, with fares 1.5 and 2 as decimals of 40 digits, as another program (pyarrow 26.0) writes them. */
const WIDE_DECIMAL =
  "UEFSMRUAFSQVJCwVBBUAFQYVBhwAAAACAAAABAECAAAAdjECAAAAdjIVABUsFSwsFQQVABUGFQYcAAAAAgAAAAQBAMCaRP9LBgAAwJpE/0sGAB" +
  "UAFSAVICwVBBUAFQYVBhwAAAACAAAABAEBAAAAcwEAAABzFQAVNBU0LBUEFQAVBhUGHAAAAAIAAAAEAQQAAABsaXN0CAAAAGNhbGVuZGFyFQAV" +
  "UBVQLBUEFQAVBhUGHAAAAAIAAAAEAQAAAAAAAAAAAAAAAAAAAACWAAAAAAAAAAAAAAAAAAAAAMgVBBlsNQAYBnNjaGVtYRUKABUMJQIYB3Zpc2" +
  "l0b3IlAEwcAAAAFQQlAhgCYXQlFEyMEhwsAAAAAAAVDCUCGAVldmVudCUATBwAAAAVDCUCGANhcm0lAEwcAAAAFQ4VIhUCGARmYXJlJQoVBBVQ" +
  "LFwVBBVQAAAAFgQZHBlcJgAcFQwZJQYAGRgHdmlzaXRvchUAFgQWShZKJghJHBUAFQAVAgA8FggZBhkmAAQAAAAmABwVBBklBgAZGAJhdBUAFg" +
  "QWUhZSJlJJHBUAFQAVAgA8KQYZJgAEAAAAJgAcFQwZJQYAGRgFZXZlbnQVABYEFkYWRiakAUkcFQAVABUCADwWBBkGGSYABAAAACYAHBUMGSUG" +
  "ABkYA2FybRUAFgQWWhZaJuoBSRwVABUAFQIAPBYYGQYZJgAEAAAAJgAcFQ4ZJQYAGRgEZmFyZRUAFgQWdhZ2JsQCSRwVABUAFQIAPCkGGSYABA" +
  "AAABayAxYEJggWsgMAKCBwYXJxdWV0LWNwcC1hcnJvdyB2ZXJzaW9uIDI2LjAuMRlcHAAAHAAAHAAAHAAAHAAAAKYBAABQQVIx";

describe("Parquet", () => {
  const plan = (more = "") => fares({ files: "log.parquet", rest: more });
  const made = (columns: string, rows: string) =>
    `SELECT ${columns} FROM (VALUES ${rows}) AS t(visitor, "at", event, arm, fare)`;
  const typed = (type: string, values: readonly string[]) =>
    made(
      `visitor, "at", event, arm, CAST(fare AS ${type}) AS fare`,
      values
        .map((value, i) => `('v${i}', TIMESTAMP '2026-03-02', 's', '${i === 0 ? "calendar" : "list"}', ${value})`)
        .join(", "),
    );
  const total = async (type: string, values: readonly string[]) => {
    const zero = type === "VARCHAR" ? "'0'" : "0";
    const found = await reduced(plan(), {}, { parquet: { "log.parquet": typed(type, [zero, ...values]) } });
    return `${found.arms[0]?.[0]}, rejected ${found.rows.rejected ?? 0}`;
  };

  it.each([
    ["TINYINT", ["-128", "127"], "2: -1, rejected 0"],
    ["UTINYINT", ["255"], "1: 255, rejected 0"],
    ["SMALLINT", ["-32768"], "1: -32768, rejected 0"],
    ["USMALLINT", ["65535"], "1: 65535, rejected 0"],
    ["INTEGER", ["-2147483648", "NULL"], "2: -2147483648, rejected 0"],
    ["UINTEGER", ["4294967295"], "1: 4294967295, rejected 0"],
    ["BIGINT", ["999999999999999999", "1000000000000000000"], "1: 999999999999999999, rejected 1"],
    ["UBIGINT", ["18446744073709551615", "5"], "1: 5, rejected 1"],
    ["DECIMAL(18,9)", ["0.123456789", "-0.000000001"], "2: 0.123456788, rejected 0"],
    [
      "DECIMAL(38,20)",
      ["0.00000000050000000000", "-0.00000000050000000000", "0.00000000049999999999"],
      "3: 0, rejected 0",
    ],
    ["DECIMAL(38,10)", ["1.0000000005"], "1: 1.000000001, rejected 0"],
    ["DECIMAL(38,0)", ["10000000000000000000000000000000000000", "7"], "1: 7, rejected 1"],
    ["DOUBLE", ["0.1", "0.2"], "2: 0.3, rejected 0"],
    ["DOUBLE", ["1e17", "1e-9", "5e-10", "4e-10"], "4: 100000000000000000.000000002, rejected 0"],
    ["DOUBLE", ["1e18", "'nan'", "'inf'", "'-inf'", "-0.0"], "1: 0, rejected 4"],
    ["DOUBLE", ["1234567.891", "5.551115123125783e-17"], "2: 1234567.891, rejected 0"],
    ["FLOAT", ["0.1", "16777216"], "2: 16777216.1, rejected 0"],
    ["VARCHAR", ["'1.5'", "''", "' 1'", "'1e2'"], "3: 101.5, rejected 1"],
    ["BOOLEAN", ["TRUE"], "0: 0, rejected 2"],
  ])("column of %s holds its numbers exactly", async (type, values, expected) => {
    if (type === "BOOLEAN") {
      // Yes and no are no numbers; every row of such a column is rejected, so none can be read.
      await expect(total(type, values)).rejects.toThrow(/could be read/);
    } else {
      expect(await total(type, values)).toBe(expected);
    }
  });
  // The engine reads row groups side by side and keeps no order of rows, but where they are numbered.
  it("numbers rejected rows as the file has them, over many row groups", async () => {
    const rows = `SELECT CASE WHEN i % 150000 = 149999 THEN NULL ELSE 'v' || i % 1000 END AS visitor,
      TIMESTAMP '2026-03-02' AS "at", 's' AS event, CASE WHEN i % 2 = 0 THEN 'list' ELSE 'calendar' END AS arm, 1 AS fare
      FROM range(600000) AS t(i)`;
    const { rejects } = await reduced(plan(), {}, { parquet: { "log.parquet": rows }, threads: 4 });
    const numbers = rejects.split("\n").map((line) => line.split(",")[1]);
    expect(numbers.slice(0, -1)).toEqual(["150000", "300000", "450000", "600000"]);
  });
  it.each([
    ["TIMESTAMP '2026-03-02 10:00:00.123456'", "2026-03-02T09:00:00.123456Z"],
    ["TIMESTAMP_NS '2026-03-02 10:00:00.123456789'", "2026-03-02T09:00:00.123456Z"],
    ["TIMESTAMP_NS '1969-03-02 10:00:00.123456789'", "1969-03-02T09:00:00.123456Z"],
    ["TIMESTAMP_NS '1969-03-02 10:00:00.123456000'", "1969-03-02T09:00:00.123456Z"],
    ["TIMESTAMP_MS '2026-03-02 10:00:00.123'", "2026-03-02T09:00:00.123000Z"],
    ["TIMESTAMPTZ '2026-03-02 10:00:00.123456+00'", "2026-03-02T10:00:00.123456Z"],
    ["DATE '2026-03-02'", "2026-03-01T23:00:00.000000Z"],
    ["1772406000", "2026-03-01T23:00:00.000000Z"],
    ["CAST(1772406000123 AS BIGINT)", "2026-03-01T23:00:00.123000Z"],
    ["CAST(1772406000123456 AS DECIMAL(18,0))", "2026-03-01T23:00:00.123456Z"],
    ["CAST(1772406000 AS DOUBLE)", "2026-03-01T23:00:00.000000Z"],
    ["CAST(1772406000123456 AS DOUBLE)", "2026-03-01T23:00:00.123456Z"],
    ["'2026-03-02T10:00'", "2026-03-02T09:00:00.000000Z"],
    ["TIMESTAMP '2026-10-25 02:30'", "2026-10-25T00:30:00.000000Z"],
    ["TIMESTAMP '2026-03-29 02:30'", "2026-03-29T01:30:00.000000Z"],
  ])("column of times such as %s is taken as it is, without a zone in the plan's", async (value, expected) => {
    const found = await reduced(
      plan("timezone: Europe/Oslo"),
      {},
      { parquet: { "log.parquet": made("*", `('v1', ${value}, 's', 'list', 1)`) } },
    );
    const micros = found.reduction.facts.firstEnrolledUs ?? 0n;
    const rest = ((micros % 1_000_000n) + 1_000_000n) % 1_000_000n;
    const iso = new Date(Number((micros - rest) / 1_000n)).toISOString().replace(".000Z", "");
    expect(`${iso}.${String(rest).padStart(6, "0")}Z`).toBe(expected);
  });
  it.each([
    "TIMESTAMP 'infinity'",
    "TIMESTAMPTZ '-infinity'",
    "DATE 'infinity'",
    // Beyond the year 275760 no calendar of the plan goes; dates reach further still.
    "TIMESTAMP '290000-01-01'",
    "TIMESTAMPTZ '290000-01-01 00:00:00+00'",
    "DATE '5000000-01-01'",
    "NULL",
    "TRUE",
    "TIME '10:00:00'",
    "1772406000.5",
  ])("row whose time is %s is rejected, and the others are not", async (value) => {
    const type = value.split(" ")[0] ?? "";
    const good =
      type.startsWith("T") && type !== "TRUE" && type !== "TIME"
        ? `${type} '2026-03-02 00:00:00'`
        : type === "DATE"
          ? "DATE '2026-03-02'"
          : null;
    const rows =
      good === null
        ? `('v1', ${value}, 's', 'list', 1)`
        : `('v1', ${value}, 's', 'list', 1), ('v2', ${good}, 's', 'list', 3)`;
    const run = reduced(plan(), {}, { parquet: { "log.parquet": made("*", rows) } });
    if (good === null) await expect(run).rejects.toThrow(/None of the log's 1 rows could be read/);
    else expect((await run).arms).toEqual([["1: 3", "0: 0"]]);
  });
  const TWO = "('v1', TIMESTAMP '2026-03-02', 's', 'list', 1.5), ('v2', TIMESTAMP '2026-03-02', 's', 'calendar', 2)";

  it("gives units, variants and filters the text of any type", async () => {
    const rest = "filters: [{name: no, drop: rows, where: {flag: true}}, {name: big, drop: rows, where: {size: 2}}]";
    const select = `SELECT * FROM (VALUES
      (1, TIMESTAMP '2026-03-02', 's', 'list', 1.5, TRUE, CAST(1 AS DOUBLE)),
      (1, TIMESTAMP '2026-03-02', 's', 'list', 1.5, FALSE, 1),
      (2, TIMESTAMP '2026-03-02', 's', 'calendar', 2, NULL, 1),
      (3, TIMESTAMP '2026-03-02', 's', 'calendar', 9, NULL, 2)) AS t(visitor, "at", event, arm, fare, flag, size)`;
    const found = await reduced(plan(rest), {}, { parquet: { "log.parquet": select } });
    expect([found.arms, found.rows]).toEqual([ARMS, { "filter:no": 1, "filter:big": 1, "in-follow-up": 2 }]);
  });
  it("may hold nested columns beside, with the names of ours in them", async () => {
    const nested =
      "{'fare': 70, 'visitor': 'x'} AS nested, [1, 2] AS many, [{'fare': 1}] AS list, MAP {'fare': 5} AS fares";
    const select = made(`${nested}, visitor, "at", {'arm': {'arm': 'x'}} AS deep, event, arm, fare`, TWO);
    expect((await reduced(plan(), {}, { parquet: { "log.parquet": select } })).arms).toEqual(ARMS);
  });
  it("may hold columns that are called like those that the reader adds", async () => {
    const added = "7 AS file_index, 8 AS file_row_number, 'x' AS filename, 9 AS file, 5 AS rowid";
    const select = made(`${added}, visitor, "at", event, arm, fare`, `${TWO}, ('v3', NULL, 's', 'list', 1)`);
    const parquet = { "a.parquet": select, "b.parquet": select };
    const found = await reduced(fares({ files: '"*.parquet"' }), {}, { parquet });
    expect(found.arms).toEqual([["1: 3", "1: 4"]]);
    expect(found.rejects).toMatch(/^a\.parquet,3,no readable time,.*\nb\.parquet,3,no readable time,.*\n$/);
  });
  it("in folders that are called like values holds what the file says, not what the folder says", async () => {
    const select = made("*", TWO);
    const found = await reduced(
      fares({ files: '["arm=other/**/*.parquet", "c0=5/**/*.csv"]' }),
      { "c0=5/c3=list/log.csv": `${HEADER}\n${ROWS}` },
      { parquet: { "arm=other/fare=99/x.parquet": select, "arm=other/y.parquet": select } },
    );
    expect(found.arms).toEqual([["1: 4.5", "1: 6"]]);
  });
  it("in a folder whose name looks like a pattern is the one that is read", async () => {
    const select = made("*", TWO);
    const files = { "d[1]/log.csv": `${HEADER}\n${ROWS}`, "d1/log.csv": `${HEADER}\n${ROWS}` };
    const found = await reduced(fares({ files: '["d[1]/log.csv", "e*f/log.parquet"]' }), files, {
      parquet: { "e*f/log.parquet": select, "exf/log.parquet": made("*", TWO.replaceAll("2)", "9)")) },
    });
    expect([found.arms, found.rejects]).toEqual([[["1: 3", "1: 4"]], ""]);
  });
  it("with a decimal of more than 38 digits cannot be read, if the plan asks for it: the engine would give other numbers", async () => {
    const files = { "log.parquet": Buffer.from(WIDE_DECIMAL, "base64") };
    await expect(reduced(plan(), files)).rejects.toThrow(
      "log.parquet cannot be read as parquet: its column fare has decimals of 40 digits, of which the engine takes 38; write it with fewer, or as text",
    );
    const booked = plan().replace("{sum: fare}", "{event: s}");
    expect((await reduced(booked, files)).arms).toEqual([["1: 1", "1: 1"]]);
  });
  it("that is cut short cannot be read", async () => {
    await expect(reduced(plan(), { "log.parquet": "PAR1 and no more" })).rejects.toThrow(
      /log\.parquet cannot be read as parquet/,
    );
    await expect(reduced(plan(), { "log.parquet": "" })).rejects.toThrow(/log\.parquet cannot be read as parquet/);
  });
});
