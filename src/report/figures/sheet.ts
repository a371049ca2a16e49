import { type Drawing, escaped } from "../charts/draw.ts";

/** A figure on a sheet of its own: drawings of charts/ and lines of text, set one below the other into one SVG file. */
export interface Sheet {
  readonly title: string;
  /** How it is read, under the drawing. */
  readonly note: string;
  readonly rows: readonly SheetRow[];
}
export interface SheetRow {
  readonly height: number;
  readonly texts: readonly SheetText[];
  readonly drawings: readonly SheetDrawing[];
}
export interface SheetText {
  readonly x: number;
  readonly text: string;
  readonly look?: "plain" | "quiet" | "strong" | "group";
  readonly end?: boolean;
  /** Characters that have room; a longer text ends in an ellipsis, the report has it whole. */
  readonly room?: number;
}
export interface SheetDrawing {
  readonly drawing: Drawing;
  readonly x: number;
  readonly width: number;
  /** Where a drawing is far taller than its row, for the row to cut it to its own height around the middle. */
  readonly cut: boolean;
}

export const SHEET_WIDTH = 960;
const MARGIN = 20;
const TITLE = 34;
const LETTERS_A_LINE = 110;
const NOTE_A_LINE = 140;

/** Fixed colours on paper: the file stands in documents that know nothing of the report's style. */
const STYLE = `--paper:#fffefb;--ink:#1d1b18;--quiet:#5b564e;--line:#857f73;--variant-1:#0072b2;--variant-2:#e69f00;--variant-3:#56b4e9;--variant-4:#cc79a7;--variant-5:#f0e442;color:#1d1b18;fill:#1d1b18;font:13px Charter,Cambria,'Noto Serif','Liberation Serif',serif`;

export function sheetSvg({ title, note, rows }: Sheet): string {
  const titleLines = wrapped(title, LETTERS_A_LINE);
  const parts: string[] = titleLines.map((line, i) => textAt(line, MARGIN, MARGIN + 16 + i * 18, "strong", false));
  let y = MARGIN + TITLE + (titleLines.length - 1) * 18;
  for (const row of rows) {
    const top = y;
    parts.push(
      ...row.drawings.map((one) => nested(one, top, row.height)),
      ...row.texts.map(({ x, text, look = "plain", end = false, room }) =>
        textAt(room === undefined ? text : within(text, room), MARGIN + x, top + row.height / 2 + 4.5, look, end),
      ),
    );
    y += row.height;
  }
  const notes = wrapped(note, NOTE_A_LINE);
  parts.push(...notes.map((line, i) => textAt(line, MARGIN, y + 20 + i * 17, "quiet", false)));
  y += notes.length * 17 + 8;
  const [width, height] = [SHEET_WIDTH + 2 * MARGIN, y + MARGIN];
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}" role="img" aria-labelledby="sheet-title" style="${STYLE}"><title id="sheet-title">${escaped(title)}</title><rect width="${width}" height="${height}" fill="var(--paper)"/>${parts.join("")}</svg>\n`;
}

const LOOKS = {
  plain: "",
  quiet: ' fill="var(--quiet)"',
  strong: ' font-weight="700"',
  group: ' fill="var(--quiet)" font-style="italic"',
} as const;

function textAt(text: string, x: number, y: number, look: keyof typeof LOOKS, end: boolean): string {
  return `<text x="${x}" y="${y}"${end ? ' text-anchor="end"' : ""}${LOOKS[look]}>${escaped(text)}</text>`;
}

/** The drawing as an element inside the sheet, cut to the row where it is taller. */
function nested({ drawing, x, width, cut }: SheetDrawing, y: number, rowHeight: number): string {
  const [, w = "", h = "", content = ""] =
    /^<svg viewBox="0 0 ([\d.]+) ([\d.]+)"[^>]*>(.*)<\/svg>$/s.exec(drawing.svg) ?? [];
  if (w === "") throw new Error(`a drawing that does not begin at 0: ${drawing.svg.slice(0, 60)}`);
  const scale = width / Number(w);
  const shown = cut ? rowHeight / scale : Number(h);
  const from = cut ? (Number(h) - shown) / 2 : 0;
  return `<svg x="${MARGIN + x}" y="${y}" width="${width}" height="${shown * scale}"${cut ? "" : ' overflow="visible"'} viewBox="0 ${from} ${w} ${shown}">${content}</svg>`;
}

export function within(text: string, room: number): string {
  const letters = [...text];
  return letters.length <= room ? text : `${letters.slice(0, room - 1).join("")}\u2026`;
}

function wrapped(text: string, room: number): string[] {
  const lines: string[] = [];
  for (const word of text.split(/\s+/)) {
    const last = lines[lines.length - 1];
    if (last === undefined || last.length + word.length + 1 > room) lines.push(within(word, room));
    else lines[lines.length - 1] = `${last} ${word}`;
  }
  return lines;
}
