import { once } from "node:events";
import { createWriteStream, type WriteStream } from "node:fs";
import type { Plan } from "../plan/index.ts";
import { textOf } from "./compression.ts";
import { count, type Engine, text } from "./engine.ts";
import type { LogFile } from "./files.ts";
import type { Layout } from "./layout.ts";
import { reasonText } from "./ledger.ts";
import { delimiterOf, quoted, recordBatches, unlessEndless } from "./records.ts";
import type { FileGroup } from "./source.ts";
import { type Dialect, REASON, rejectedOrdinals, rejectedTexts, rejectsByFile, sql } from "./sql/index.ts";
import type { Step } from "./zone.ts";

interface Rejected {
  /** Physical line, of Parquet the row; null where it cannot be told. */
  readonly line: number | null;
  readonly reason: number;
  /** Quotes spoilt the record, or those of one above swallowed it: said in place of the reason. */
  readonly isSpoilt?: boolean;
  readonly text: string;
}
const SPOILT = "cannot be read: a quote in it or above it does not close where a cell ends";

/** The log as it was read. */
export interface ReadLog {
  readonly plan: Plan;
  readonly layout: Layout;
  readonly files: readonly LogFile[];
  readonly groups: readonly FileGroup[];
  readonly zone: readonly Step<bigint>[];
}

/**
 * Writes rejects.csv: file, line, reason, text of every rejected row. The first reading knows no lines, so the files with
 * rejected rows are read once more: the engine says which rows, in order, and the file's own text says on which lines.
 */
export async function writeRejects(to: string, log: ReadLog, engine: Engine, dialect: Dialect): Promise<void> {
  const out = createWriteStream(to);
  const write = lineWriter(out);
  await write(["file", "line", "reason", "text"]);
  for (const row of await engine.query(rejectsByFile(REASON.unreadable, REASON.notText))) {
    const index = count(row, "file");
    const file = log.files[index];
    const group = log.groups.find((one) => one.files.some((member) => member.index === index));
    if (file === undefined || group === undefined)
      throw new Error(`rejected rows of file ${index}, which was not read`);
    const own = { ...group, files: group.files.filter((member) => member.index === index) };
    const expected = {
      rows: count(row, "rows"),
      unreadable: count(row, "unreadable"),
      notText: count(row, "not_text"),
    };
    const found = (await rejectedOf(file, own, expected, log, engine, dialect)) ?? (await withoutLines(index, engine));
    for (const one of found) {
      const why = one.isSpoilt === true ? SPOILT : reasonText(one.reason, log.layout);
      await write([file.name, one.line === null ? "" : String(one.line), why, one.text]);
    }
  }
  out.end();
  await once(out, "close");
}

interface Expected {
  readonly rows: number;
  readonly unreadable: number;
  readonly notText: number;
}

/** Null when the second reading does not find what the first one rejected: then the lines cannot be told. */
async function rejectedOf(
  file: LogFile,
  group: FileGroup,
  expected: Expected,
  log: ReadLog,
  engine: Engine,
  dialect: Dialect,
): Promise<Rejected[] | null> {
  const judged = await engine.queryInFileOrder(rejectedOrdinals(log.plan, log.layout, group, log.zone, dialect));
  if (group.format !== "parquet") {
    await engine.run(sql`DROP TABLE reject_errors`);
    await engine.run(sql`DROP TABLE reject_scans`);
  }
  const readable = judged.map((row) => ({
    line: count(row, "ordinal"),
    reason: count(row, "reason"),
    text: text(row, "text"),
  }));
  if (file.format === "ndjson" || file.format === "parquet") {
    return readable.length === expected.rows ? readable : null;
  }
  const reasons = new Map(readable.map((row) => [row.line, row.reason]));
  const found = await placedRows(file, group, reasons, expected.notText > 0).catch(unlessEndless);
  if (found === null) return null;
  const of = (reason: number) => found.filter((row) => row.reason === reason).length;
  const isAlike =
    found.length === expected.rows &&
    of(REASON.unreadable) === expected.unreadable &&
    of(REASON.notText) === expected.notText;
  return isAlike ? found : null;
}

/** Cuts the file's text into records and takes those that cannot be cut, and those whose ordinal has a reason. */
async function placedRows(
  file: LogFile,
  group: FileGroup,
  reasons: ReadonlyMap<number, number>,
  hasBrokenText: boolean,
): Promise<Rejected[]> {
  const found: Rejected[] = [];
  let isHeader = true;
  let ordinal = 0;
  for await (const batch of recordBatches(textOf(file.path), delimiterOf(file.format))) {
    for (const { line, text, width } of batch) {
      if (isHeader) {
        isHeader = false;
      } else if (hasBrokenText && text.includes("\uFFFD")) {
        // Bytes that are no UTF-8 are decoded to this sign.
        found.push({ line, reason: REASON.notText, text });
      } else if (width !== group.columns.length) {
        found.push({ line, reason: REASON.unreadable, isSpoilt: width === null, text });
      } else {
        ordinal += 1;
        const reason = reasons.get(ordinal);
        if (reason !== undefined) found.push({ line, reason, text });
      }
    }
  }
  return found;
}

async function withoutLines(file: number, engine: Engine): Promise<Rejected[]> {
  const rows = await engine.query(rejectedTexts(file));
  return rows.map((row) => ({ line: null, reason: count(row, "reason"), text: String(row.text ?? "") }));
}

/** Writes rows as RFC 4180 has them, no faster than the disk takes them. */
function lineWriter(out: WriteStream): (cells: readonly string[]) => Promise<void> {
  return async (cells) => {
    const line = cells.map((cell) => (/[",\r\n]/.test(cell) ? quoted(cell) : cell)).join(",");
    if (!out.write(`${line}\n`)) await once(out, "drain");
  };
}
