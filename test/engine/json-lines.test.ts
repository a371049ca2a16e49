import { describe, expect, it } from "vitest";
import { fares, reduced } from "./small.ts";

const ARMS = [["1: 1.5", "1: 2"]];

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
