/**
 * Comma- or tab-separated text to records, RFC 4180, in Node: for headers, for lists of ids, for the rare file that the
 * engine's reader refuses, and to find the physical lines of rejected rows.
 */

export interface RawRecord {
  /** Physical line on which the record starts, from 1. */
  readonly line: number;
  readonly text: string;
  /**
   * Null when the record cannot be cut into cells: a quoted cell that goes on after its closing quote, or never ends. Such
   * a quote may have swallowed rows, so each line of it stands as a record of its own.
   */
  readonly cells: readonly string[] | null;
}

export const delimiterOf = (format: "csv" | "tsv" | "ndjson" | "parquet"): "," | "\t" =>
  format === "tsv" ? "\t" : ",";

/** The longest record; the engine's reader has the same limit. More is a quote that does not close. */
export const LONGEST_RECORD = 4 * 1024 * 1024;
export class EndlessRecord extends Error {}

/** Where a record does not end the engine's reader goes on somewhere behind it; where, nobody can tell. */
export function unlessEndless(cause: unknown): null {
  if (cause instanceof EndlessRecord) return null;
  throw cause;
}

/**
 * Records of a text that comes in pieces. Blank lines are not records; a byte-order mark is left out.
 * @throws EndlessRecord when one goes on for more than LONGEST_RECORD characters
 */
export async function* records(chunks: AsyncIterable<string>, delimiter: string): AsyncGenerator<RawRecord> {
  let rest = "";
  let line = 1;
  let first = true;
  for await (const chunk of chunks) {
    rest += first ? chunk.replace(/^\uFEFF/, "") : chunk;
    if (chunk.length > 0) first = false;
    let from = 0;
    for (;;) {
      const end = recordEnd(rest, from, delimiter);
      // A record may go on in the next piece, and so may a line end that is cut between its two characters.
      if (end === null || (rest[end.next - 1] === "\r" && end.next === rest.length)) break;
      const text = rest.slice(from, end.at);
      if (text !== "") yield* cut(text, line, delimiter);
      line += lines(rest.slice(from, end.next));
      from = end.next;
    }
    rest = rest.slice(from);
    if (rest.length > LONGEST_RECORD)
      throw new EndlessRecord(`the record on line ${line} does not end; look for a quote that does not close`);
  }
  const last = rest.endsWith("\r") ? rest.slice(0, -1) : rest;
  if (last !== "") yield* cut(last, line, delimiter);
}

function* cut(text: string, line: number, delimiter: string): Generator<RawRecord> {
  const found = cells(text, delimiter);
  if (found !== null) return yield { line, text, cells: found };
  for (const [i, own] of text.split(/\r\n|\r|\n/).entries())
    if (own !== "") yield { line: line + i, text: own, cells: null };
}

/**
 * The cells of one record; null when its quotes are wrong. One space before an opening quote and spaces after a closing
 * one are not part of the cell, as in `1, "a" ,2`; a quote after such spaces opens the cell again.
 */
export function cells(record: string, delimiter: string): string[] | null {
  const found: string[] = [];
  let at = 0;
  for (;;) {
    const quote = openingQuote(record, at);
    if (quote === null) {
      const end = record.indexOf(delimiter, at);
      found.push(end < 0 ? record.slice(at) : record.slice(at, end));
      if (end < 0) return found;
      at = end + 1;
    } else {
      const end = closingQuote(record, quote + 1);
      if (end === null) return null;
      found.push(unquoted(record.slice(quote, end)));
      at = afterSpaces(record, end);
      if (at === record.length) return found;
      if (record[at] !== delimiter) return null;
      at += 1;
    }
  }
}

/** A cell as RFC 4180 writes it in quotes. */
export const quoted = (cell: string): string => `"${cell.replaceAll('"', '""')}"`;

/** Whether a record fits a header: it has as many cells. */
export const fits = ({ cells }: RawRecord, width: number): boolean => cells !== null && cells.length === width;

/** Where the record that starts at `from` ends: outside quotes, at LF, CR LF or CR. Null: it goes on. */
function recordEnd(text: string, from: number, delimiter: string): { at: number; next: number } | null {
  let at = from;
  let cellStart = true;
  while (at < text.length) {
    const quote = cellStart ? openingQuote(text, at) : null;
    cellStart = false;
    if (quote !== null) {
      const end = closingQuote(text, quote + 1);
      if (end === null || end === text.length) return null;
      at = end;
      continue;
    }
    const c = text[at];
    if (c === "\n") return { at, next: at + 1 };
    if (c === "\r") return { at, next: text[at + 1] === "\n" ? at + 2 : at + 1 };
    cellStart = c === delimiter;
    at += 1;
  }
  return null;
}

/** The index of the quote with which the cell at `at` begins, if it does. */
function openingQuote(text: string, at: number): number | null {
  const quote = text[at] === " " ? at + 1 : at;
  return text[quote] === '"' ? quote : null;
}

/** The index after the quote that closes the cell, for good; null when it has not come yet. */
function closingQuote(text: string, from: number): number | null {
  let at = from;
  for (;;) {
    const quote = text.indexOf('"', at);
    if (quote < 0) return null;
    const next = afterSpaces(text, quote + 1);
    if (text[next] !== '"') return quote + 1;
    at = next + 1;
  }
}

function afterSpaces(text: string, from: number): number {
  let at = from;
  while (text[at] === " ") at += 1;
  return at;
}

/** What stands between the outer quotes; two quotes are one, and a cell that was closed and opened again is one cell. */
const unquoted = (text: string): string => text.slice(1, -1).replace(/" *"/g, (pair) => pair.slice(1, -1) || '"');

function lines(text: string): number {
  let count = 0;
  for (let i = 0; i < text.length; i++) {
    const c = text[i];
    if (c === "\n" || (c === "\r" && text[i + 1] !== "\n")) count += 1;
  }
  return count;
}
