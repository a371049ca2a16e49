import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { isWhole, textOf } from "../../src/engine/compression.ts";
import { sql } from "../../src/engine/sql/index.ts";
import { inEngine } from "./duck.ts";

let folder = "";
let zst: Buffer = Buffer.alloc(0);
const TEXT = `visitor,at\n${Array.from({ length: 40 }, (_, i) => `v${i * i},é😀`).join("\n")}\n`;
const gz = gzipSync(TEXT);

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), "closeout-compression-"));
  zst = await zstandardOf("SELECT line FROM small");
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** What DuckDB, another program, writes as Zstandard. */
async function zstandardOf(what: "SELECT line FROM small" | "long"): Promise<Buffer> {
  const path = join(folder, "made.csv.zst");
  await inEngine(async (engine) => {
    // Long: hardly compressible, several blocks of 128 KB.
    const rows =
      what === "long"
        ? sql`SELECT md5(CAST(i AS VARCHAR)) AS line FROM range(20000) AS t(i)`
        : sql`SELECT unnest(string_split(${TEXT.trimEnd()}, chr(10))) AS line`;
    await engine.run(sql`
      COPY (${rows}) TO ${path} (FORMAT csv, HEADER false, QUOTE '', ESCAPE '', DELIMITER '|', COMPRESSION zstd)`);
  });
  return readFileSync(path);
}

function file(name: string, bytes: Uint8Array): string {
  const path = join(folder, name);
  writeFileSync(path, bytes);
  return path;
}
const whole = (name: string, bytes: Uint8Array) => isWhole(file(name, bytes));
async function text(path: string): Promise<string> {
  let all = "";
  for await (const piece of textOf(path)) all += piece;
  return all;
}

/** RFC 8878, section 3.1.2: magic number, size, and content that a reader passes over. */
function skippable(content: string, last: number): Buffer {
  const header = Buffer.alloc(8);
  header.writeUInt32LE(0x184d2a50 + last, 0);
  header.writeUInt32LE(content.length, 4);
  return Buffer.concat([header, Buffer.from(content)]);
}
/** RFC 8878, by hand: one segment without checksum, one raw block, one run-length block of 5 "x". */
const BY_HAND = Buffer.from([
  0x28, 0xb5, 0x2f, 0xfd, 0x20, 0x08, 0x18, 0x00, 0x00, 0x61, 0x2c, 0x62, 0x2b, 0x00, 0x00, 0x78,
]);

describe("a compressed file", () => {
  it("is whole as it was written, and gives its text", async () => {
    for (const [name, bytes] of [
      ["log.csv.gz", gz],
      ["LOG.CSV.GZ", gz],
      ["log.csv.zst", zst],
      ["log.csv.ZST", zst],
    ] as const) {
      expect(await whole(name, bytes), name).toBe(true);
      expect(await text(file(name, bytes)), name).toBe(TEXT);
    }
  });
  it("is not whole when it ends early, wherever that is", async () => {
    for (const [name, bytes] of [
      ["log.csv.gz", gz],
      ["log.csv.zst", zst],
    ] as const) {
      const taken: number[] = [];
      for (let length = 0; length < bytes.length; length++) {
        if ((await whole(name, bytes.subarray(0, length))) !== false) taken.push(length);
      }
      expect(taken, name).toEqual([]);
    }
  });
  it("is not whole when what should be its header is not one", async () => {
    expect(await whole("log.csv.gz", Buffer.from(TEXT))).toBe(false);
    expect(await whole("log.csv.zst", Buffer.from(TEXT))).toBe(false);
    expect(await whole("log.csv.zst", Buffer.concat([zst, Buffer.from("more")]))).toBe(false);
    expect(await whole("log.csv.zst", gz)).toBe(false);
    expect(await whole("log.csv.gz", zst)).toBe(false);
  });
  it("is not whole when bytes of its content are others than those that were packed", async () => {
    const damaged = Buffer.from(gz);
    damaged[40] = (damaged[40] ?? 0) ^ 0xff;
    expect(await whole("log.csv.gz", damaged)).toBe(false);
  });
  it("may be of several members or frames, and skippable ones", async () => {
    const members = Buffer.concat([gzipSync("a,b\n"), gzipSync(""), gzipSync("1,2\n")]);
    expect(await whole("log.csv.gz", members)).toBe(true);
    expect(await text(file("log.csv.gz", members))).toBe("a,b\n1,2\n");
    const frames = Buffer.concat([skippable("before", 0), zst, skippable("", 15), zst, skippable("after", 7)]);
    expect(await whole("log.csv.zst", frames)).toBe(true);
    expect(await text(file("log.csv.zst", frames))).toBe(TEXT + TEXT);
    for (const length of [3, 6, 10, frames.length - 1, frames.length - 6]) {
      expect(await whole("log.csv.zst", frames.subarray(0, length)), String(length)).toBe(false);
    }
  });
  it("of raw and run-length blocks, without a checksum, is followed to its last block", async () => {
    expect(await text(file("log.csv.zst", BY_HAND))).toBe("a,bxxxxx");
    expect(await whole("log.csv.zst", BY_HAND)).toBe(true);
    for (let length = 0; length < BY_HAND.length; length++) {
      expect(await whole("log.csv.zst", BY_HAND.subarray(0, length)), String(length)).toBe(false);
    }
  });
  it("of many blocks is whole, and not without its last byte", async () => {
    const long = await zstandardOf("long");
    expect(long.length).toBeGreaterThan(300_000);
    expect(await whole("log.csv.zst", long)).toBe(true);
    expect(await whole("log.csv.zst", long.subarray(0, -1))).toBe(false);
    expect((await text(file("log.csv.zst", long))).length).toBe(20_000 * 33);
  });
  it("that is cut gives no text as if it were all", async () => {
    await expect(text(file("log.csv.gz", gz.subarray(0, gz.length - 9)))).rejects.toThrow();
  });
  it("that is not there is an error to be caught, not a fault that ends the program", async () => {
    await expect(isWhole(join(folder, "none.csv.gz"))).rejects.toThrow(/ENOENT/);
    await expect(isWhole(join(folder, "none.csv.zst"))).rejects.toThrow(/ENOENT/);
    await expect(text(join(folder, "none.csv.gz"))).rejects.toThrow(/ENOENT/);
    await expect(text(join(folder, "none.csv.zst"))).rejects.toThrow(/ENOENT/);
  });
});

describe("a plain file", () => {
  it("has no end that could be missing", async () => {
    expect(await whole("log.csv", Buffer.from(TEXT))).toBeNull();
    expect(await whole("log.parquet", Buffer.from("PAR1"))).toBeNull();
  });
  it("gives its text over pieces that cut its characters", async () => {
    const long = "é😀".repeat(400_001);
    expect(await text(file("log.csv", Buffer.from(long)))).toBe(long);
  });
  it("keeps its byte-order mark for whoever cuts it into records", async () => {
    expect(await text(file("log.csv", Buffer.from("\uFEFFa,b")))).toBe("\uFEFFa,b");
  });
});
