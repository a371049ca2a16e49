import { writeFileSync } from "node:fs";
import { join as joinPath } from "node:path";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { contentOf, textOf } from "../../src/engine/compression.ts";
import type { Engine } from "../../src/engine/engine.ts";
import { records } from "../../src/engine/records.ts";
import { rewritten } from "../../src/engine/rewrite.ts";
import type { FileGroup } from "../../src/engine/source.ts";
import { brokenQuotes, sql, unreadableRows } from "../../src/engine/sql/index.ts";
import { read } from "../../src/engine/sql/read.ts";
import { surplusFinder } from "../../src/engine/surplus.ts";
import { inEngine } from "./duck.ts";

// The engine reads a file, and where rows are rejected Node cuts it into records again, to find their lines; a file that
// the engine refuses is rewritten from those records. So both must cut every text alike, also one that is no proper csv.

interface Cut {
  readonly rows: readonly (readonly string[])[];
  readonly unreadable: number;
}
/** The engine refused the file, met a cell whose quote closes in its middle, or let empty cells pass: then it is rewritten. */
const REWRITTEN = "rewritten";

async function cutByNode(path: string, width: number): Promise<Cut> {
  const all = [];
  for await (const record of records(textOf(path), ",")) all.push(record);
  const body = all.slice(1);
  const readable = body.filter((record) => record.width === width);
  return {
    rows: readable.map(({ cells }) => cells ?? []),
    unreadable: body.length - readable.length,
  };
}

async function cutByEngine(engine: Engine, group: FileGroup): Promise<Cut | typeof REWRITTEN> {
  const wanted = group.columns;
  await engine.run(sql`
    CREATE OR REPLACE TEMP TABLE rows (file INTEGER, source INTEGER, reason INTEGER, fate INTEGER, text VARCHAR)`);
  const rows = await engine.query(sql`SELECT * FROM (${read(group, wanted)})`);
  await engine.run(unreadableRows(group));
  const [count] = await engine.query(sql`SELECT count(*) AS rows FROM rows`);
  const [broken] = await engine.query(brokenQuotes());
  await dropRejects(engine);
  const finder = surplusFinder(",", wanted.length);
  for (const { path } of group.files) for await (const piece of contentOf(path)) finder.add(piece);
  if (Number(broken?.records) > 0 || finder.end()) return REWRITTEN;
  return {
    rows: rows.map((row) => wanted.map((_, i) => String(row[`c${i}`] ?? ""))),
    unreadable: Number(count?.rows),
  };
}

async function dropRejects(engine: Engine): Promise<void> {
  await engine.run(sql`DROP TABLE IF EXISTS reject_errors`);
  await engine.run(sql`DROP TABLE IF EXISTS reject_scans`);
}

let files = 0;
function groupOf(folder: string, text: string, width: number, skip = 0): FileGroup {
  const path = joinPath(folder, `reader-${files++}.csv`);
  writeFileSync(path, text);
  const columns = Array.from({ length: width }, (_, i) => `column ${i}`);
  const kinds = columns.map(() => "text" as const);
  return { source: 0, format: "csv", files: [{ index: 0, path }], columns, engineNames: columns, kinds, skip };
}

/** Node's cut, the engine's where it does not refuse the file, and the engine's of the rewritten file. */
async function cuts(engine: Engine, folder: string, text: string, width: number) {
  const group = groupOf(folder, text, width);
  const own = await cutByNode(group.files[0]?.path ?? "", width);
  const engines = await cutByEngine(engine, group).catch(async (error: unknown) => {
    if (!String(error).includes("reached an invalid state")) throw error;
    await dropRejects(engine);
    return REWRITTEN;
  });
  return { own, engines, again: await cutByEngine(engine, await rewritten(group, folder)) };
}

const HEADERS = ["a", "a,b", "a,b,c"];

describe("the engine's reader and ours", () => {
  // Each row is one record of a file of three columns; how it ends was seen on DuckDB 1.5 and is told where it is more
  // than RFC 4180: spaces around quotes. It lets empty cells at the end pass too: such a file is read from a copy.
  it.each([
    ["1,2,3", ["1", "2", "3"]],
    ["1,2,", ["1", "2", ""]],
    [",,", ["", "", ""]],
    ["1,2", null],
    ["1", null],
    ["1,2,3,4", null],
    ["1,2,3,", null],
    ["1,2,3,,,", null],
    ['1,2,"3",,', null],
    ["1,2,3,,x", null],
    ["1,2,3, ", null],
    ['1,2,3,""', null],
    [" 1, 2 ,3 ", [" 1", " 2 ", "3 "]],
    ['1, "2",3', ["1", "2", "3"]],
    ['1,  "2",3', ["1", '  "2"', "3"]],
    ['1,"2"  ,3', ["1", "2", "3"]],
    [' "1","2","3" ', ["1", "2", "3"]],
    ['1,"2" "x",3', ["1", "2 x", "3"]],
    ['1,"2" "",3', ["1", "2 ", "3"]],
    ['1,"2"x,3', null],
    ['1,"2" x,3', null],
    ['1,2"x",3', ["1", '2"x"', "3"]],
    ['1,"2""",3', ["1", '2"', "3"]],
    ['1,"""2""",3', ["1", '"2"', "3"]],
    ['"a\nb","c\r\nd","e\rf"', ["a\nb", "c\r\nd", "e\rf"]],
    ['"","",""', ["", "", ""]],
    ["é,😀,\u2028", ["é", "😀", "\u2028"]],
    ["1;2;3", null],
    ["# no comment,2,3", ["# no comment", "2", "3"]],
    ["\\,\\\\,\\n", ["\\", "\\\\", "\\n"]],
    ["'1',2,3", ["'1'", "2", "3"]],
    ["NULL,null,NA", ["NULL", "null", "NA"]],
  ])("both cut %j, and what follows, alike", async (record, cells) => {
    await inEngine(async (engine, folder) => {
      const { own, engines, again } = await cuts(engine, folder, `a,b,c\n${record}\n7,8,9\n`, 3);
      const expected = {
        rows: [...(cells === null ? [] : [cells]), ["7", "8", "9"]],
        unreadable: cells === null ? 1 : 0,
      };
      expect(own).toEqual(expected);
      if (engines !== REWRITTEN || cells !== null) expect(engines).toEqual(expected);
      expect(again).toEqual(expected);
    });
  });
  it("what follows a quote that never closes cannot be read, and each of its lines counts", async () => {
    await inEngine(async (engine, folder) => {
      const { own, engines, again } = await cuts(engine, folder, 'a,b,c\n1,2,3\n4,"5,6\n7,8,9\n', 3);
      expect(own).toEqual({ rows: [["1", "2", "3"]], unreadable: 2 });
      expect([engines, again]).toEqual([REWRITTEN, own]);
    });
  });
  it("both cut any text alike, and so is one that is rewritten", async () => {
    const piece = fc.constantFrom(
      "a",
      "b1",
      ",",
      ",",
      ",",
      '"',
      '""',
      "\n",
      "\n",
      "\n\n",
      "\r\n",
      "\r",
      " ",
      "x,y,z",
      '"q"',
      "é",
    );
    const text = fc.array(piece, { maxLength: 14 }).map((pieces) => pieces.join(""));
    await inEngine(async (engine, folder) => {
      await fc.assert(
        fc.asyncProperty(fc.constantFrom(...HEADERS), text, async (header, body) => {
          const width = header.split(",").length;
          const { own, engines, again } = await cuts(engine, folder, `${header}\n${body}\n${header}\n`, width);
          if (engines !== REWRITTEN) expect(engines).toEqual(own);
          expect(again).toEqual(own);
        }),
        { numRuns: 300 },
      );
    });
  });
});
