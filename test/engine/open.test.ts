import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { fares, reduced } from "./small.ts";

const HEADER = "visitor,at,event,arm,fare";
const ROWS = "v1,2026-03-02,search,list,1.5\nv2,2026-03-02,search,calendar,2\n";
const ARMS = [["1: 1.5", "1: 2"]];

describe("the header of a csv file", () => {
  it.each([
    ["stands on the first line", `${HEADER}\n${ROWS}`],
    ["may be quoted", `"visitor","at","event","arm","fare"\n${ROWS}`],
    ["may follow blank lines", `\n\n${HEADER}\n${ROWS}`],
    ["may follow a byte-order mark", `\uFEFF${HEADER}\n${ROWS}`],
    ["may follow a byte-order mark and blank lines", `\uFEFF\n\n${HEADER}\n${ROWS}`],
    ["may be quoted behind a byte-order mark", `\uFEFF"visitor",at,event,arm,fare\n${ROWS}`],
    ["may end at CR LF", `${HEADER}\n${ROWS}`.replaceAll("\n", "\r\n")],
    ["may end at CR", `${HEADER}\n${ROWS}`.replaceAll("\n", "\r")],
    ["may follow blank lines that end at CR LF", `\n\n${HEADER}\n${ROWS}`.replaceAll("\n", "\r\n")],
    ["may have its last line without an end", `${HEADER}\n${ROWS}`.trimEnd()],
    [
      "may have its columns in any order",
      "fare,arm,event,at,visitor\n1.5,list,s,2026-03-02,v1\n2,calendar,s,2026-03-02,v2\n",
    ],
    ["may hold columns that the plan does not name", `${HEADER},x\n${ROWS.replaceAll("\n", ",9\n")}`],
    ["may follow more than fifty blank lines", `${"\n".repeat(80)}${HEADER}\n${ROWS}`],
  ])("%s", async (_, text) => {
    const found = await reduced(fares(), { "log.csv": text });
    expect([found.arms, found.rows]).toEqual([ARMS, { "in-follow-up": 2 }]);
  });
  it("may be quoted over several lines", async () => {
    const columns = 'unit: visitor, time: at, event: event, variant: "arm\\nof it"';
    const text = `visitor,at,event,"arm\nof it",fare\n${ROWS}`;
    expect((await reduced(fares({ columns }), { "log.csv": text })).arms).toEqual(ARMS);
  });
  it("may spread a name over more than fifty lines", async () => {
    const text = `visitor,at,event,arm,fare,"${"\n".repeat(80)}"\n${ROWS.replaceAll("\n", ",\n")}`;
    expect((await reduced(fares(), { "log.csv": text })).arms).toEqual(ARMS);
  });
  it("keeps apart names that differ in case only, with commas, quotes and spaces", async () => {
    const columns = 'unit: visitor, time: at, event: event, variant: "arm, \\"tested\\""';
    const text = `Visitor,visitor,AT,at,event,ARM,"arm, ""tested""",fare,Fare, fare
wrong,v1,x,2026-03-02,s,calendar,list,1.5,70,80
wrong,v2,x,2026-03-02,s,list,calendar,2,70,80
`;
    expect((await reduced(fares({ columns }), { "log.csv": text })).arms).toEqual(ARMS);
  });
  it("may repeat a name that the plan does not use; one that it uses must stand once", async () => {
    const repeated = `${HEADER},x,x\n${ROWS.replaceAll("\n", ",1,2\n")}`;
    expect((await reduced(fares(), { "log.csv": repeated })).arms).toEqual(ARMS);
    const twice = `${HEADER},fare\n${ROWS.replaceAll("\n", ",3\n")}`;
    await expect(reduced(fares(), { "log.csv": twice })).rejects.toThrow(/more than once in the header/);
  });
  it("alone makes no rows, nor does an empty file, beside a file with some", async () => {
    const files = {
      "log.csv": `${HEADER}\n${ROWS}`,
      "more.csv": HEADER,
      "none.csv": "",
      "blank.csv": "\n\n",
      "mark.csv": "\uFEFF",
    };
    const found = await reduced(fares({ files: '"*.csv"' }), files);
    expect([found.arms, found.reduction.rowsRead]).toEqual([ARMS, 2]);
    expect(found.reduction.inputs.map(({ name, rows }) => [name, rows])).toEqual([
      ["blank.csv", 0],
      ["log.csv", 2],
      ["mark.csv", 0],
      ["more.csv", 0],
      ["none.csv", 0],
    ]);
  });
  it("alone makes a log without rows, and so does an empty file", async () => {
    for (const text of [HEADER, `${HEADER}\n`, `${HEADER}\n\n\n`, "", "\n", "\uFEFF"]) {
      await expect(reduced(fares(), { "log.csv": text }), JSON.stringify(text)).rejects.toThrow(/The log has no rows/);
    }
  });
  it("whose quotes never close makes the file unreadable, not empty", async () => {
    const files = { "log.csv": `${HEADER}\n${ROWS}`, "more.csv": `"visitor,at,event,arm,fare\n${ROWS}` };
    await expect(reduced(fares({ files: '"*.csv"' }), files)).rejects.toThrow(/more\.csv.*header/s);
  });
  it("of one column is read as such, and blank lines are not rows there either", async () => {
    const plan = fares({ rest: "" }).replace(
      "variants:",
      "  - files: only.csv\n    columns: {unit: visitor}\nvariants:",
    );
    const timeless = plan.replace(", time: at", "").replace("at,", "");
    const found = await reduced(timeless, {
      "log.csv": "visitor,event,arm,fare\nv1,search,list,1.5\nv2,search,calendar,2\n",
      "only.csv": "\nvisitor\nv1\n\nv2\n\n\nv3\n",
    });
    expect([found.arms, found.rows]).toEqual([ARMS, { "unit-not-enrolled": 1, "in-follow-up": 4 }]);
  });
});

describe("lines of JSON", () => {
  const line = (visitor: string, arm: string, more: object) =>
    JSON.stringify({ visitor, at: "2026-03-02", event: "search", arm, ...more });

  it("may have a key that comes late, or on one line only", async () => {
    const lines = [
      ...Array.from({ length: 3_000 }, (_, i) => line(`v${i}`, i % 2 === 0 ? "list" : "calendar", {})),
      line("v0", "list", { fare: 1.5 }),
    ];
    const found = await reduced(fares({ files: "log.ndjson" }), { "log.ndjson": lines.join("\n") });
    expect(found.arms).toEqual([["1500: 1.5", "1500: 0"]]);
  });
  it("may be blank, with blanks in them, end at CR LF, and lack an end or have a byte-order mark", async () => {
    const lines = [line("v1", "list", { fare: 1.5 }), "", "   ", "\t", line("v2", "calendar", { fare: 2 })];
    for (const text of [lines.join("\n"), lines.join("\r\n"), `\uFEFF${lines.join("\n")}\n\n`]) {
      const found = await reduced(fares({ files: "log.ndjson" }), { "log.ndjson": text });
      expect([found.arms, found.rows], JSON.stringify(text)).toEqual([ARMS, { "in-follow-up": 2 }]);
    }
  });
  it("may mix their line ends", async () => {
    const text = `${line("v1", "list", { fare: 1.5 })}\r\n\n${line("v2", "calendar", { fare: 2 })}\n\r\n`;
    expect((await reduced(fares({ files: "log.ndjson" }), { "log.ndjson": text })).arms).toEqual(ARMS);
  });
  it("give numbers by their digits, also those that no double holds", async () => {
    const numbers: [string, string][] = [
      ["1.5", "1.5"],
      ["0.1", "0.1"],
      ["123456789.123456789", "123456789.123456789"],
      ["999999999999999999.999999999", "999999999999999999.999999999"],
      ["12345678901234567", "12345678901234567"],
      ["1e3", "1000"],
      ["1E3", "1000"],
      ["-2.50", "-2.5"],
      ["1.0000000004", "1"],
      ['"2.5"', "2.5"],
      ["null", "0"],
      ['""', "0"],
    ];
    for (const [written, total] of numbers) {
      const text = `{"visitor": "v1", "at": "2026-03-02", "event": "s", "arm": "list", "nested": {"fare": 7.25}, "note": "fare\\": 3.5", "fare" : ${written}}`;
      const found = await reduced(fares({ files: "log.ndjson" }), { "log.ndjson": text });
      expect(found.arms[0]?.[0], written).toBe(`1: ${total}`);
    }
  });
  it("may have keys of any characters", async () => {
    for (const key of ["a.b", "a b", '"', "\\", "$", "*", "[0]", "é😀", "a\tb", "'", "a/b", "#", "FARE"]) {
      const plan = fares({ files: "log.ndjson" }).replace("sum: fare", `sum: ${JSON.stringify(key)}`);
      const text = `${line("v1", "list", { [key]: 1.5, fare: 7, Fare: 8 })}\n${line("v2", "calendar", { [key]: 2 })}`;
      expect((await reduced(plan, { "log.ndjson": text })).arms, key).toEqual(ARMS);
    }
  });
  it("may write a key or a text with escapes", async () => {
    const text = `{"visitor":"v\\u0031","at":"2026-03-02","event":"s","a\\u0072m":"l\\u0069st","fare":1.5}\n${line("v2", "calendar", { fare: 2 })}`;
    expect((await reduced(fares({ files: "log.ndjson" }), { "log.ndjson": text })).arms).toEqual(ARMS);
  });
  it("that are no objects are rejected rows, be they ever so many", async () => {
    const found = await reduced(fares({ files: '"*.ndjson"' }), {
      "log.ndjson": `${line("v1", "list", { fare: 1.5 })}\n[1]\n"x"\n17\nnull\n{"visitor": "v9"\n${line("v2", "calendar", { fare: 2 })}`,
      "broken.ndjson": "nothing\nto be read\n",
      "empty.ndjson": "",
      "none.ndjson": "{}\n",
    });
    expect([found.arms, found.rows]).toEqual([ARMS, { rejected: 8, "in-follow-up": 2 }]);
  });
});

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
  it.each([
    ["TIMESTAMP '2026-03-02 10:00:00.123456'", "2026-03-02T09:00:00.123456Z"],
    ["TIMESTAMP_NS '2026-03-02 10:00:00.123456789'", "2026-03-02T09:00:00.123456Z"],
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
  it("that is cut short cannot be read", async () => {
    await expect(reduced(plan(), { "log.parquet": "PAR1 and no more" })).rejects.toThrow(
      /log\.parquet cannot be read as parquet/,
    );
    await expect(reduced(plan(), { "log.parquet": "" })).rejects.toThrow(/log\.parquet cannot be read as parquet/);
  });
});

describe("a packed file", () => {
  it("may have its ending in capitals", async () => {
    const found = await reduced(fares({ files: "LOG.CSV.GZ" }), { "LOG.CSV.GZ": gzipSync(`${HEADER}\n${ROWS}`) });
    expect(found.arms).toEqual(ARMS);
  });
  it("of no bytes at all is a file that ends early, for nothing is packed in it", async () => {
    for (const name of ["log.csv.gz", "log.csv.zst"]) {
      const run = reduced(fares({ files: '"log.*"' }), { "log.csv": `${HEADER}\n${ROWS}`, [name]: "" });
      await expect(run, name).rejects.toThrow(/ends early/);
    }
  });
});
