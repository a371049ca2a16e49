import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { fares, reduced } from "./small.ts";

const HEADER = "visitor,at,event,arm,fare";
const GOOD = "v1,2026-03-02,search,list,1.5";
const OTHER = "v2,2026-03-02,search,calendar,2";

const rejectsOf = async (text: string | Uint8Array, name = "log.csv") =>
  (await reduced(fares({ files: name }), { [name]: text })).rejects.split("\n").slice(0, -1);

describe("rejects.csv", () => {
  it("gives the reason and the text of each rejected row, in the order of the file", async () => {
    const lines = [
      HEADER,
      GOOD,
      "v3,2026-03-02,search,list",
      "v3,2026-03-02,search,list,1,2",
      ",2026-03-02,search,list,1",
      "v3,yesterday,search,list,1",
      "v3,,search,list,1",
      "v3,2026-03-02,search,list,one",
      "v3,2026-03-02,page,list,1e18",
      OTHER,
    ];
    expect(await rejectsOf(lines.join("\n"))).toEqual([
      'log.csv,3,cannot be read: the cells do not fit the header,"v3,2026-03-02,search,list"',
      'log.csv,4,cannot be read: the cells do not fit the header,"v3,2026-03-02,search,list,1,2"',
      'log.csv,5,no unit,",2026-03-02,search,list,1"',
      'log.csv,6,no readable time,"v3,yesterday,search,list,1"',
      'log.csv,7,no readable time,"v3,,search,list,1"',
      'log.csv,8,not a number: fare,"v3,2026-03-02,search,list,one"',
      'log.csv,9,out of range: fare,"v3,2026-03-02,page,list,1e18"',
    ]);
  });
  it("names the first reason that applies", async () => {
    const lines = [HEADER, GOOD, ",yesterday,search,list,one", "v3,yesterday,search,list,one", OTHER];
    expect(await rejectsOf(lines.join("\n"))).toEqual([
      'log.csv,3,no unit,",yesterday,search,list,one"',
      'log.csv,4,no readable time,"v3,yesterday,search,list,one"',
    ]);
  });
  const BAD = "v3,2026-03-02,search,list,one";
  it.each([
    ["blank lines before", ["", "", HEADER, "", GOOD, "", "", BAD, OTHER], 8],
    ["a byte-order mark", [`\uFEFF${HEADER}`, GOOD, BAD, OTHER], 3],
    ["a header over three lines", ['visitor,at,event,arm,fare,"a\nb\nc"', `${GOOD},`, `${BAD},`, `${OTHER},`], 5],
    ["breaks within quotes before", [HEADER, 'v1,2026-03-02,"sea\n\nrch",list,1.5', BAD, OTHER], 5],
    ["rows that cannot be read before", [HEADER, GOOD, "x", "x,y", BAD, OTHER], 5],
    ["rows with a broken quote before", [HEADER, GOOD, '"v9" x,2026-03-02,s,list,1', BAD, OTHER], 4],
    ["rows with one empty cell more", [HEADER, `${GOOD},`, BAD, OTHER], 3],
    ["nothing behind it, not even a line's end", [HEADER, GOOD, OTHER, BAD], 4],
    ["quoted cells", [HEADER, GOOD, '"v3","2026-03-02","search","list","one"', OTHER], 3],
  ])("counts physical lines, with %s", async (_, lines, line) => {
    for (const end of ["\n", "\r\n", "\r"]) {
      const text = lines.join("\n").replaceAll("\n", end);
      const found = await rejectsOf(text);
      expect(
        found.filter((row) => row.includes("not a number")).map((row) => row.split(",")[1]),
        JSON.stringify(end),
      ).toEqual([String(line)]);
    }
  });
  it("counts physical lines of a file that mixes line ends, and loses none of its rows", async () => {
    const found = await reduced(fares(), {
      "log.csv": `${HEADER}\r\n${GOOD}\n\r\n${BAD}\r${OTHER}\nx,y\r\nv4,2026-03-02,"search","list","7"\nv5,2026-03-02,"search","list","8"\r\n`,
    });
    expect(found.rejects).toBe(
      `log.csv,4,not a number: fare,"${BAD}"\nlog.csv,6,cannot be read: the cells do not fit the header,"x,y"\n`,
    );
    expect([found.rows, found.arms]).toEqual([{ rejected: 2, "in-follow-up": 4 }, [["3: 16.5", "1: 2"]]]);
  });
  it("takes the text of a row as it stands, over its lines, and quotes it", async () => {
    const found = await rejectsOf(`${HEADER}\n${GOOD}\nv3,2026-03-02,"se ""a""\nrch",list,one\n${OTHER}\n`);
    expect(found.join("\n")).toBe('log.csv,3,not a number: fare,"v3,2026-03-02,""se """"a""""\nrch"",list,one"');
  });
  it("reads a packed file for its lines too", async () => {
    const text = `${HEADER}\n\n${GOOD}\n${BAD}\n${OTHER}\n`;
    expect(await rejectsOf(gzipSync(text), "log.csv.gz")).toEqual([`log.csv.gz,4,not a number: fare,"${BAD}"`]);
  });
  it("names each file of several, in the order of their names", async () => {
    const text = `${HEADER}\n${GOOD}\n${BAD}\n`;
    const found = await reduced(fares({ files: '"*.csv"' }), {
      "b.csv": `\n${text}`,
      "a,1.csv": text,
      "c.csv": `${HEADER}\n${OTHER}\n`,
      "d.csv": `fare,visitor,at,event,arm\nx,v3,2026-03-02,s,list\n`,
    });
    expect(found.rejects.trimEnd().split("\n")).toEqual([
      `"a,1.csv",3,not a number: fare,"${BAD}"`,
      `b.csv,4,not a number: fare,"${BAD}"`,
      'd.csv,2,not a number: fare,"x,v3,2026-03-02,s,list"',
    ]);
  });
  it("of tabs has the row with its tabs", async () => {
    const text = [HEADER, GOOD, BAD, OTHER].join("\n").replaceAll(",", "\t");
    expect(await rejectsOf(text, "log.tsv")).toEqual([`log.tsv,3,not a number: fare,${BAD.replaceAll(",", "\t")}`]);
  });
  it("gives the line of JSON, blank lines counted", async () => {
    const line = (fare: unknown) => JSON.stringify({ visitor: "v1", at: "2026-03-02", event: "s", arm: "list", fare });
    const text = `${line(1)}\n\n   \n${line("one")}\nnot JSON\n[]\n${line(2)}\n${line(true)}\n`;
    expect(await rejectsOf(text, "log.ndjson")).toEqual([
      `log.ndjson,4,not a number: fare,"${line("one").replaceAll('"', '""')}"`,
      "log.ndjson,5,cannot be read: not a JSON object,not JSON",
      "log.ndjson,6,cannot be read: not a JSON object,[]",
      `log.ndjson,8,not a number: fare,"${line(true).replaceAll('"', '""')}"`,
    ]);
  });
  it("gives the row of Parquet, and the cells that the plan names", async () => {
    const values =
      "('v1', '2026-03-02', 's', 'list', '1', 'x'), ('v3', '2026-03-02', 's', 'list', 'one', 'x'), (NULL, 'never', 's', 'list', '2', 'x')";
    const select = `SELECT * FROM (VALUES ${values}) AS t(visitor, "at", event, arm, fare, other)`;
    const found = await reduced(fares({ files: "log.parquet" }), {}, { parquet: { "log.parquet": select } });
    expect(found.rejects).toBe(
      'log.parquet,2,not a number: fare,"2026-03-02, s, list, v3, one"\nlog.parquet,3,no unit,"never, s, list, 2"\n',
    );
  });
  it("holds nothing but its header where no row was rejected", async () => {
    expect(await rejectsOf(`${HEADER}\n${GOOD}\n${OTHER}`)).toEqual([]);
  });
  it("gives the line of a row that is not UTF-8, and takes a sign that only looks like a broken one", async () => {
    const bytes = Buffer.concat([
      Buffer.from(`${HEADER}\n${GOOD}\n`),
      Buffer.from("v3,2026-03-02,caf\xe9,list,1\nv4,caf\xe9\n", "latin1"),
      Buffer.from(`x,y\n${BAD}\n`),
    ]);
    expect((await rejectsOf(bytes)).map((row) => row.split(",").slice(1, 3))).toEqual([
      ["3", "cannot be read: not UTF-8"],
      ["4", "cannot be read: not UTF-8"],
      ["5", "cannot be read: the cells do not fit the header"],
      ["6", "not a number: fare"],
    ]);
    const sign = `${HEADER}\n${GOOD}\nv4,2026-03-02,s\uFFFD,list,1\n${BAD}\n`;
    expect((await rejectsOf(sign)).map((row) => row.split(",")[1])).toEqual(["4"]);
  });
  it("names reason and text, but no line, where the file does not tell which row it was", async () => {
    const line = JSON.stringify({ visitor: "v1", at: "2026-03-02", event: "s", arm: "list", fare: 1 });
    const bytes = Buffer.concat([
      Buffer.from(`${line}\n`),
      Buffer.from('{"x": "caf\xe9"}\n', "latin1"),
      Buffer.from("[]\n"),
    ]);
    expect((await rejectsOf(bytes, "log.ndjson")).map((row) => row.split(",").slice(0, 3))).toEqual([
      ["log.ndjson", "", "cannot be read: not UTF-8"],
      ["log.ndjson", "", "cannot be read: not a JSON object"],
    ]);
  });
});

describe("a record that does not end", () => {
  it("in one cell of more than 4 MB is one row that cannot be read, and the file goes on", async () => {
    for (const quote of ["", '"']) {
      const text = `${HEADER}\n${GOOD.replace("search", `${quote}${"s".repeat(5_000_000)}${quote}`)}\n${OTHER}\n`;
      const found = await reduced(fares(), { "log.csv": text });
      expect([found.rows, found.arms]).toEqual([{ rejected: 1, "in-follow-up": 1 }, [["0: 0", "1: 2"]]]);
      expect(found.rejects).toMatch(/^log\.csv,,cannot be read: longer than 4 MB,/);
    }
  });
  it.each([
    ["never", ""],
    ["far below", 'v8,2026-03-02,s",list,1\n'],
  ])("but %s, stops the run with its line: nobody knows where the file goes on", async (_, end) => {
    const rows = Array.from({ length: 250_000 }, (_, i) => `v${i},2026-03-02,s,list,1`).join("\n");
    const text = `${HEADER}\n${GOOD}\nv9,2026-03-02,"s,list,1\n${rows}\n${end}${OTHER}\n`;
    await expect(reduced(fares(), { "log.csv": text })).rejects.toThrow(
      /log\.csv: the record on line 3 does not end; look for a quote/,
    );
  });
  it("takes what is left of the file where that is little, each line of it a row that cannot be read", async () => {
    const found = await reduced(fares(), {
      "log.csv": `${HEADER}\n${GOOD}\n${OTHER}\nv9,2026-03-02,"s,list,1\n${GOOD}\n${GOOD}\n`,
    });
    expect(found.rows).toEqual({ rejected: 3, "in-follow-up": 2 });
    expect(found.rejects).toMatch(
      /^log\.csv,4,cannot be read.*\nlog\.csv,5,cannot be read.*\nlog\.csv,6,cannot be read/,
    );
  });
  it("or ends at the next quote of the log, is as many rows that cannot be read as it has lines", async () => {
    const found = await reduced(fares(), {
      "log.csv": `${HEADER}\n${GOOD}\nv9,2026-03-02,"s,list,1\n${GOOD}\nv8,2026-03-02,"s",list,1\n${OTHER}\n`,
    });
    expect(found.rows).toEqual({ rejected: 3, "in-follow-up": 2 });
    const why = "cannot be read: a quote in it or above it does not close where a cell ends";
    expect(found.rejects.split("\n").map((row) => row.split(",").slice(0, 3).join())).toEqual([
      `log.csv,3,${why}`,
      `log.csv,4,${why}`,
      `log.csv,5,${why}`,
      "",
    ]);
  });
});
