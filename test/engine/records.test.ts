import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { cells, type RawRecord, records } from "../../src/engine/records.ts";

async function* pieces(text: string, cuts: readonly number[]): AsyncGenerator<string> {
  let from = 0;
  for (const cut of [...cuts].sort((a, b) => a - b)) {
    yield text.slice(from, cut);
    from = cut;
  }
  yield text.slice(from);
}

type Shown = Omit<RawRecord, "width">;

async function recordsOf(text: string, cuts: readonly number[] = [], delimiter = ","): Promise<Shown[]> {
  const found: Shown[] = [];
  for await (const { line, text: own, width, cells: all } of records(pieces(text, cuts), delimiter)) {
    expect(width).toBe(all?.length ?? null);
    found.push({ line, text: own, cells: all });
  }
  return found;
}

/** The text is cut into records alike wherever its pieces end. */
async function recordsOfAnyPieces(text: string, delimiter = ","): Promise<Shown[]> {
  const whole = await recordsOf(text, [], delimiter);
  for (let cut = 0; cut <= text.length; cut++) {
    expect(await recordsOf(text, [cut], delimiter), `cut at ${cut}`).toEqual(whole);
  }
  const every = Array.from({ length: text.length + 1 }, (_, cut) => cut);
  expect(await recordsOf(text, every, delimiter), "cut everywhere").toEqual(whole);
  return whole;
}

describe("records of a text", () => {
  it("end at LF, CR LF or CR, whatever the others end at", async () => {
    const found = await recordsOfAnyPieces("a,b\n1,2\r\n3,4\r5,6");
    expect(found.map(({ line, cells }) => [line, cells])).toEqual([
      [1, ["a", "b"]],
      [2, ["1", "2"]],
      [3, ["3", "4"]],
      [4, ["5", "6"]],
    ]);
  });
  it.each(["\n", "\r\n", "\r"])("are not made by blank lines, nor by the last line's end: %j", async (end) => {
    const found = await recordsOfAnyPieces(["", "", "a,b", "", "1,2", "", ""].join(end));
    expect(found.map(({ line, cells }) => [line, cells])).toEqual([
      [3, ["a", "b"]],
      [5, ["1", "2"]],
    ]);
  });
  it("go on over the line ends within quotes, and the next one says its physical line", async () => {
    const found = await recordsOfAnyPieces('a,"b\n\r\nc\rd"\r\n"e","f ""g"", h"\n\n"",');
    expect(found).toEqual([
      { line: 1, text: 'a,"b\n\r\nc\rd"', cells: ["a", "b\n\r\nc\rd"] },
      { line: 5, text: '"e","f ""g"", h"', cells: ["e", 'f "g", h'] },
      { line: 7, text: '"",', cells: ["", ""] },
    ]);
  });
  it("leave a byte-order mark out at the start, and only there", async () => {
    const found = await recordsOfAnyPieces('\uFEFF"a",b\n\uFEFF1,2');
    expect(found.map((record) => record.cells)).toEqual([
      ["a", "b"],
      ["\uFEFF1", "2"],
    ]);
  });
  it("take a quote in a cell as it is, where none stands at the cell's start", async () => {
    const found = await recordsOfAnyPieces('a"b,c""d,"\n1",2"\n');
    expect(found.map((record) => record.cells)).toEqual([['a"b', 'c""d', "\n1", '2"']]);
  });
  it("may be spoilt by their quotes: a cell goes on behind the closing one, or never closes", async () => {
    const found = await recordsOfAnyPieces('"a"b,c\n"d,e');
    expect(found).toEqual([
      { line: 1, text: '"a"b,c', cells: null },
      { line: 2, text: '"d,e', cells: null },
    ]);
  });
  it("are one for each line where that swallowed several: a quote that was forgotten takes no row away unseen", async () => {
    const found = await recordsOfAnyPieces('a,b\n"c,d\r\n\r\ne,f\rg,"h"\ni,j\n"k,l\nm,n\n');
    expect(found).toEqual([
      { line: 1, text: "a,b", cells: ["a", "b"] },
      { line: 2, text: '"c,d', cells: null },
      { line: 4, text: "e,f", cells: null },
      { line: 5, text: 'g,"h"', cells: null },
      { line: 6, text: "i,j", cells: ["i", "j"] },
      { line: 7, text: '"k,l', cells: null },
      { line: 8, text: "m,n", cells: null },
    ]);
  });
  it("of tabs keep their commas, and the other way round", async () => {
    expect((await recordsOfAnyPieces('a,b\t"c\td"', "\t")).map((record) => record.cells)).toEqual([["a,b", "c\td"]]);
    expect((await recordsOfAnyPieces("a\tb,c")).map((record) => record.cells)).toEqual([["a\tb", "c"]]);
  });
  it("are none of an empty text, or of one with blank lines only", async () => {
    for (const text of ["", "\n", "\r", "\r\n\r\n", "\uFEFF", "\uFEFF\n"])
      expect(await recordsOfAnyPieces(text)).toEqual([]);
  });

  const cell = fc.string({ unit: fc.constantFrom("a", "1", ",", '"', "\n", "\r", "\t", " ", "é", "😀"), maxLength: 6 });
  const written = (text: string, delimiter: string, always: boolean) =>
    always || /["\r\n]/.test(text) || text.includes(delimiter) ? `"${text.replaceAll('"', '""')}"` : text;

  it("give back the cells that were written, with any quotes, line ends and pieces", async () => {
    const row = fc.array(fc.tuple(cell, fc.boolean()), { minLength: 1, maxLength: 4 });
    const log = fc.record({
      rows: fc.array(fc.tuple(row, fc.constantFrom("\n", "\r\n", "\r", "\n\n")), { maxLength: 6 }),
      delimiter: fc.constantFrom(",", "\t"),
      cuts: fc.array(fc.nat({ max: 200 }), { maxLength: 8 }),
    });
    await fc.assert(
      fc.asyncProperty(log, async ({ rows, delimiter, cuts }) => {
        const lines = rows.map(
          ([row, end]) => row.map(([text, always]) => written(text, delimiter, always)).join(delimiter) + end,
        );
        const expected = rows
          .filter((_, i) => !/^[\r\n]+$/.test(lines[i] ?? ""))
          .map(([row]) => row.map(([text]) => text));
        const found = await recordsOf(lines.join(""), cuts, delimiter);
        expect(found.map((record) => record.cells)).toEqual(expected);
      }),
      { numRuns: 300 },
    );
  });
  it("say the line that a text editor would show", async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(cell, { maxLength: 6 }), async (texts) => {
        const text = texts.map((one) => `x${written(one, ",", true)}\n"${one.replaceAll('"', "")}",y\n`).join("");
        for (const record of await recordsOf(text)) {
          const before = text.split(/\r\n|\r|\n/).slice(0, record.line - 1).length;
          const place =
            [...text.matchAll(/\r\n|\r|\n/g)].map((match) => match.index + match[0].length)[before - 1] ?? 0;
          expect(text.startsWith(record.text, place)).toBe(true);
        }
      }),
      { numRuns: 200 },
    );
  });
});

describe("cells of one record", () => {
  it.each([
    ["a,b", ["a", "b"]],
    ["a,", ["a", ""]],
    [",", ["", ""]],
    ['"",""', ["", ""]],
    ['""', [""]],
    ['""""', ['"']],
    ['"a""b"', ['a"b']],
    ['"a,b",c', ["a,b", "c"]],
    ['"a\nb"', ["a\nb"]],
    [' "a"', ["a"]],
    ['  "a"', ['  "a"']],
    ['"a"  ,b', ["a", "b"]],
    ['"a" "b"', ["a b"]],
    ['"a" b', null],
    ['"a"b', null],
    ['"a', null],
    ['"', null],
    ['"a""', null],
    ['a,"b', null],
  ])("of %j are %j", (record, expected) => {
    expect(cells(record, ",")).toEqual(expected);
  });
});
