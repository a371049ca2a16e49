import { readdirSync, readFileSync } from "node:fs";
import { join as joinPath } from "node:path";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type Hole, join, name, type Statement, sql } from "../../src/engine/sql/sql.ts";
import { inEngine } from "./duck.ts";

const HOSTILE = [
  "",
  "'",
  "''",
  "a'b",
  '"',
  "\\",
  "\\'",
  "\\\\' OR 1 = 1 --",
  "'; DROP TABLE kept; --",
  "/* open",
  "-- to the end",
  "$1 ? :name $\u007Bx} {{y}} %s",
  "\0",
  "a\0b",
  "\0'; DROP TABLE kept; --\0",
  "' || chr(0) || '",
  "line\nbreak\r\nand\ttab",
  "a \uFEFFmark",
  "😀 é e\u0301 \u202Eright to left\u202C \u2028 ʼ ＇ ’",
  "NULL",
  "CAST(1 AS INTEGER)",
];

describe("a value in a statement", () => {
  it.each(HOSTILE)("comes back as it was, and is no SQL: %j", async (value) => {
    await inEngine(async (engine) => {
      await engine.run(sql`CREATE TABLE kept AS SELECT 1 AS one`);
      const rows = await engine.query(sql`SELECT ${value} AS found, ${value} = ${value} AS same, one FROM kept`);
      expect(rows).toEqual([{ found: value, same: true, one: 1 }]);
    });
  });
  it("comes back as it was, whatever the text", async () => {
    const text = fc.string({
      unit: fc.constantFrom("'", '"', "\\", "\0", ";", "-", "/", "*", "$", "a", "é", "😀", "\n"),
    });
    await inEngine(async (engine) => {
      await fc.assert(
        fc.asyncProperty(fc.array(text, { minLength: 1, maxLength: 60 }), async (texts) => {
          const columns = texts.map((value, i) => sql`${value} AS ${name(`c${i}`)}`);
          const [row = {}] = await engine.query(sql`SELECT ${join(columns, ", ")}`);
          expect(Object.values(row)).toEqual(texts);
        }),
        { numRuns: 20 },
      );
    });
  });
  it.each([0n, -1n, 2n ** 63n - 1n, -(2n ** 63n), 2n ** 127n - 1n, -(2n ** 127n - 1n), 5, -5, Number.MIN_SAFE_INTEGER])(
    "comes back as the whole number it was: %s",
    async (value) => {
      await inEngine(async (engine) => {
        const [row = {}] = await engine.query(sql`SELECT CAST(${value} AS HUGEINT) AS found`);
        expect(row.found).toBe(BigInt(value));
      });
    },
  );
  it("keeps its sign after a minus: two of them would begin a comment", async () => {
    await inEngine(async (engine) => {
      const rows = await engine.query(sql`SELECT 1 -${-2n} AS big, 1 -${-2} AS small`);
      expect(rows.map((row) => [Number(row.big), Number(row.small)])).toEqual([[3, 3]]);
    });
  });
  it("may be true, false or nothing", async () => {
    await inEngine(async (engine) => {
      expect(await engine.query(sql`SELECT ${true} AS yes, ${false} AS no, ${null} AS nothing`)).toEqual([
        { yes: true, no: false, nothing: null },
      ]);
    });
  });
  it.each([0.5, Number.NaN, Number.POSITIVE_INFINITY, 2 ** 53])(
    "is refused as a plain number when it is not whole and exact: %s",
    (value) => {
      expect(() => sql`SELECT ${value}`).toThrow(/write it with double/);
    },
  );
});

describe("an identifier", () => {
  it.each(HOSTILE.filter((text) => text !== "" && !text.includes("\0")))("is quoted whole: %j", async (identifier) => {
    await inEngine(async (engine) => {
      await engine.run(sql`CREATE TABLE kept AS SELECT 7 AS ${name(identifier)}`);
      expect(await engine.query(sql`SELECT ${name(identifier)} AS found FROM kept`)).toEqual([{ found: 7 }]);
    });
  });
});

describe("only sql.ts makes statements", () => {
  const ENGINE = new URL("../../src/engine/", import.meta.url).pathname;
  const sources = readdirSync(ENGINE, { recursive: true, encoding: "utf8" })
    .filter((file) => file.endsWith(".ts") && file !== "sql/sql.ts")
    .map((file) => ({ file, text: readFileSync(joinPath(ENGINE, file), "utf8") }));

  it("so an object that merely has a text is none, for the compiler and when it runs", () => {
    const record = { line: 1, text: "1; DROP TABLE kept" };
    // @ts-expect-error: a record of the log has a text, but is no statement
    expect(() => sql`SELECT ${record}`).toThrow(/no statement/);
    // @ts-expect-error: nor in a list
    expect(() => join([record], ", ")).toThrow(/no statement/);
    // @ts-expect-error: a string is a value, never a statement
    const statement: Statement = "SELECT 1";
    expect(statement).toBe("SELECT 1");
  });
  it("and no other file gets round it with a cast", () => {
    expect(sources.length).toBeGreaterThan(25);
    const casts = /\bas (unknown as )?(Statement|Hole)\b|\bas (any|never)\b|@ts-(ignore|expect-error)/;
    expect(sources.filter(({ text }) => casts.test(text)).map(({ file }) => file)).toEqual([]);
  });
  it("and only duckdb.ts hands text to the engine, a statement's or text without holes", () => {
    const runs = /\.(run|runAndRead\w*|stream\w*|prepare|extractStatements)\(/;
    for (const { file, text } of sources) {
      const lines = text.split("\n").filter((line) => runs.test(line) && !/\bengine\.run\(/.test(line));
      if (file !== "duckdb.ts") expect(lines, file).toEqual([]);
      else for (const line of lines) expect(line).toMatch(/\((statement\.text|"[^"$]*")\)/);
    }
  });
  it("and a stage's values are holes: none is put between quotes by hand", () => {
    // '${...}' inside a template would make SQL of a value; the tag's own quotes stand in sql.ts.
    const quoted = /'[^'\n]*\$\{[^'\n]*'/;
    for (const { file, text } of sources.filter(({ file }) => file.startsWith("sql/"))) {
      const templates = [...text.matchAll(/sql`((?:[^`\\]|\\.|\$\{[^}]*\})*)`/g)].map((match) => match[1] ?? "");
      for (const template of templates) {
        const bare = template.replace(/\$\{(?:[^{}]|\{[^{}]*\})*\}/g, (hole) => hole.replaceAll("'", ""));
        expect(bare.split(/'(?:[^']|'')*'/).join(""), file).not.toMatch(/'/);
        expect(bare.match(/'(?:[^']|'')*'/g)?.filter((text) => quoted.test(text)) ?? [], file).toEqual([]);
      }
    }
  });
  it("and takes nothing but statements and plain values", () => {
    const refused: unknown[] = [undefined, {}, [], () => "", Symbol("x")];
    for (const value of refused) expect(() => sql`SELECT ${value as Hole}`).toThrow();
  });
});
