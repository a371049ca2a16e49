import { appendFileSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { reduce } from "../../src/engine/index.ts";
import { loadPlan, type Plan, type PlanSource } from "../../src/plan/index.ts";
import { asAnybody, fares, reduced, zstandardOf } from "./small.ts";

const HEADER = "visitor,at,event,arm,fare";
const ROWS = "v1,2026-03-02,search,list,1.5\nv2,2026-03-02,search,calendar,2\n";
const ARMS = [["1: 1.5", "1: 2"]];

describe("the header of a csv file", () => {
  it.each([
    ["stands on the first line", `${HEADER}\n${ROWS}`],
    ["may be quoted", `"visitor","at","event","arm","fare"\n${ROWS}`],
    ["may follow blank lines", `\n\n${HEADER}\n${ROWS}`],
    ["may follow a byte-order mark", `\uFEFF${HEADER}\n${ROWS}`],
    ["may follow a byte-order mark and blank lines", `\uFEFF\n\n${HEADER}\n${ROWS}`],
    ["may be quoted behind a byte-order mark", `\uFEFF"visitor",at,event,arm,fare\n${ROWS}`],
    ["may end at CR LF", `${HEADER}\n${ROWS}`.replaceAll("\n", "\r\n")],
    ["may end at CR", `${HEADER}\n${ROWS}`.replaceAll("\n", "\r")],
    ["may follow blank lines that end at CR LF", `\n\n${HEADER}\n${ROWS}`.replaceAll("\n", "\r\n")],
    ["may have its last line without an end", `${HEADER}\n${ROWS}`.trimEnd()],
    [
      "may have its columns in any order",
      "fare,arm,event,at,visitor\n1.5,list,s,2026-03-02,v1\n2,calendar,s,2026-03-02,v2\n",
    ],
    ["may hold columns that the plan does not name", `${HEADER},x\n${ROWS.replaceAll("\n", ",9\n")}`],
    ["may follow more than fifty blank lines", `${"\n".repeat(80)}${HEADER}\n${ROWS}`],
  ])("%s", async (_, text) => {
    const found = await reduced(fares(), { "log.csv": text });
    expect([found.arms, found.rows]).toEqual([ARMS, { "in-follow-up": 2 }]);
  });
  it("may be quoted over several lines", async () => {
    const columns = 'unit: visitor, time: at, event: event, variant: "arm\\nof it"';
    const text = `visitor,at,event,"arm\nof it",fare\n${ROWS}`;
    expect((await reduced(fares({ columns }), { "log.csv": text })).arms).toEqual(ARMS);
  });
  it("may spread a name over more than fifty lines", async () => {
    const text = `visitor,at,event,arm,fare,"${"\n".repeat(80)}"\n${ROWS.replaceAll("\n", ",\n")}`;
    expect((await reduced(fares(), { "log.csv": text })).arms).toEqual(ARMS);
  });
  it("keeps apart names that differ in case only, with commas, quotes and spaces", async () => {
    const columns = 'unit: visitor, time: at, event: event, variant: "arm, \\"tested\\""';
    const text = `Visitor,visitor,AT,at,event,ARM,"arm, ""tested""",fare,Fare, fare
wrong,v1,x,2026-03-02,s,calendar,list,1.5,70,80
wrong,v2,x,2026-03-02,s,list,calendar,2,70,80
`;
    expect((await reduced(fares({ columns }), { "log.csv": text })).arms).toEqual(ARMS);
  });
  it("may repeat a name that the plan does not use; one that it uses must stand once", async () => {
    const repeated = `${HEADER},x,x\n${ROWS.replaceAll("\n", ",1,2\n")}`;
    expect((await reduced(fares(), { "log.csv": repeated })).arms).toEqual(ARMS);
    const twice = `${HEADER},fare\n${ROWS.replaceAll("\n", ",3\n")}`;
    await expect(reduced(fares(), { "log.csv": twice })).rejects.toThrow(/more than once in the header/);
  });
  it("alone makes no rows, nor does an empty file, beside a file with some", async () => {
    const files = {
      "log.csv": `${HEADER}\n${ROWS}`,
      "more.csv": HEADER,
      "none.csv": "",
      "blank.csv": "\n\n",
      "mark.csv": "\uFEFF",
    };
    const found = await reduced(fares({ files: '"*.csv"' }), files);
    expect([found.arms, found.reduction.rowsRead]).toEqual([ARMS, 2]);
    expect(found.reduction.inputs.map(({ name, rows }) => [name, rows])).toEqual([
      ["blank.csv", 0],
      ["log.csv", 2],
      ["mark.csv", 0],
      ["more.csv", 0],
      ["none.csv", 0],
    ]);
  });
  it("alone makes a log without rows, and so does an empty file", async () => {
    for (const text of [HEADER, `${HEADER}\n`, `${HEADER}\n\n\n`, "", "\n", "\uFEFF"]) {
      await expect(reduced(fares(), { "log.csv": text }), JSON.stringify(text)).rejects.toThrow(/The log has no rows/);
    }
  });
  it("whose quotes never close makes the file unreadable, not empty", async () => {
    const files = { "log.csv": `${HEADER}\n${ROWS}`, "more.csv": `"visitor,at,event,arm,fare\n${ROWS}` };
    await expect(reduced(fares({ files: '"*.csv"' }), files)).rejects.toThrow(/more\.csv.*header/s);
  });
  it("in another encoding is told as that", async () => {
    const bytes = Buffer.from(`\uFEFF${HEADER}\n${ROWS}`, "utf16le");
    await expect(reduced(fares(), { "log.csv": bytes })).rejects.toThrow(
      /log\.csv cannot be read as csv: it is not UTF-8/,
    );
  });
  it("of one column is read as such, and blank lines are not rows there either", async () => {
    const plan = fares({ rest: "" }).replace(
      "variants:",
      "  - files: only.csv\n    columns: {unit: visitor}\nvariants:",
    );
    const timeless = plan.replace(", time: at", "").replace("at,", "");
    const found = await reduced(timeless, {
      "log.csv": "visitor,event,arm,fare\nv1,search,list,1.5\nv2,search,calendar,2\n",
      "only.csv": "\nvisitor\nv1\n\nv2\n\n\nv3\n",
    });
    expect([found.arms, found.rows]).toEqual([ARMS, { "unit-not-enrolled": 1, "in-follow-up": 4 }]);
  });
});

describe("a file that may not be read", () => {
  it("says so, and is not told as broken", async () => {
    const folder = mkdtempSync(join(tmpdir(), "closeout-secret-"));
    try {
      for (const name of ["log.csv", "log.ndjson", "log.parquet"]) {
        writeFileSync(join(folder, name), `${HEADER}\n`);
        const { plan, source } = loadPlan(fares({ files: name })) as { plan: Plan; source: PlanSource };
        const run = () => asAnybody(folder, join(folder, name), () => reduce(plan, source, folder));
        await expect(run(), name).rejects.toThrow(`${name} may not be read by you. Ask for the right to read it.`);
      }
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});

describe("a file that is written to while it is read", () => {
  it("stops the run: its rows and its fingerprint would be of two moments", async () => {
    const folder = mkdtempSync(join(tmpdir(), "closeout-growing-"));
    try {
      const log = join(folder, "log.csv");
      writeFileSync(log, `${HEADER}\nv1,2026-03-02,search,list,1\nv2,2026-03-02,search,calendar,1\n`);
      const { plan, source } = loadPlan(fares()) as { plan: Plan; source: PlanSource };
      const progress = ({ stage }: { stage: string }) => {
        if (stage === "enrolling units") appendFileSync(log, "v3,2026-03-02,search,list,1\n");
      };
      await expect(reduce(plan, source, folder, { progress })).rejects.toThrow(
        "log.csv was changed while it was read. Run this again when nothing writes to it.",
      );
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});

describe("a packed file", () => {
  it("may have its ending in capitals", async () => {
    const found = await reduced(fares({ files: "LOG.CSV.GZ" }), { "LOG.CSV.GZ": gzipSync(`${HEADER}\n${ROWS}`) });
    expect(found.arms).toEqual(ARMS);
  });
  it("of no bytes at all is a file that ends early, for nothing is packed in it", async () => {
    for (const name of ["log.csv.gz", "log.csv.zst"]) {
      const run = reduced(fares({ files: '"log.*"' }), { "log.csv": `${HEADER}\n${ROWS}`, [name]: "" });
      await expect(run, name).rejects.toThrow(/ends early/);
    }
  });
  it("that is cut or damaged anywhere is told as such, whatever the engine makes of it", async () => {
    const rows = Array.from({ length: 20_000 }, (_, i) => `v${i},2026-03-02,search,list,${(i * 7919) % 1000}`);
    const gz = gzipSync(`${HEADER}\n${rows.join("\n")}\n`);
    const zst = await zstandardOf(`${HEADER}\n${rows.join("\n")}\n`);
    const flipped = (bytes: Buffer, at: number) => bytes.map((byte, i) => (i === at ? byte ^ 0xff : byte));
    for (const [name, bytes] of [
      ["log.csv.gz", gz.subarray(0, -9)],
      ["log.csv.gz", gz.subarray(0, gz.length >> 1)],
      ["log.csv.gz", gz.subarray(0, 30)],
      ["log.csv.gz", flipped(gz, gz.length >> 1)],
      ["log.csv.gz", flipped(gz, gz.length - 6)],
      ["log.csv.zst", zst.subarray(0, -9)],
      ["log.csv.zst", zst.subarray(0, zst.length >> 1)],
      ["log.csv.zst", zst.subarray(0, 30)],
    ] as const) {
      const run = reduced(fares({ files: name }), { [name]: bytes });
      await expect(run, `${name}, ${bytes.length} bytes`).rejects.toThrow(/ends early or is damaged/);
    }
  });
  it("that is none, or packed in another way, is told so, with the name that it should have", async () => {
    const zst = await zstandardOf(HEADER);
    const none = /is damaged, or not packed at all\. Fetch it again, or call it log\.csv\.$/;
    for (const [name, bytes, told] of [
      ["log.csv.gz", Buffer.from("no gzip at all"), none],
      ["log.csv.zst", Buffer.from("no Zstandard at all"), none],
      ["log.csv.gz", zst, /is packed with Zstandard, whatever its name says\. Call it log\.csv\.zst\.$/],
      ["log.csv.zst", gzipSync(HEADER), /is packed with gzip, whatever its name says\. Call it log\.csv\.gz\.$/],
      ["log.csv", gzipSync(HEADER), /it is packed with gzip; call it log\.csv\.gz$/],
      ["log.ndjson", zst, /it is packed with Zstandard; call it log\.ndjson\.zst$/],
    ] as const) {
      await expect(reduced(fares({ files: name }), { [name]: bytes }), name).rejects.toThrow(told);
    }
  });
  it("that is damaged inside a whole frame does not pass for a good one", async () => {
    const rows = Array.from({ length: 20_000 }, (_, i) => `v${i},2026-03-02,search,list,${(i * 7919) % 1000}`);
    const zst = await zstandardOf(`${HEADER}\n${rows.join("\n")}\n`);
    const bytes = zst.map((byte, i) => (i === zst.length >> 1 ? byte ^ 0xff : byte));
    await expect(reduced(fares({ files: "log.csv.zst" }), { "log.csv.zst": bytes })).rejects.toThrow(/log\.csv\.zst/);
  });
});
