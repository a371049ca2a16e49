import type { FoundLog, PlanSource, Problem } from "../plan/index.ts";
import { type Engine, text, textOrNull } from "./engine.ts";
import { enginePath, type LogFile, logFiles } from "./files.ts";
import { cells } from "./records.ts";
import { type ColumnKind, type FileGroup, kindOf } from "./source.ts";
import { jsonKeys, lines, parquetColumns, parquetNames } from "./sql/read.ts";
import { firstLine, UnusableLog } from "./unusable.ts";

/** A log whose files are found and whose headers are read. */
export interface OpenLog {
  /** In the order of the plan's entries, each entry's by name; the index is the `file` of a row. */
  readonly files: readonly LogFile[];
  readonly groups: readonly FileGroup[];
  readonly found: FoundLog;
  readonly problems: readonly Problem[];
}

interface Header {
  readonly columns: readonly string[];
  readonly engineNames: readonly string[];
  readonly kinds: readonly ColumnKind[];
  readonly skip: number;
}

/** Finds the files of the log and reads their headers; like files form a group that one reader takes. */
export async function openLog(
  source: PlanSource,
  folder: string,
  engine: Engine,
  workFolder: string,
): Promise<OpenLog> {
  const { files, problems } = await logFiles(source.log, folder);
  const wanted = new Set(source.mentions.map((mention) => mention.name));
  const opened: { file: LogFile; path: string; header: Header }[] = [];
  for (const [index, file] of files.entries()) {
    const path = await enginePath(file.path, workFolder, index);
    opened.push({ file, path, header: await headerOf(file, path, wanted, engine) });
  }
  const groups = new Map<string, FileGroup>();
  for (const [index, { file, path, header }] of opened.entries()) {
    // An empty file has no rows, and no header to miss a column in.
    if (header.columns.length === 0) continue;
    const key = JSON.stringify([file.source, file.format, header]);
    const group = groups.get(key) ?? { source: file.source, format: file.format, files: [], ...header };
    groups.set(key, { ...group, files: [...group.files, { index, path }] });
  }
  const columnsBySource = source.log.map((_, entry) => ({
    files: opened
      .filter(({ file }) => file.source === entry)
      .map(({ file, header }) => ({ name: file.name, columns: header.columns })),
    isPartial: problems.some((problem) => problem.path[1] === entry),
  }));
  return { files, groups: [...groups.values()], found: { columnsBySource }, problems };
}

async function headerOf(file: LogFile, path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<Header> {
  try {
    return await readHeader(file, path, wanted, engine);
  } catch (cause) {
    throw new UnusableLog(`${file.name} cannot be read as ${file.format}: ${firstLine(cause, path, file.name)}`, {
      cause,
    });
  }
}

async function readHeader(file: LogFile, path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<Header> {
  switch (file.format) {
    case "csv":
      return delimitedHeader(path, ",", engine);
    case "tsv":
      return delimitedHeader(path, "\t", engine);
    case "ndjson":
      return asText(await jsonHeader(path, wanted, engine), 0);
    case "parquet":
      return parquetHeader(path, engine);
  }
}

const asText = (columns: readonly string[], skip: number): Header => ({
  columns,
  engineNames: columns,
  kinds: columns.map(() => "text"),
  skip,
});

const HEADER_LINES = 50;

/** The cells of the first record, which a quoted name may spread over several lines. */
export async function delimitedHeader(path: string, delimiter: string, engine: Engine): Promise<Header> {
  const rows = await engine.query(lines(path, HEADER_LINES));
  const texts = rows.map((row) => textOrNull(row, "line") ?? "");
  const start = texts.findIndex((line) => line !== "");
  if (start < 0) return asText([], 0);
  for (let end = start + 1; end <= texts.length; end++) {
    const header = cells(texts.slice(start, end).join("\n"), delimiter);
    if (header !== null) return asText(header, start);
  }
  return asText([], 0);
}

const SAMPLE_LINES = 2_000;

/** The keys of the first lines; of all lines when one that the plan names is not among those. Sorted: lines have no common order. */
async function jsonHeader(path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<string[]> {
  const keys = async (limit: number) => (await engine.query(jsonKeys([path], limit))).map((row) => text(row, "key"));
  const sampled = await keys(SAMPLE_LINES);
  const isWhole = [...wanted].every((column) => sampled.includes(column));
  return (isWhole ? sampled : await keys(0)).sort();
}

async function parquetHeader(path: string, engine: Engine): Promise<Header> {
  const described = await engine.query(parquetColumns(path));
  const named = await engine.query(parquetNames(path));
  return {
    columns: topLevel(named.map((row) => ({ name: text(row, "name"), children: Number(row.num_children ?? 0n) }))),
    engineNames: described.map((row) => text(row, "column_name")),
    kinds: described.map((row) => kindOf(text(row, "column_type"))),
    skip: 0,
  };
}

/** The names right under the root of a schema that is listed depth first. */
function topLevel(nodes: readonly { readonly name: string; readonly children: number }[]): string[] {
  const names: string[] = [];
  const skip = (at: number): number => {
    let next = at + 1;
    for (let i = 0; i < (nodes[at]?.children ?? 0); i++) next = skip(next);
    return next;
  };
  for (let at = 1; at < nodes.length; at = skip(at)) names.push(nodes[at]?.name ?? "");
  return names;
}
