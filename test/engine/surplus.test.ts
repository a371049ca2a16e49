import { gzipSync } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { records } from "../../src/engine/records.ts";
import { surplusFinder } from "../../src/engine/surplus.ts";
import { fares, reduced, zstandardOf } from "./small.ts";

function found(text: string, width: number, cuts: readonly number[] = [], delimiter: "," | "\t" = ","): boolean {
  const bytes = Buffer.from(text);
  const finder = surplusFinder(delimiter, width);
  const places = [0, ...cuts.map((cut) => Math.min(cut, bytes.length)).sort((a, b) => a - b), bytes.length];
  for (const [i, from] of places.slice(0, -1).entries()) finder.add(bytes.subarray(from, places[i + 1]));
  return finder.end();
}

describe("rows with empty cells more than the header", () => {
  it.each([
    ["a,b\n1,2,\n", true],
    ["a,b\n1,2,", true],
    ["a,b\r\n1,2,,\r\n", true],
    ["a,b\r1,2,,,\r3,4", true],
    ['a,b\n1,"2",\n', true],
    ['a,b\n"1\n,2",3,\n', true],
    ["\uFEFFa,b\n\n\n1,2,\n", true],
    ["a,b\n1,\n", false],
    ["a,b\n,\n1,2\n", false],
    ["a,b\n1,2,3\n", false],
    ["a,b\n1,2,3,\n", false],
    ['a,b\n1,2,""\n', false],
    ["a,b\n1,2, \n", false],
    ['a,b\n1,"2,\n"\n', false],
    ['a,b\n1, "2,\n"\n', false],
    ['a,b\n"1"",\n",2\n', false],
    // the header itself is no row, and its width is what counts
    ["a,b,\n1,2,\n", false],
    ['\uFEFF"a,\n",b\n1,2\n', false],
    ["", false],
  ])("in %j: %s, wherever the pieces end", (text, expected) => {
    const width = text.startsWith("a,b,") ? 3 : 2;
    for (let cut = 0; cut <= text.length; cut++) expect(found(text, width, [cut])).toBe(expected);
    expect(found(text.replaceAll(",", "\t"), width, [], "\t")).toBe(expected);
  });

  it("are those that the cutting into records finds, in any text whose quotes are right", async () => {
    const piece = fc.constantFrom(
      "a",
      "b1",
      ",",
      ",",
      ",",
      '"q"',
      '"x,\n"',
      ' "s" ',
      "\n",
      "\n",
      "\r\n",
      "\r",
      " ",
      "é",
    );
    const text = fc.array(piece, { maxLength: 16 }).map((pieces) => `a,b\n${pieces.join("")}\n1,2\n`);
    const cuts = fc.array(fc.nat({ max: 60 }), { maxLength: 4 });
    let hits = 0;
    await fc.assert(
      fc.asyncProperty(text, cuts, async (log, at) => {
        const all = [];
        for await (const record of records(inOnePiece(log), ",")) all.push(record);
        fc.pre(all.every(({ cells }) => cells !== null));
        const expected = all.slice(1).some(({ text: own, cells }) => {
          const surplus = (cells?.length ?? 0) - 2;
          return surplus > 0 && own.endsWith(",".repeat(surplus));
        });
        if (expected) hits += 1;
        expect(found(log, 2, at)).toBe(expected);
      }),
      { numRuns: 500 },
    );
    expect(hits).toBeGreaterThan(20);
  });

  const HEADER = "visitor,at,event,arm,fare";
  const LOG = `${HEADER}\nv1,2026-03-02,search,list,1.5\nv2,2026-03-02,search,calendar,2,\nv3,2026-03-02,search,list,\nv4,2026-03-02,search,list,3,,\n`;

  it("are rejected, with their line, in a plain file and in packed ones", async () => {
    for (const [name, content] of [
      ["log.csv", LOG],
      ["log.csv.gz", gzipSync(LOG)],
      ["log.csv.zst", await zstandardOf(LOG)],
    ] as const) {
      const { rows, rejects, arms } = await reduced(fares({ files: name }), { [name]: content });
      expect(rows, name).toEqual({ rejected: 2, "in-follow-up": 2 });
      expect(rejects.trimEnd().split("\n"), name).toEqual([
        `${name},3,cannot be read: the cells do not fit the header,"v2,2026-03-02,search,calendar,2,"`,
        `${name},5,cannot be read: the cells do not fit the header,"v4,2026-03-02,search,list,3,,"`,
      ]);
      expect(arms, name).toEqual([["2: 1.5", "0: 0"]]);
    }
  });

  it("are found behind a megabyte of rows without one, and with one that ends a piece", async () => {
    const rows = Array.from({ length: 60_000 }, (_, i) => `v${i},2026-03-02,search,list,${i % 7}`);
    const text = `${HEADER}\n${rows.join("\n")}\nlast,2026-03-02,search,list,1,\n`;
    expect(Buffer.byteLength(text)).toBeGreaterThan(1 << 20);
    expect(found(text, 5, [1 << 20])).toBe(true);
    expect(found(text, 5, [text.length - 1])).toBe(true);
    expect(found(text.replace(",1,\n", ",1\n"), 5, [1 << 20, 70])).toBe(false);
  });
});

async function* inOnePiece(text: string): AsyncGenerator<string> {
  yield text;
}
