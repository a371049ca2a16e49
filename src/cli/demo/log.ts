import { gzipSync } from "node:zlib";
import { allRows, CAST, loadTestId } from "./cast.ts";
import { AHEAD, DAY, LOG_FROM, type LogRow } from "./life.ts";
import { type Random, random } from "./random.ts";

export interface DemoFile {
  /** Relative to the plan's folder. */
  readonly name: string;
  readonly bytes: Uint8Array;
}

/** The demo is one draw; another seed gives another log with the same planted truth. */
export const SEED = 20260302n;

/** Faults that real logs have, each of its kind this many times. */
export const FLAWS = {
  /** The sender tried again: the same event id, the same content. */
  copies: 280,
  /** The fare was corrected under the same event id. */
  correctedFares: 3,
  /** A comma that was not quoted, or a line cut off. */
  wrongCells: 12,
  unreadableTimes: 9,
  fareNoNumber: 14,
  noVisitor: 13,
  brokenJson: 2,
} as const;

const WEB_HEADER = "id,at,visitor,event,arm,platform,country,route,fare,seconds,is_staff";
const WEEKS = 4;

/** A line of a file, with the moment at which it was written there: copies come later than what they copy. */
interface Line {
  readonly written: number;
  readonly text: string;
}

/** The invented ferry line's log, 23 February to 22 March 2026: one file a week for the site, one for the support desk. */
export function demoLog(seed: bigint = SEED): DemoFile[] {
  const rows = allRows(random(seed)).sort((a, b) => a.at - b.at);
  const flaws = random(seed + 1n);
  const web = webLines(
    rows.filter((row) => row.event !== "support_contact"),
    flaws,
  );
  const desk = deskLines(rows.filter((row) => row.event === "support_contact"));

  const weeks = Array.from({ length: WEEKS }, (_, week) => {
    const lines = web.filter((line) => weekOf(line.written) === week).map((line) => line.text);
    const name = `data/web-${localDay(LOG_FROM + week * 7 * DAY)}.csv.gz`;
    return { name, bytes: gzipSync(`${[WEB_HEADER, ...lines].join("\n")}\n`, { level: 5 }) };
  });
  const ids = Array.from({ length: CAST.loadTest }, (_, index) => loadTestId(index));
  return [...weeks, textFile("data/support.ndjson", desk), textFile("data/load_test_ids.csv", ["visitor", ...ids])];
}

function textFile(name: string, lines: readonly string[]): DemoFile {
  return { name, bytes: Buffer.from(`${lines.join("\n")}\n`) };
}

function weekOf(written: number): number {
  return Math.min(WEEKS - 1, Math.floor((written - LOG_FROM) / (7 * DAY)));
}

function localDay(at: number): string {
  return new Date(at + AHEAD).toISOString().slice(0, 10);
}

/** The site's lines with their flaws, in the order in which they were written. */
function webLines(rows: readonly LogRow[], flaws: Random): Line[] {
  const any = <T>(from: readonly T[]) => {
    const one = from[Math.floor(from.length * flaws.uniform())];
    if (one === undefined) throw new Error("nothing to spoil: the log has no such row");
    return one;
  };
  const times = <T>(count: number, make: () => T) => Array.from({ length: count }, make);
  const later = (at: number) => Math.floor(at + 1000 + 2_400_000 * flaws.uniform());
  const numbers = Array.from(rows.keys());
  const isFare = (number: number) => rows[number]?.event === "booking" && rows[number]?.fare !== "0";
  const fares = numbers.filter(isFare);
  const enrolledFares = fares.filter((number) => rows[number]?.arm !== "");
  const at = (number: number) => {
    const row = rows[number];
    if (row === undefined) throw new Error(`the log has no row ${number}`);
    return row;
  };

  const copies = times(FLAWS.copies, () => any(numbers)).map((number) => {
    const row = at(number);
    return { written: later(row.at), text: cells(eventId(number), row) };
  });
  const corrected = times(FLAWS.correctedFares, () => any(enrolledFares)).map((number) => {
    const row = at(number);
    const written = row.at + 40_000;
    return { written, text: cells(eventId(number), { ...row, at: written, fare: String(Number(row.fare) + 120) }) };
  });
  // Faulty lines stand beside good ones: what they would have said is lost, and no visitor's figures hang on it.
  const lost = (spoil: (id: string, row: LogRow) => string) => {
    const number = any(fares);
    const row = at(number);
    return { written: row.at + 1, text: spoil(eventId(number).replace("w", "x"), row) };
  };
  return [
    ...rows.map((row, number) => ({ written: row.at, text: cells(eventId(number), row) })),
    ...copies,
    ...corrected,
    ...times(FLAWS.wrongCells / 2, () => lost((id, row) => `${cells(id, row)},,0`)),
    ...times(FLAWS.wrongCells / 2, () => lost((id, row) => cells(id, row).split(",").slice(0, 4).join(","))),
    ...times(FLAWS.unreadableTimes, () => lost((id, row) => cells(id, row, any(NO_TIMES)))),
    ...times(FLAWS.fareNoNumber, () => lost((id, row) => cells(id, { ...row, fare: any(NO_NUMBERS) }))),
    ...times(FLAWS.noVisitor, () => lost((id, row) => cells(id, { ...row, visitor: { ...row.visitor, id: "" } }))),
  ].sort((a, b) => a.written - b.written);
}

const NO_NUMBERS = ["n/a", '"1.240,50"', "kr 480", "4 80"];
const NO_TIMES = ["yesterday", "2026-13-45T10:00:00Z", "0000-00-00 00:00:00"];

function eventId(number: number): string {
  return `w${String(number + 1).padStart(7, "0")}`;
}

/** One csv line. The site writes times in UTC. */
function cells(id: string, row: LogRow, time = new Date(row.at).toISOString()): string {
  const { visitor } = row;
  const route = visitor.route.includes(",") ? `"${visitor.route}"` : visitor.route;
  return `${id},${time},${visitor.id},${row.event},${row.arm},${visitor.platform},${visitor.country},${route},${row.fare},${row.seconds},${visitor.isStaff}`;
}

/** The desk writes local times without an offset, under its own column names. */
function deskLines(rows: readonly LogRow[]): string[] {
  const lines = rows.map((row, index) => {
    const opened = new Date(row.at + AHEAD).toISOString().slice(0, 19).replace("T", " ");
    const ticket = `t${String(index + 1).padStart(5, "0")}`;
    return JSON.stringify({ ticket, opened, kind: row.event, visitor: row.visitor.id, minutes: Number(row.minutes) });
  });
  const cut = (line: string | undefined) => (line ?? "").slice(0, 40).replace('"t', '"x');
  const broken = Array.from({ length: FLAWS.brokenJson }, (_, index) => cut(lines[500 * (index + 1)]));
  return [...lines, ...broken];
}
