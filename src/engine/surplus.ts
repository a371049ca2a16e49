/**
 * Rows with more cells than the header of which the surplus is empty, such as `1,a,1,` under three columns. The engine's
 * reader lets them pass, though such a row cannot be read (DESIGN 4, rule 1). They are looked for in the bytes, which are
 * read for the fingerprint anyhow: nearly all pieces hold no delimiter at the end of a line, or none that need be looked at.
 */
export interface SurplusFinder {
  /** The next piece of the file's bytes, decompressed. */
  add(piece: Uint8Array): void;
  /** Whether there is such a row; no more pieces come. */
  end(): boolean;
}

const [QUOTE, LF, CR, SPACE] = [0x22, 0x0a, 0x0d, 0x20];
const BYTE_ORDER_MARK = [0xef, 0xbb, 0xbf];

/** Where the scan stands in a record: before a cell, before one after a space, in one, in its quotes, after them. */
const [START, AFTER_SPACE, PLAIN, QUOTED, CLOSED] = [0, 1, 2, 3, 4];

/**
 * By the grammar of records.ts. A record that is spoilt by its quotes may end elsewhere here: such a file is cut in Node in
 * any case.
 */
export function surplusFinder(delimiter: "," | "\t", width: number): SurplusFinder {
  const comma = delimiter.charCodeAt(0);
  const ends = [Buffer.from([comma, LF]), Buffer.from([comma, CR])];
  let place: number = START;
  let delimiters = 0;
  // Delimiters in a row that end what was read of the record.
  let tail = 0;
  let isBlank = true;
  let isHeader = true;
  let isFound = false;
  let isFirst = true;

  const endRecord = () => {
    if (!isBlank) {
      const surplus = delimiters + 1 - width;
      if (!isHeader && surplus > 0 && tail >= surplus) isFound = true;
      isHeader = false;
    }
    place = START;
    delimiters = 0;
    tail = 0;
    isBlank = true;
  };

  /** @returns where it stopped: at the end, or behind the first line end if asked so */
  const scan = (bytes: Uint8Array, from: number, toLineEnd: boolean): number => {
    let at = from;
    while (at < bytes.length) {
      if (place === QUOTED) {
        const closing = bytes.indexOf(QUOTE, at);
        if (closing < 0) return bytes.length;
        place = CLOSED;
        at = closing + 1;
        continue;
      }
      at = scanPlain(bytes, at);
      if (at === bytes.length || bytes[at] === QUOTE) {
        if (at < bytes.length) place = QUOTED;
        at += 1;
        continue;
      }
      endRecord();
      at += 1;
      if (toLineEnd) return at;
    }
    return bytes.length;
  };

  /**
   * Outside quotes, up to an opening quote or a line end: the loop that costs, so all in local variables.
   * @returns where that stands; behind the bytes if nowhere
   */
  const scanPlain = (bytes: Uint8Array, from: number): number => {
    let [now, some, ending] = [place, delimiters, tail];
    let at = from;
    for (; at < bytes.length; at++) {
      const byte = bytes[at];
      if (byte === comma) {
        some += 1;
        ending += 1;
        now = START;
      } else if (byte === LF || byte === CR) break;
      else {
        ending = 0;
        if (byte === QUOTE && now !== PLAIN) break;
        if (byte === SPACE && now === START) now = AFTER_SPACE;
        else if (byte !== SPACE || now !== CLOSED) now = PLAIN;
      }
    }
    // Of a record all that is read before its end, a quote that opens a cell too.
    if (at > from || (at < bytes.length && bytes[at] === QUOTE)) isBlank = false;
    [place, delimiters, tail] = [now, some, ending];
    return at;
  };

  return {
    add: (piece) => {
      if (isFound || piece.length === 0) return;
      const bytes = Buffer.from(piece.buffer, piece.byteOffset, piece.byteLength);
      const hasMark = isFirst && BYTE_ORDER_MARK.every((byte, i) => bytes[i] === byte);
      const from = hasMark ? BYTE_ORDER_MARK.length : 0;
      isFirst = false;
      const isPlain = place !== QUOTED && !isHeader && !bytes.includes(QUOTE);
      const next = scan(bytes, from, isPlain);
      if (next === bytes.length) return;
      // Of the whole records without a quote only those matter that end with a delimiter and have too many of them.
      const last = Math.max(next, bytes.lastIndexOf(LF) + 1, bytes.lastIndexOf(CR) + 1);
      if (ends.some((end) => bytes.includes(end)) && hasSurplus(bytes, next, last, comma, width)) isFound = true;
      scan(bytes, last, false);
    },
    end: () => {
      if (place !== QUOTED) endRecord();
      return isFound;
    },
  };
}

/** Whether one of the records between two line ends, none with a quote, has surplus empty cells: the loop that costs. */
function hasSurplus(bytes: Uint8Array, from: number, to: number, comma: number, width: number): boolean {
  let delimiters = 0;
  for (let at = from; at < to; at++) {
    const byte = bytes[at];
    if (byte === comma) delimiters += 1;
    else if (byte === LF || byte === CR) {
      if (delimiters >= width && endsWithDelimiters(bytes, at, delimiters + 1 - width, comma)) return true;
      delimiters = 0;
    }
  }
  return false;
}

function endsWithDelimiters(bytes: Uint8Array, end: number, some: number, comma: number): boolean {
  for (let at = end - some; at < end; at++) if (bytes[at] !== comma) return false;
  return true;
}
