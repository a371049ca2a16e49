/**
 * Comma- or tab-separated text to records, RFC 4180, in Node: for headers, for lists of ids, for the rare file that the
 * engine's reader refuses, and to find the physical lines of rejected rows.
 */

export interface RawRecord {
  /** Physical line on which the record starts, from 1. */
  readonly line: number;
  readonly text: string;
  /** How many cells it has; null where `cells` is. */
  readonly width: number | null;
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
  for await (const batch of recordBatches(chunks, delimiter)) yield* batch;
}

/** The same by pieces: for files of many million records, of which each would have to be waited for. */
export async function* recordBatches(chunks: AsyncIterable<string>, delimiter: string): AsyncGenerator<RawRecord[]> {
  let rest = "";
  let line = 1;
  let first = true;
  for await (const chunk of chunks) {
    rest += first ? chunk.replace(/^\uFEFF/, "") : chunk;
    if (chunk.length > 0) first = false;
    const batch: RawRecord[] = [];
    const [quotes, feeds, returns] = [finder(rest, '"'), finder(rest, "\n"), finder(rest, "\r")];
    let from = 0;
    for (;;) {
      const lineEnd = Math.min(feeds(from), returns(from));
      const isPlain = quotes(from) > lineEnd;
      const end = isPlain ? plainEnd(rest, lineEnd) : recordEnd(rest, from, delimiter);
      // A record may go on in the next piece, and so may a line end that is cut between its two characters.
      if (end === null || (rest[end.next - 1] === "\r" && end.next === rest.length)) break;
      const text = rest.slice(from, end.at);
      if (text !== "") batch.push(...(isPlain ? [plain(text, line, delimiter)] : cut(text, line, delimiter)));
      line += isPlain ? 1 : lines(rest.slice(from, end.next));
      from = end.next;
    }
    rest = rest.slice(from);
    if (batch.length > 0) yield batch;
    if (rest.length > LONGEST_RECORD)
      throw new EndlessRecord(`the record on line ${line} does not end; look for a quote that does not close`);
  }
  const last = rest.endsWith("\r") ? rest.slice(0, -1) : rest;
  if (last !== "") yield cut(last, line, delimiter);
}

/** Where a sign stands next, at or behind a place that only goes forward; behind the text if nowhere. */
function finder(text: string, sign: string): (from: number) => number {
  let next = -1;
  return (from) => {
    if (next < from) {
      const found = text.indexOf(sign, from);
      next = found < 0 ? text.length : found;
    }
    return next;
  };
}

/** Of a record without a quote; null: it goes on. */
function plainEnd(text: string, at: number): { readonly at: number; readonly next: number } | null {
  if (at === text.length) return null;
  return { at, next: text[at] === "\r" && text[at + 1] === "\n" ? at + 2 : at + 1 };
}

/** A record without a quote, which is cut when its cells are asked for. */
function plain(text: string, line: number, delimiter: string): RawRecord {
  return {
    line,
    text,
    width: countOf(text, delimiter) + 1,
    get cells() {
      return text.split(delimiter);
    },
  };
}

function countOf(text: string, sign: string): number {
  const code = sign.charCodeAt(0);
  let found = 0;
  for (let at = 0; at < text.length; at++) if (text.charCodeAt(at) === code) found += 1;
  return found;
}

function cut(text: string, line: number, delimiter: string): RawRecord[] {
  const found = cells(text, delimiter);
  if (found !== null) return [{ line, text, width: found.length, cells: found }];
  return text
    .split(/\r\n|\r|\n/)
    .flatMap((own, i) => (own === "" ? [] : [{ line: line + i, text: own, width: null, cells: null }]));
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
