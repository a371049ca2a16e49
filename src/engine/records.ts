/**
 * Comma- or tab-separated text to records, RFC 4180, in Node: for headers, for lists of ids, for the rare file that the
 * engine's reader refuses, and to find the physical lines of rejected rows.
 */

export interface RawRecord {
  /** Physical line on which the record starts, from 1. */
  readonly line: number;
  readonly text: string;
  /** Null when the record cannot be cut into cells: a quoted cell that goes on after its closing quote, or never ends. */
  readonly cells: readonly string[] | null;
}

/** Records of a text that comes in pieces. Blank lines are not records; a byte-order mark is left out. */
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
      if (text !== "") yield { line, text, cells: cells(text, delimiter) };
      line += lines(rest.slice(from, end.next));
      from = end.next;
    }
    rest = rest.slice(from);
  }
  const last = rest.endsWith("\r") ? rest.slice(0, -1) : rest;
  if (last !== "") yield { line, text: last, cells: cells(last, delimiter) };
}

/** The cells of one record; null when its quotes are wrong. */
export function cells(record: string, delimiter: string): string[] | null {
  const found: string[] = [];
  let at = 0;
  for (;;) {
    if (record[at] === '"') {
      let value = "";
      let from = at + 1;
      for (;;) {
        const quote = record.indexOf('"', from);
        if (quote < 0) return null;
        value += record.slice(from, quote);
        if (record[quote + 1] === '"') {
          value += '"';
          from = quote + 2;
          continue;
        }
        at = quote + 1;
        break;
      }
      found.push(value);
      if (at === record.length) return found;
      if (record[at] !== delimiter) return null;
      at += 1;
    } else {
      const end = record.indexOf(delimiter, at);
      if (end < 0) {
        found.push(record.slice(at));
        return found;
      }
      found.push(record.slice(at, end));
      at = end + 1;
    }
  }
}

/** Where the record that starts at `from` ends: outside quotes, at LF, CR LF or CR. Null: it goes on. */
function recordEnd(text: string, from: number, delimiter: string): { at: number; next: number } | null {
  let at = from;
  let cellStart = true;
  while (at < text.length) {
    const c = text[at];
    if (c === '"' && cellStart) {
      at = closingQuote(text, at + 1);
      if (at < 0) return null;
      cellStart = false;
      continue;
    }
    if (c === "\n") return { at, next: at + 1 };
    if (c === "\r") return { at, next: text[at + 1] === "\n" ? at + 2 : at + 1 };
    cellStart = c === delimiter;
    at += 1;
  }
  return null;
}

/** The index after the quote that closes; -1 when it has not come yet. */
function closingQuote(text: string, from: number): number {
  let at = from;
  for (;;) {
    const quote = text.indexOf('"', at);
    if (quote < 0 || quote + 1 === text.length) return -1;
    if (text[quote + 1] !== '"') return quote + 1;
    at = quote + 2;
  }
}

function lines(text: string): number {
  let count = 0;
  for (let i = 0; i < text.length; i++) {
    const c = text[i];
    if (c === "\n" || (c === "\r" && text[i + 1] !== "\n")) count += 1;
  }
  return count;
}
