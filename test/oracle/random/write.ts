import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import type { Cell } from "../where.ts";
import type { Dice } from "./dice.ts";
import type { RandomRow, RandomSource } from "./log.ts";
import type { RandomList } from "./plan.ts";

/** How a log is written. */
export interface Form {
  readonly format: "csv" | "tsv" | "ndjson";
  readonly gz: boolean;
  readonly lineEnd: "\n" | "\r\n";
  readonly byteOrderMark: boolean;
  readonly files: number;
  readonly shuffled: boolean;
}

export const PLAIN: Form = { format: "csv", gz: false, lineEnd: "\n", byteOrderMark: false, files: 1, shuffled: false };

export function drawForm(dice: Dice): Form {
  return {
    format: dice.pick(["csv", "csv", "tsv", "ndjson"]),
    gz: dice.chance(0.3),
    lineEnd: dice.pick(["\n", "\n", "\r\n"]),
    byteOrderMark: dice.chance(0.15),
    files: dice.pick([1, 1, 1, 2, 3]),
    shuffled: dice.chance(0.5),
  };
}

/** Writes each source into a folder of its own and gives the pattern that finds its files. */
export function writeLog(dice: Dice, folder: string, sources: readonly RandomSource[], form: Form): string[] {
  return sources.map((source, at) => {
    const pattern = `log ${at}/part-*.${form.format}${form.gz ? ".gz" : ""}`;
    mkdirSync(join(folder, `log ${at}`), { recursive: true });
    split(dice, source, form).forEach((part, place) => {
      const text = fileText(dice, part, form);
      const bytes = Buffer.from(
        form.byteOrderMark && form.format !== "ndjson" && text !== "" ? `\uFEFF${text}` : text,
        "utf8",
      );
      writeFileSync(join(folder, pattern.replace("*", String(place))), form.gz ? gzipSync(bytes) : bytes);
    });
    return pattern;
  });
}

export function writeList(folder: string, list: RandomList): void {
  const lines = list.column === null ? list.ids : [list.column, ...list.ids].map((id, at) => `${quote(id, ",")},${at}`);
  writeFileSync(join(folder, list.file), `${lines.join("\n")}\n`);
}

/** The rows dealt to files; columns stand in any order, and an empty file holds no row. */
function split(dice: Dice, { columns, rows }: RandomSource, form: Form): RandomSource[] {
  const order = form.shuffled ? dice.shuffled(rows) : rows;
  const readable = order.filter((row) => row !== null);
  const broken = order.filter((row) => row === null);
  const files = Array.from({ length: Math.max(1, Math.min(form.files, readable.length)) }, (_, at) => {
    const dealt = readable.filter((_, place) => place % form.files === at);
    return {
      columns: at === 0 ? columns : dice.shuffled(columns),
      rows: at === 0 ? mixed(dice, dealt, broken) : dealt,
    };
  });
  return form.files > 1 && dice.chance(0.2) ? [...files, { columns: [], rows: [] }] : files;
}

function mixed(dice: Dice, rows: readonly RandomRow[], others: readonly RandomRow[]): RandomRow[] {
  return others.reduce<RandomRow[]>((all, other) => all.toSpliced(dice.below(all.length + 1), 0, other), [...rows]);
}

function fileText(dice: Dice, source: RandomSource, form: Form): string {
  if (source.columns.length === 0) return "";
  const lines =
    form.format === "ndjson" ? jsonLines(dice, source) : quotedLines(dice, source, form.format === "tsv" ? "\t" : ",");
  const blanks = lines.flatMap((line) => (dice.chance(0.03) ? [line, ""] : [line]));
  return blanks.join(form.lineEnd) + (dice.chance(0.8) ? form.lineEnd : "");
}

function quotedLines(dice: Dice, { columns, rows }: RandomSource, separator: string): string[] {
  const line = (row: RandomRow) => {
    if (row === null) {
      // a cell too few, one too many, or an empty one too many
      const more = dice.pick([-1, 1, 0]);
      return `${Array(columns.length + more)
        .fill("zzz")
        .join(separator)}${more === 0 ? separator : ""}`;
    }
    return columns.map((column) => cellText(dice, row[column] ?? null, separator)).join(separator);
  };
  return [columns.map((column) => cellText(dice, column, separator)).join(separator), ...rows.map(line)];
}

function cellText(dice: Dice, cell: Cell, separator: string): string {
  if (cell === null) return dice.chance(0.2) ? '""' : "";
  return dice.chance(0.15) ? quoted(cell) : quote(cell, separator);
}

const quoted = (text: string): string => `"${text.replaceAll('"', '""')}"`;

function quote(text: string, separator: string): string {
  return text.includes(separator) || /["\r\n]/.test(text) ? quoted(text) : text;
}

/** The first row that can be read writes every column, since a column must be in its file. */
function jsonLines(dice: Dice, { columns, rows }: RandomSource): string[] {
  const first = rows.findIndex((row) => row !== null);
  return rows.map((row, at) => {
    if (row === null) return dice.pick(['{"zzz": "z', "zzz"]);
    const pairs = columns.flatMap((column): [string, unknown][] => {
      const cell = row[column] ?? null;
      if (cell !== null) return [[column, jsonValue(dice, cell)]];
      const missing: [string, unknown][][] = [[[column, null]], [[column, ""]], ...(at === first ? [] : [[], []])];
      return dice.pick(missing);
    });
    return JSON.stringify(Object.fromEntries(pairs));
  });
}

/** A number or a truth value where its text is the very one that JSON writes. */
function jsonValue(dice: Dice, cell: string): unknown {
  if (dice.chance(0.5)) return cell;
  if (cell === "true" || cell === "false") return cell === "true";
  return String(Number(cell)) === cell && /^-?\d{1,15}(\.\d+)?$/.test(cell) ? Number(cell) : cell;
}
