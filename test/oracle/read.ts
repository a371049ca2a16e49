import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { gunzipSync } from "node:zlib";
import type { Plan } from "../../src/plan/types.ts";
import type { Lists, RawFile } from "./types.ts";
import type { Cell } from "./where.ts";

/** The log of a plan as text cells, by a reader of our own: csv, tsv and ndjson, plain or .gz, `*` in the last part of a path. */
export function readLog(plan: Plan, folder: string): RawFile[] {
  return plan.log.flatMap((entry, source) =>
    [...new Set(entry.files.flatMap((pattern) => expand(folder, pattern)))].map((file) => ({
      source,
      file,
      ...parseFile(file, textOf(folder, file)),
    })),
  );
}

/** The ids of the plan's `listed-in` files: one a line, or the column that is headed like the unit's. */
export function readLists(plan: Plan, folder: string): Lists {
  const unitColumns = plan.log.map(({ columns }) => columns.unit);
  return new Map(
    plan.filters.flatMap((filter) =>
      "listedIn" in filter
        ? [[filter.listedIn, new Set(idsOf(textOf(folder, filter.listedIn), unitColumns))] as const]
        : [],
    ),
  );
}

function idsOf(text: string, unitColumns: readonly string[]): string[] {
  const [header = [], ...rows] = parseQuoted(text, ",");
  const place = header.findIndex((name) => unitColumns.includes(name));
  const ids = place >= 0 ? rows.map((row) => row[place] ?? "") : text.split(/\r?\n/);
  return ids.filter((id) => id !== "");
}

function expand(folder: string, pattern: string): string[] {
  if (!pattern.includes("*")) return [pattern];
  const slash = pattern.lastIndexOf("/") + 1;
  const parts = pattern
    .slice(slash)
    .split("*")
    .map((part) => part.replace(/[.+?^${}()|[\]\\]/g, "\\$&"));
  const name = new RegExp(`^${parts.join(".*")}$`);
  return readdirSync(join(folder, pattern.slice(0, slash)))
    .filter((file) => name.test(file))
    .sort()
    .map((file) => pattern.slice(0, slash) + file);
}

function textOf(folder: string, file: string): string {
  const bytes = readFileSync(join(folder, file));
  const text = (file.endsWith(".gz") ? gunzipSync(bytes) : bytes).toString("utf8");
  return text.startsWith("\uFEFF") ? text.slice(1) : text;
}

type Parsed = Pick<RawFile, "header" | "rows" | "unreadable">;

function parseFile(file: string, text: string): Parsed {
  const name = file.replace(/\.gz$/, "");
  if (name.endsWith(".ndjson")) return parseNdjson(text);
  const [header = [], ...rows] = parseQuoted(text, name.endsWith(".tsv") ? "\t" : ",");
  const whole = rows.filter((row) => row.length === header.length);
  return { header, rows: whole, unreadable: rows.length - whole.length };
}

/** RFC 4180: quotes around a cell, doubled inside it; blank lines are not rows. */
export function parseQuoted(text: string, separator: string): string[][] {
  const rows: string[][] = [];
  let row: string[] = [];
  let cell = "";
  let quoted = false;
  let blank = true;
  const endRow = () => {
    if (!blank) rows.push([...row, cell]);
    row = [];
    cell = "";
    blank = true;
  };
  for (let at = 0; at < text.length; at++) {
    const character = text.charAt(at);
    if (quoted) {
      if (character !== '"') cell += character;
      else if (text.charAt(at + 1) === '"') cell += text.charAt(at++);
      else quoted = false;
    } else if (character === "\n" || (character === "\r" && text.charAt(at + 1) === "\n")) {
      if (character === "\r") at++;
      endRow();
    } else {
      blank = false;
      if (character === '"' && cell === "") quoted = true;
      else if (character === separator) {
        row.push(cell);
        cell = "";
      } else cell += character;
    }
  }
  endRow();
  return rows;
}

function parseNdjson(text: string): Parsed {
  const lines = text.split(/\r?\n/).filter((line) => line !== "");
  const objects = lines.flatMap((line) => {
    const object = objectOf(line);
    return object === null ? [] : [object];
  });
  const header = [...new Set(objects.flatMap((object) => Object.keys(object)))];
  return {
    header,
    rows: objects.map((object) => header.map((column) => cellOf(object[column]))),
    unreadable: lines.length - objects.length,
  };
}

function objectOf(line: string): Record<string, unknown> | null {
  try {
    const value: unknown = JSON.parse(line);
    return typeof value === "object" && value !== null && !Array.isArray(value)
      ? (value as Record<string, unknown>)
      : null;
  } catch {
    return null;
  }
}

function cellOf(value: unknown): Cell {
  if (value === undefined || value === null) return null;
  return typeof value === "object" ? JSON.stringify(value) : String(value);
}
