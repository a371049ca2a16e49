import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { diceOf } from "../oracle/random/dice.ts";
import { type Files, reduced } from "./small.ts";

// One log, in every form that a file may have: what comes of it must be the same, but for the list of the files.

interface LogRow {
  readonly id: string;
  readonly visitor: string;
  /** On Oslo's clocks: no offset stands in any of the files. */
  readonly at: string;
  readonly event: string;
  readonly arm: string | null;
  readonly fare: string | null;
  readonly staff: boolean | null;
  readonly note: string | null;
}

const ROWS: readonly LogRow[] = (() => {
  const dice = diceOf(11);
  const units = Array.from({ length: 24 }, (_, i) => `visitor ${i}, "é"`);
  const rows = units.flatMap((visitor, i): LogRow[] => {
    const arm = i % 3 === 0 ? "list" : "calendar";
    const hour = String(dice.below(24)).padStart(2, "0");
    const staff = dice.chance(0.2);
    const base = { visitor, staff, note: null, fare: null };
    const search = { ...base, id: `${i}`, at: `2026-03-2${i % 10}T${hour}:15:00.5`, event: "search", arm };
    const bookings = Array.from({ length: dice.below(4) }, (_, j) => ({
      ...base,
      id: `${1000 + 10 * i + j}`,
      at: `2026-03-29T0${dice.below(5)}:30:00.25`,
      event: "booking",
      arm: dice.chance(0.5) ? arm : null,
      fare: dice.chance(0.8) ? `${dice.below(2000)}.${dice.pick(["5", "125", "000000001", "99"])}` : null,
      note: dice.pick([null, "line\nbreak", 'a "quote"', "tab\there", "a,b"]),
      staff: dice.chance(0.5) ? staff : null,
    }));
    return [search, ...bookings];
  });
  // Copies of rows, of which the later differs.
  return [...rows, ...rows.slice(0, 3).map((row) => ({ ...row, at: "2026-04-02T10:00:00.75", fare: "7" }))];
})();

const COLUMNS = ["id", "visitor", "at", "event", "arm", "fare", "staff", "note"] as const;

function delimited(rows: readonly LogRow[], delimiter: string, end = "\n"): string {
  const cell = (value: string | boolean | null) => {
    const text = value === null ? "" : String(value);
    return /["\r\n\t,]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
  };
  return [
    COLUMNS.join(delimiter),
    ...rows.map((row) => COLUMNS.map((column) => cell(row[column])).join(delimiter)),
  ].join(end);
}
/** Numbers as numbers, truth as truth; of a missing value null, an empty text, or no key at all. */
function lines(rows: readonly LogRow[]): string {
  return rows
    .map((row, i) => {
      const pairs = COLUMNS.flatMap((column) => {
        const value = row[column];
        if (value === null) return [`"${column}": null`, `"${column}": ""`, null][i % 3] ?? [];
        return `"${column}": ${column === "fare" ? value : JSON.stringify(value)}`;
      });
      return `{${pairs.join(", ")}}`;
    })
    .join("\n");
}
function select(rows: readonly LogRow[], types: Partial<Record<(typeof COLUMNS)[number], string>>): string {
  const literal = (value: string | boolean | null) =>
    value === null ? "NULL" : `'${String(value).replaceAll("'", "''")}'`;
  const values = rows.map((row) => `(${COLUMNS.map((column) => literal(row[column])).join(", ")})`);
  const columns = COLUMNS.map((column) => `CAST("${column}" AS ${types[column] ?? "VARCHAR"}) AS "${column}"`);
  return `SELECT ${columns.join(", ")} FROM (VALUES ${values.join(", ")}) AS t(${COLUMNS.map((column) => `"${column}"`).join(", ")})`;
}

/** RFC 8878: one frame without checksum, its blocks raw. (Blocks that DuckDB packs are read in compression.test.ts.) */
function zstandard(text: string): Buffer {
  const content = Buffer.from(text);
  const blocks: Buffer[] = [];
  for (let from = 0; from < content.length; from += 1 << 16) {
    const piece = content.subarray(from, from + (1 << 16));
    const header = Buffer.alloc(3);
    header.writeUIntLE((piece.length << 3) | (from + piece.length === content.length ? 1 : 0), 0, 3);
    blocks.push(header, piece);
  }
  return Buffer.concat([Buffer.from([0x28, 0xb5, 0x2f, 0xfd, 0x00, 0x58]), ...blocks]);
}

const PLAN = (files: string) => `experiment: Formats
question: Does the form of a file matter?
timezone: Europe/Oslo
log:
  - files: ${files}
    columns: {unit: visitor, time: at, event: event, variant: arm, event-id: id}
enrolment: {event: search}
variants: [{name: list, control: true}, {name: calendar}]
follow-up: {days: 8}
metrics:
  - {name: Fare, role: primary, summary: mean, of: {event: booking, sum: fare}, cap: {quantile: 0.9}}
  - {name: Dearest, summary: mean, of: {event: booking, max: fare}, without-rows: leave-out}
  - {name: Last, summary: mean, of: {event: booking, last: fare}, without-rows: 0}
  - {name: Days, summary: mean, of: {days: true}}
  - {name: Per search, summary: ratio-of-totals, of: {event: booking}, per: {event: search}}
  - {name: Noted, summary: proportion, of: {where: {note: {matches: "*\\"*"}}}}
filters:
  - {name: staff, drop: units, where: {staff: true}}
  - {name: cheap, drop: rows, where: {fare: {below: 400}}}
`;

async function reductionOf(files: string, contents: Files, parquet: Record<string, string> = {}, threads = 1) {
  const { reduction, rejects } = await reduced(PLAN(files), contents, { parquet, threads });
  const { inputs, ...rest } = reduction;
  return { ...rest, rows: inputs.reduce((sum, input) => sum + input.rows, 0), rejects };
}

const csv = (rows: readonly LogRow[]) => delimited(rows, ",");
const tsv = (rows: readonly LogRow[]) => delimited(rows, "\t");
const typed = { id: "INTEGER", at: "TIMESTAMP", fare: "DECIMAL(18, 9)", staff: "BOOLEAN" } as const;
const plain = () => reductionOf("log.csv", { "log.csv": csv(ROWS) });

describe("the same log", () => {
  it("holds something of everything", async () => {
    const { rowLines, unitLines, facts, metrics, rejects } = await plain();
    const lines = Object.fromEntries([
      ...rowLines.map(({ id, rows }) => [id, rows]),
      ...unitLines.map(({ id, units }) => [`${id} units`, units]),
    ]);
    for (const line of [
      "duplicate",
      "filter:cheap",
      "unit-filter:staff",
      "unit-follow-up",
      "after-follow-up",
      "in-follow-up",
      "analysed units",
    ]) {
      expect(lines[line], line).toBeGreaterThan(0);
    }
    expect(facts.copiesThatDiffer).toBeGreaterThan(0);
    expect(metrics.every(({ of }) => of.total.some((total) => total !== 0n))).toBe(true);
    expect(rejects).toBe("");
  });
  it.each<[string, string, Files, Record<string, string>?]>([
    ["as csv with CR LF", "log.csv", { "log.csv": delimited(ROWS, ",", "\r\n") }],
    ["as csv with CR", "log.csv", { "log.csv": delimited(ROWS, ",", "\r") }],
    [
      "as csv of which each row ends otherwise",
      "log.csv",
      { "log.csv": [csv(ROWS.slice(0, 9)), delimited(ROWS.slice(9), ",", "\r\n").replace(/^.*\r\n/, "")].join("\n") },
    ],
    [
      "as csv with a byte-order mark and blank lines",
      "log.csv",
      { "log.csv": `\uFEFF\n\n${csv(ROWS).replaceAll(/\n(\d+,)/g, "\n\n$1")}\n\n` },
    ],
    ["as tsv", "log.tsv", { "log.tsv": tsv(ROWS) }],
    ["as lines of JSON", "log.ndjson", { "log.ndjson": lines(ROWS) }],
    ["as lines of JSON, by their other ending", "log.jsonl", { "log.jsonl": lines(ROWS) }],
    ["as csv.gz", "log.csv.gz", { "log.csv.gz": gzipSync(csv(ROWS)) }],
    [
      "as csv.gz of two members",
      "log.csv.gz",
      { "log.csv.gz": Buffer.concat([gzipSync(csv(ROWS).slice(0, 500)), gzipSync(csv(ROWS).slice(500))]) },
    ],
    ["as csv.zst", "log.csv.zst", { "log.csv.zst": zstandard(csv(ROWS)) }],
    [
      "as csv.zst of two frames",
      "log.csv.zst",
      { "log.csv.zst": Buffer.concat([zstandard(csv(ROWS).slice(0, 500)), zstandard(csv(ROWS).slice(500))]) },
    ],
    ["as tsv.gz", "log.tsv.gz", { "log.tsv.gz": gzipSync(tsv(ROWS)) }],
    ["as ndjson.gz", "log.ndjson.gz", { "log.ndjson.gz": gzipSync(lines(ROWS)) }],
    ["as ndjson.zst", "log.ndjson.zst", { "log.ndjson.zst": zstandard(lines(ROWS)) }],
    ["as Parquet of texts", "log.parquet", {}, { "log.parquet": select(ROWS, {}) }],
    ["as Parquet of types", "log.parquet", {}, { "log.parquet": select(ROWS, typed) }],
    [
      "as Parquet of doubles and nanoseconds",
      "log.parquet",
      {},
      { "log.parquet": select(ROWS, { ...typed, fare: "DOUBLE", at: "TIMESTAMP_NS" }) },
    ],
    [
      "split over three files",
      '"part-*.csv"',
      {
        "part-1.csv": csv(ROWS.slice(0, 20)),
        "part-2.csv": csv(ROWS.slice(20, 21)),
        "part-3.csv": csv(ROWS.slice(21)),
      },
    ],
    ["turned around", "log.csv", { "log.csv": csv([...ROWS].reverse()) }],
    [
      "split over files that end their lines otherwise",
      '"*.csv"',
      {
        "a.csv": csv(ROWS.slice(0, 15)),
        "b.csv": delimited(ROWS.slice(15, 30), ",", "\r\n"),
        "c.csv": delimited(ROWS.slice(30, 45), ",", "\r"),
        "d.csv": csv(ROWS.slice(45)),
      },
    ],
    [
      "split over files of every form",
      '["*.csv", "b.*", "c/*"]',
      {
        "a.csv": csv(ROWS.slice(0, 10)),
        "b.tsv.gz": gzipSync(tsv(ROWS.slice(10, 20))),
        "c/x.ndjson": lines(ROWS.slice(20, 30)),
        "c/y.csv.zst": zstandard(csv(ROWS.slice(30, 40))),
      },
      { "c/z.parquet": select(ROWS.slice(40, 50), typed), "b.parquet": select(ROWS.slice(50), { at: "TIMESTAMP" }) },
    ],
  ])("comes to the same %s", async (_, files, contents, parquet = {}) => {
    const expected = await plain();
    expect(await reductionOf(files, contents, parquet, 2)).toEqual(expected);
  });
});
