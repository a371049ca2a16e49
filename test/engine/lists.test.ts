import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { type Files, fares, reduced } from "./small.ts";

// Six visitors, all counted unless a list drops them; each has a fare of its own, so that the total says who is left.
const IDS = ["v1", "v2", "v3", "a,b", 'q"q', "é 😀"];
const quoted = (text: string) => `"${text.replaceAll('"', '""')}"`;
const LOG = `visitor,at,event,arm,fare\n${IDS.map((id, i) => `${quoted(id)},2026-03-02,s,${i === 0 ? "calendar" : "list"},${10 ** i}`).join("\n")}\n`;

async function dropped(list: string | Uint8Array, file = "ids.csv", more: Files = {}): Promise<string[]> {
  const rest = `filters: [{name: test accounts, drop: units, listed-in: ${JSON.stringify(file)}}]`;
  const found = await reduced(fares({ rest }), { "log.csv": LOG, [file]: list, ...more });
  const total = Number(found.arms[0]?.[0]?.split(": ")[1]) + Number(found.arms[0]?.[1]?.split(": ")[1]);
  expect(found.units["filter:test accounts"] ?? 0).toBe(
    IDS.length - [...String(total)].filter((digit) => digit === "1").length,
  );
  return IDS.filter((_, i) => Math.floor(total / 10 ** i) % 10 === 0);
}

describe("a list of ids", () => {
  it.each([
    ["one id a line", "v1\nv2\n"],
    ["no end of the last line", "v1\nv2"],
    ["lines that end at CR LF", "v1\r\nv2\r\n"],
    ["lines that end at CR", "v1\rv2\r"],
    ["mixed line ends", "v1\r\nx\nv2\r"],
    ["blank lines", "\n\nv1\n\n\nv2\n\n"],
    ["a byte-order mark", "\uFEFFv1\nv2\n"],
    ["a byte-order mark and CR LF", "\uFEFFv1\r\nv2\r\n"],
    ["quotes", '"v1"\n"v2"\n'],
    ["an id twice, and some that the log lacks", "v1\nv1\nv2\nv77\nV3\nv3 \n"],
    ["a column headed like the unit's", "visitor\nv1\nv2\n"],
    ["such a column behind a byte-order mark", "\uFEFFvisitor\r\nv1\r\nv2\r\n"],
    ["such a column among others", "why,visitor,since\nstaff,v1,2026\nstaff,v2,2025\nv3,,\n"],
    ["such a column in quotes, blank lines before", '\n\n"visitor","why"\n"v1","of the\nhouse"\n"v2",\n'],
    ["rows of fewer or more cells", "visitor,why\nv1\nv2,x,y\n,v3\n"],
    ["spaces around quotes", 'visitor,why\n "v1" ,x\n"v2" , "y"\n'],
  ])("may have %s", async (_, text) => {
    expect(await dropped(text)).toEqual(["v1", "v2"]);
  });
  it("holds ids of any characters", async () => {
    expect(await dropped(`${["a,b", 'q"q', "é 😀"].map(quoted).join("\n")}\n`)).toEqual(["a,b", 'q"q', "é 😀"]);
    expect(await dropped("é 😀\n")).toEqual(["é 😀"]);
  });
  it("may be of tabs, packed, and of any ending", async () => {
    expect(await dropped("why\tvisitor\nx\tv1\ny,y\tv2\n", "ids.tsv")).toEqual(["v1", "v2"]);
    expect(await dropped(gzipSync("v1\nv2\n"), "ids.csv.gz")).toEqual(["v1", "v2"]);
    expect(await dropped(gzipSync("visitor\twhy\nv1\tx\nv2\ty\n"), "ids.TSV.GZ")).toEqual(["v1", "v2"]);
    expect(await dropped("v1\nv2\n", "ids.txt")).toEqual(["v1", "v2"]);
    expect(await dropped("v1\nv2\n", "ids")).toEqual(["v1", "v2"]);
  });
  it("may have a name that looks like a pattern", async () => {
    for (const file of ["ids[1].csv", "ids*.csv", "what?.csv", "it's.csv", "a=b/c0=v3/ids.csv"]) {
      expect(await dropped("v1\nv2\n", file, { "ids1.csv": "v3\n", "idsx.csv": "v3\n" }), file).toEqual(["v1", "v2"]);
    }
  });
  it("may be empty, or hold a header only: then it drops nobody", async () => {
    for (const text of ["", "\n", "\uFEFF", "visitor\n", "visitor,why\n"]) expect(await dropped(text)).toEqual([]);
  });
  it("is counted and fingerprinted as it stands", async () => {
    const rest = "filters: [{name: x, drop: units, listed-in: ids.csv}]";
    const { reduction } = await reduced(fares({ rest }), { "log.csv": LOG, "ids.csv": "abc" });
    // FIPS 180-2, appendix B.1: SHA-256 of "abc".
    const sha256 = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";
    expect(reduction.lists).toEqual([{ name: "ids.csv", bytes: 3, sha256, rows: 1 }]);
  });
  it("of several columns must have one that is headed like the unit's", async () => {
    await expect(dropped("id,why\nv1,x\n")).rejects.toThrow(/ids\.csv has several columns and none is headed visitor/);
  });
  it("that ends early stops the run: nobody knows who else stands in it", async () => {
    const packed = gzipSync(`visitor\n${Array.from({ length: 5_000 }, (_, i) => `x${i * 7919}`).join("\n")}\nv1\n`);
    await expect(dropped(packed.subarray(0, -300), "ids.csv.gz")).rejects.toThrow(/ids\.csv\.gz ends early/);
    await expect(dropped("", "ids.csv.gz")).rejects.toThrow(/ids\.csv\.gz ends early/);
  });
  it("with a row that cannot be cut stops the run with its line", async () => {
    await expect(dropped('visitor,why\n\nv1,"x"y\nv2,z\n')).rejects.toThrow(
      /ids\.csv, line 3, cannot be cut into cells/,
    );
  });
  it("that is no text, such as a Parquet file, stops the run: taken for ids it would remove nobody", async () => {
    await expect(dropped("PAR1\u0015\0\u0015\nv1\n")).rejects.toThrow(
      "ids.csv holds bytes that no text has. Give the ids as text, one a line.",
    );
  });
  it("without a header takes each line whole, a comma or a quote in it included", async () => {
    expect(await dropped('v1\na,b\nq"q\n')).toEqual(["v1", "a,b", 'q"q']);
  });
  it("that is not UTF-8 names no one wrongly", async () => {
    const latin = Buffer.from("v1\ncaf\xe9\nv2\n", "latin1");
    expect(await dropped(latin)).toEqual(["v1", "v2"]);
  });
  it("serves the filter that names it, and several filters may name several", async () => {
    const rest = `filters:
  - {name: staff, drop: units, listed-in: staff.csv}
  - {name: load test, drop: units, listed-in: load.csv}`;
    const found = await reduced(fares({ rest }), {
      "log.csv": LOG,
      "staff.csv": "v2\nv3\n",
      "load.csv": "visitor\nv3\nv1\n",
    });
    expect(found.units).toEqual({ "filter:staff": 2, "filter:load test": 1, analysed: 3 });
  });
});
