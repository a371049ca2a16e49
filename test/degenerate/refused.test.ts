import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { closeout } from "../../src/index.ts";
import { BOOKED, FARE, HEADER, plan, visitors } from "./logs.ts";
import { run } from "./run.ts";

// DESIGN 6: status 2, the plan or a file or column that it names is wrong; 3, the log cannot be used. Nothing is written.

const GOOD = `${[HEADER, ...visitors("list", 5, 2), ...visitors("calendar", 5, 3)].join("\n")}\n`;
const PLAN = plan({ metrics: [BOOKED] });
const fares = plan({ metrics: [FARE] });
const many = Array.from({ length: 3_000 }, (_, i) => `v${i * 7919},2026-03-02T10:00,search,list,1`);
const packed = gzipSync(`${[HEADER, ...many].join("\n")}\n`);

interface Refusal {
  readonly what: string;
  readonly plan?: string;
  readonly files?: Readonly<Record<string, string | Uint8Array>>;
  readonly status: 2 | 3;
  /** All of these, each once. */
  readonly says: readonly RegExp[];
}

const REFUSALS: readonly Refusal[] = [
  { what: "an empty plan", plan: "", status: 2, says: [/The plan is empty/] },
  { what: "a plan that is no plan", plan: "- 1\n- 2\n", status: 2, says: [/This is no plan/] },
  { what: "a plan that is no YAML", plan: `${PLAN}\n\tmetrics: {`, status: 2, says: [/plan\.yaml:\d+:\d+/] },
  {
    what: "a file that is not there",
    plan: PLAN.replace("log.csv", "logs.csv"),
    status: 2,
    says: [/plan\.yaml:5:12 +log/, /There is no file logs\.csv/, /Did you mean log\.csv\?/],
  },
  {
    what: "a pattern that nothing matches",
    plan: PLAN.replace("log.csv", "data/*.csv"),
    status: 2,
    says: [/No file matches data\/\*\.csv/],
  },
  {
    what: "a file of no known ending",
    plan: PLAN.replace("log.csv", "log.txt"),
    files: { "log.txt": GOOD },
    status: 2,
    says: [/The ending of log\.txt does not tell its format/],
  },
  {
    what: "a column that is not there",
    plan: fares.replace("sum: fare", "sum: fares"),
    status: 2,
    says: [/No file of the log has this column/, /Did you mean fare\?/, /The log has: arm, at, event, fare, visitor\./],
  },
  {
    what: "a column of the entry that is not there",
    plan: PLAN.replace("variant: arm", "variant: group"),
    status: 2,
    says: [/No file of this entry has this column/],
  },
  {
    what: "a list that is not there",
    plan: plan({ metrics: [BOOKED], rest: "filters: [{name: staff, drop: units, listed-in: stuff.csv}]" }),
    files: { "staff.csv": "v1\n", "log.csv": GOOD },
    status: 2,
    says: [/There is no file stuff\.csv/, /Did you mean staff\.csv\?/],
  },
  {
    what: "two mistakes of the plan and one that only the log can show, at once",
    plan: fares
      .replace("sum: fare", "sum: fares")
      .replace("role: primary", "roll: primary")
      .replace("summary: mean", "summary: men"),
    status: 2,
    says: [
      /plan\.yaml has \d mistakes/,
      /roll/,
      /Did you mean role\?/,
      /summary/,
      /Did you mean mean\?/,
      /No file of the log has this column/,
      /Did you mean fare\?/,
    ],
  },
  {
    what: "a mistake of the plan beside a log that cannot be read",
    plan: PLAN.replace("role: primary", "roll: primary"),
    files: { "log.csv": `"visitor\n${GOOD}` },
    status: 2,
    says: [/Did you mean role\?/],
  },
  { what: "an empty file", files: { "log.csv": "" }, status: 3, says: [/The log has no rows/] },
  { what: "a header only", files: { "log.csv": `${HEADER}\n` }, status: 3, says: [/The log has no rows/] },
  {
    what: "all rows rejected",
    files: { "log.csv": `${HEADER}\nv1,yesterday,search,list,\nv2,,search,calendar,\nv3\n` },
    status: 3,
    says: [
      /None of the log's 3 rows could be read: no readable time \(2 rows\) and cannot be read: the cells do not fit the header \(1 row\)\./,
      /A time is written as 2026-03-02T08:15:30, or as a whole number/,
    ],
  },
  {
    what: "lines of JSON of which none is an object",
    plan: PLAN.replace("log.csv", "log.ndjson"),
    files: { "log.ndjson": "nothing\n17\n" },
    status: 3,
    says: [/None of the log's 2 rows could be read: cannot be read: not a JSON object \(2 rows\)\. Each line/],
  },
  {
    what: "a file that is called packed and is not",
    plan: PLAN.replace("log.csv", "log.csv.gz"),
    files: { "log.csv.gz": GOOD },
    status: 3,
    says: [
      /log\.csv\.gz does not begin as packed files do: it is damaged, or not packed at all\. .*call it log\.csv\./,
    ],
  },
  {
    what: "a file that is packed and not called so",
    files: { "log.csv": packed },
    status: 3,
    says: [/log\.csv cannot be read as csv: it is packed with gzip; call it log\.csv\.gz/],
  },
  {
    what: "a header in quotes, set apart by semicolons",
    files: { "log.csv": '"visitor";"at";"event";"arm";"fare"\n"v1";"2026-03-02";"search";"list";""\n' },
    status: 3,
    says: [/log\.csv cannot be read as csv: its cells are set apart by semicolons; save it with commas/],
  },
  {
    what: "a packed file that ends early",
    plan: PLAN.replace("log.csv", "'*.csv*'"),
    files: { "log.csv": GOOD, "more.csv.gz": packed.subarray(0, packed.length - 20) },
    status: 3,
    says: [/more\.csv\.gz ends early or is damaged/, /Fetch the file again/],
  },
  {
    what: "a packed file that ends in its first bytes",
    plan: PLAN.replace("log.csv", "log.csv.gz"),
    files: { "log.csv.gz": gzipSync(GOOD).subarray(0, 15) },
    status: 3,
    says: [/log\.csv\.gz ends early or is damaged/],
  },
  {
    what: "a header that cannot be cut",
    files: { "log.csv": `"visitor,at,event,arm,fare\n${visitors("list", 3).join("\n")}` },
    status: 3,
    says: [/log\.csv cannot be read as csv/],
  },
  {
    what: "what is no Parquet",
    plan: PLAN.replace("log.csv", "log.parquet"),
    files: { "log.parquet": "PAR1" },
    status: 3,
    says: [/log\.parquet cannot be read as parquet/],
  },
];

describe.each(REFUSALS)("with $what", ({ plan = PLAN, files = { "log.csv": GOOD }, status, says }) => {
  it(`closeout ends with status ${status}, says why and what to do, and writes nothing`, async () => {
    const { outcome, left, folder } = await run(plan, { "log.csv": GOOD, ...files });
    expect(outcome.status).toBe(status);
    const text = "text" in outcome ? outcome.text : "";
    for (const part of says) expect(text).toMatch(part);
    expect(left).toEqual([]);
    // The path that the caller gave is shown for the plan; no other path, and no stack.
    const others = text.replaceAll(join(folder, "plan.yaml"), "plan.yaml");
    expect(others).not.toMatch(/\/tmp\/|node_modules|\n\s+at |Error:/);
    expect(others).not.toMatch(/undefined|NaN|\[object/);
  });
});

describe("an engine with too little memory", () => {
  it.each(["10KB", "1MB", "5MB"])("of %s says so, and blames no file", async (memory) => {
    const folder = mkdtempSync(join(tmpdir(), "closeout-memory-"));
    try {
      writeFileSync(join(folder, "plan.yaml"), PLAN.replace("log.csv", "log.*"));
      writeFileSync(join(folder, "log.csv"), GOOD);
      writeFileSync(
        join(folder, "log.ndjson"),
        '{"visitor": "v1", "at": "2026-03-02", "event": "search", "arm": "list"}\n',
      );
      const outcome = await closeout(join(folder, "plan.yaml"), { out: join(folder, "report"), memory });
      expect(outcome).toEqual({
        status: 3,
        text: `The engine needs more memory than the ${memory} that it may use. Give it more, such as --memory 2GB, or fewer --threads.`,
      });
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});

describe("a folder", () => {
  const folderOf = () => mkdtempSync(join(tmpdir(), "closeout-refused-"));
  const written = (folder: string, text: string) => {
    writeFileSync(join(folder, "plan.yaml"), text);
    writeFileSync(join(folder, "log.csv"), GOOD);
    return join(folder, "plan.yaml");
  };

  it("with another experiment's report is refused with status 2 and stays as it was; the same one's is replaced", async () => {
    const folder = folderOf();
    try {
      const out = join(folder, "report");
      expect((await closeout(written(folder, PLAN), { out })).status).toBe(0);
      const before = readFileSync(join(out, "report.json"), "utf8");
      const other = PLAN.replace("experiment: Fare calendar", "experiment: Fare table");
      const refused = await closeout(written(folder, other), { out });
      expect(refused).toMatchObject({ status: 2, text: expect.stringContaining('"Fare calendar"') });
      expect(refused).toMatchObject({ text: expect.stringContaining("--out") });
      expect(readFileSync(join(out, "report.json"), "utf8")).toBe(before);
      expect((await closeout(written(folder, `${PLAN}# changed\n`), { out })).status).toBe(0);
      expect(readFileSync(join(out, "report.json"), "utf8")).not.toBe(before);
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
  it("with a report that is no longer readable is taken for one without", async () => {
    const folder = folderOf();
    try {
      mkdirSync(join(folder, "report"));
      for (const text of ["{", "[]", "null", "7", '{"experiment": 7}', ""]) {
        writeFileSync(join(folder, "report", "report.json"), text);
        expect((await closeout(written(folder, PLAN), { out: join(folder, "report") })).status, text).toBe(0);
      }
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
  it("keeps the earlier report whole when the next run ends with a mistake", async () => {
    const folder = folderOf();
    try {
      const out = join(folder, "report");
      await closeout(written(folder, PLAN), { out });
      const before = readFileSync(join(out, "report.html"), "utf8");
      const path = written(folder, PLAN);
      writeFileSync(join(folder, "log.csv"), `${HEADER}\n`);
      expect((await closeout(path, { out })).status).toBe(3);
      expect(readFileSync(join(out, "report.html"), "utf8")).toBe(before);
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});

describe("a plan", () => {
  it("that is not there, or is a folder, is refused with status 2", async () => {
    const folder = mkdtempSync(join(tmpdir(), "closeout-refused-"));
    try {
      for (const path of [join(folder, "none.yaml"), folder]) {
        const outcome = await closeout(path, { out: join(folder, "report") });
        expect(outcome.status).toBe(2);
        expect("text" in outcome && outcome.text.startsWith(path)).toBe(true);
      }
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
  it("stops a run when its signal aborts, and leaves nothing behind", async () => {
    const folder = mkdtempSync(join(tmpdir(), "closeout-refused-"));
    try {
      writeFileSync(join(folder, "plan.yaml"), PLAN);
      writeFileSync(join(folder, "log.csv"), GOOD);
      for (const stage of ["reading the log", "enrolling", "adding up each", "adding up cells"]) {
        const stop = new AbortController();
        const running = closeout(join(folder, "plan.yaml"), {
          out: join(folder, "report"),
          signal: stop.signal,
          progress: (progress) => {
            if (progress.stage.startsWith(stage)) stop.abort();
          },
        });
        await expect(running, stage).rejects.toThrow(/abort/i);
      }
      expect((await import("node:fs")).readdirSync(folder).sort()).toEqual(["log.csv", "plan.yaml"]);
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});
