import { mkdirSync, mkdtempSync, readlinkSync, rmSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { enginePath, fingerprint, formatOf, logFiles } from "../../src/engine/files.ts";
import { asAnybody } from "./small.ts";

let folder = "";
const NAMES = [
  "b.csv",
  "a.csv",
  "B.csv",
  "10.csv",
  "2.csv",
  "é.csv",
  "z.tsv.gz",
  "notes.txt",
  ".hidden.csv",
  "log[1].csv",
  "log1.csv",
  "what*.csv",
  "whatever.csv",
  "who?.csv",
  "{a,b}.csv",
  'it\'s "quoted".csv',
  "with space.csv",
  "data/x.csv",
  "data/deep/er/y.csv",
  "data/x.parquet",
  "data/old.csv/inside.csv",
];

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "closeout-files-"));
  for (const name of NAMES) {
    mkdirSync(dirname(join(folder, name)), { recursive: true });
    writeFileSync(join(folder, name), name);
  }
  symlinkSync(join(folder, "a.csv"), join(folder, "data", "link.csv"));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

async function found(...files: string[]): Promise<string[]> {
  const { files: all, problems } = await logFiles([{ files }], folder);
  expect(problems).toEqual([]);
  return all.map(({ name }) => name);
}

describe("the files of an entry", () => {
  it.each([
    ["a plain path", ["a.csv"], ["a.csv"]],
    ["a path that goes up and down", ["data/../a.csv"], ["a.csv"]],
    ["a pattern for one folder", ["data/*.csv"], ["data/link.csv", "data/x.csv"]],
    [
      "a pattern for all folders below",
      ["data/**/*.csv"],
      ["data/deep/er/y.csv", "data/link.csv", "data/old.csv/inside.csv", "data/x.csv"],
    ],
    ["a pattern with alternatives", ["{a,b}[.]csv"], ["a.csv", "b.csv"]],
    ["a pattern with ?", ["?.csv"], ["2.csv", "B.csv", "a.csv", "b.csv", "é.csv"]],
    ["a pattern with a class", ["[0-9]*.csv"], ["10.csv", "2.csv"]],
    [
      "a list, in the order of the names and not of the list",
      ["b.csv", "a.csv", "2.csv", "10.csv"],
      ["10.csv", "2.csv", "a.csv", "b.csv"],
    ],
    ["a file that is named twice, once", ["a.csv", "./a.csv", "[a].csv", "data/../a.csv"], ["a.csv"]],
    ["a name with brackets, which is a name and not a pattern", ["log[1].csv"], ["log[1].csv"]],
    ["a name with braces", ["{a,b}.csv"], ["{a,b}.csv"]],
    ["a name with a star", ["what*.csv"], ["what*.csv"]],
    ["a name with a question mark", ["who?.csv"], ["who?.csv"]],
    ["a name with quotes", ['it\'s "quoted".csv'], ['it\'s "quoted".csv']],
    ["a name with a space and one with é", ["with space.csv", "é.csv"], ["with space.csv", "é.csv"]],
  ])("are those of %s", async (_, patterns, expected) => {
    expect(await found(...patterns)).toEqual(expected);
  });
  it("may be named by their whole path", async () => {
    expect(await found(join(folder, "a.csv"))).toEqual(["a.csv"]);
    expect(await found(join(folder, "data", "*.csv"))).toEqual(["data/link.csv", "data/x.csv"]);
  });
  it("lie in the folder of the plan, whatever the current one, and are named from there", async () => {
    const { files } = await logFiles([{ files: ["../a.csv"] }], join(folder, "data"));
    expect(files.map(({ name, path }) => [name, path])).toEqual([["../a.csv", join(folder, "a.csv")]]);
  });
  it("are sorted within each entry, and one file may stand in two", async () => {
    const { files } = await logFiles([{ files: ["b.csv"] }, { files: ["*.csv"] }, { files: ["a.csv"] }], folder);
    expect(files.filter(({ name }) => /^[ab]\.csv$/.test(name)).map(({ source, name }) => [source, name])).toEqual([
      [0, "b.csv"],
      [1, "a.csv"],
      [1, "b.csv"],
      [2, "a.csv"],
    ]);
  });
  it("tell by their ending how they are read", () => {
    const formats = ["a.csv", "a.csv.gz", "a.csv.zst", "A.CSV.GZ", "a.tsv", "a.ndjson.zst", "a.jsonl", "a.parquet"].map(
      formatOf,
    );
    expect(formats).toEqual(["csv", "csv", "csv", "csv", "tsv", "ndjson", "ndjson", "parquet"]);
    for (const name of ["a", "csv", "a.txt", "a.json", "a.csv.bz2", "a.csv.zip", "a.parquet.gz", "a.csv.gz.gz"]) {
      expect(formatOf(name), name).toBeNull();
    }
  });
});

describe("what leads to no file", () => {
  it("is a problem at its place in the plan, with the nearest name", async () => {
    const { files, problems } = await logFiles([{ files: ["a.cvs"] }, { files: ["a.csv", "none/*.csv"] }], folder);
    expect(files.map(({ name }) => name)).toEqual(["a.csv"]);
    expect(problems).toMatchObject([
      { path: ["log", 0, "files"], message: expect.stringContaining("There is no file a.cvs."), nearest: "a.csv" },
      { path: ["log", 1, "files", 1], message: expect.stringContaining("No file matches none/*.csv.") },
    ]);
  });
  it("is a folder too, even one that is called like a file", async () => {
    const { problems } = await logFiles([{ files: ["data"] }, { files: ["data/old.csv"] }], folder);
    expect(problems.map(({ path }) => path)).toEqual([
      ["log", 0, "files"],
      ["log", 1, "files"],
    ]);
    expect(problems[0]?.message).toBe("data is a folder. Name the files in it, such as data/*.csv.");
  });
  it("is a place that may not be looked into, and is not told as missing", async () => {
    const secret = join(folder, "secret");
    mkdirSync(secret);
    writeFileSync(join(secret, "a.csv"), "x\n");
    const { problems } = await asAnybody(folder, secret, () => logFiles([{ files: ["secret/a.csv"] }], folder));
    expect(problems[0]?.message).toBe("secret/a.csv may not be read by you. Ask for the right to read it.");
  });
  it("is an address too, since nothing is fetched", async () => {
    const { problems } = await logFiles([{ files: ["s3://bucket/a.csv"] }], folder);
    expect(problems[0]?.message).toBe("s3://bucket/a.csv is an address. Fetch the file, and name where it lies.");
  });
  it("and an ending that is none of ours is one, for each such file", async () => {
    const { files, problems } = await logFiles([{ files: ["*.txt", "a.csv"] }], folder);
    expect(files.map(({ name }) => name)).toEqual(["a.csv"]);
    expect(problems).toMatchObject([{ path: ["log", 0, "files", 0], message: expect.stringContaining("notes.txt") }]);
  });
  it("leaves hidden files out of a pattern", async () => {
    expect(await found("*.csv")).not.toContain(".hidden.csv");
    expect(await found(".hidden.csv")).toEqual([".hidden.csv"]);
  });
});

describe("the path that the engine is given", () => {
  it("is the file's own, unless the engine would take it for a pattern", async () => {
    expect(await enginePath(join(folder, "a.csv"), folder, 0)).toBe(join(folder, "a.csv"));
    for (const [index, name] of ["log[1].csv", "what*.csv", "who?.csv"].entries()) {
      const link = await enginePath(join(folder, name), folder, 100 + index);
      expect(link).toBe(join(folder, `log-${100 + index}.csv`));
      expect(readlinkSync(link)).toBe(join(folder, name));
    }
  });
  it("has its ending in small letters, for the engine minds them", async () => {
    expect(await enginePath("/x/A.CSV.GZ", folder, 210)).toBe(join(folder, "log-210.csv.gz"));
    expect(await enginePath("/x/A.csv.gz", folder, 211)).toBe("/x/A.csv.gz");
  });
  it("keeps the ending that tells how the file is packed", async () => {
    expect(await enginePath("/x/[a].csv.gz", folder, 200)).toBe(join(folder, "log-200.csv.gz"));
    expect(await enginePath("/x[1]/a.b.NDJSON.ZST", folder, 201)).toBe(join(folder, "log-201.ndjson.zst"));
    expect(await enginePath("/x*/a.parquet", folder, 202)).toBe(join(folder, "log-202.parquet"));
  });
});

describe("a file's fingerprint", () => {
  it("is its size and SHA-256", async () => {
    // FIPS 180-2, appendix B.1: SHA-256 of "abc".
    writeFileSync(join(folder, "abc"), "abc");
    expect(await fingerprint(join(folder, "abc"))).toEqual({
      bytes: 3,
      sha256: "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad",
    });
  });
});
