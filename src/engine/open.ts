import type { FoundLog, PlanSource, Problem } from "../plan/index.ts";
import { isWhole, packedWith, textOf } from "./compression.ts";
import { type Engine, text } from "./engine.ts";
import { enginePath, type LogFile, logFiles, states } from "./files.ts";
import { records } from "./records.ts";
import { type ColumnKind, type FileGroup, kindOf } from "./source.ts";
import { jsonKeys, parquetColumns, parquetNodes } from "./sql/read.ts";
import { firstLine, notWhole, UnusableLog } from "./unusable.ts";

/** A log whose files are found and whose headers are read. */
export interface OpenLog {
  /** In the order of the plan's entries, each entry's by name; the index is the `file` of a row. */
  readonly files: readonly LogFile[];
  readonly groups: readonly FileGroup[];
  readonly found: FoundLog;
  readonly problems: readonly Problem[];
  /** Of each file when it was opened, see `states`. */
  readonly opened: readonly string[];
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
  const atOpening = await states(files);
  const wanted = new Set(source.mentions.map((mention) => mention.name));
  const opened: { file: LogFile; path: string; header: Header }[] = [];
  for (const [index, file] of files.entries()) {
    const path = await enginePath(file.path, workFolder, index);
    opened.push({ file, path, header: await headerOf(file, path, wanted, engine) });
  }
  const groups = new Map<string, FileGroup>();
  for (const [index, { file, path, header }] of opened.entries()) {
    // A file without a header has no rows, and none to miss a column in; lines of JSON have no header.
    if (header.columns.length === 0 && file.format !== "ndjson") continue;
    const key = JSON.stringify([file.source, file.format, header, standsAlone(header) ? index : null]);
    const group = groups.get(key) ?? { source: file.source, format: file.format, files: [], ...header };
    groups.set(key, { ...group, files: [...group.files, { index, path }] });
  }
  const columnsBySource = source.log.map((_, entry) => ({
    files: opened
      .filter(({ file }) => file.source === entry)
      .map(({ file, header }) => ({ name: file.name, columns: header.columns })),
    isPartial: problems.some((problem) => problem.path[1] === entry),
  }));
  return { files, groups: [...groups.values()], found: { columnsBySource }, problems, opened: atOpening };
}

/** Several files are told apart by a column that the reader adds: a file with one of that name is read by itself. */
const standsAlone = ({ engineNames }: Header) => engineNames.some((column) => column.toLowerCase() === "file_index");

async function headerOf(file: LogFile, path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<Header> {
  const packed = await packedWith(file.path).catch((cause: NodeJS.ErrnoException) => {
    if (cause.code !== "EACCES") throw cause;
    throw new UnusableLog(`${file.name} may not be read by you. Ask for the right to read it.`, { cause });
  });
  try {
    if (packed !== null && !/\.(gz|zst)$/i.test(file.name))
      throw new Error(`it is packed with ${packed}; call it ${file.name}${packed === "gzip" ? ".gz" : ".zst"}`);
    return await readHeader(file, path, wanted, engine);
  } catch (cause) {
    if (cause instanceof UnusableLog) throw cause;
    if ((await isWhole(file.path)) === false) throw await notWhole(file.name, file.path);
    throw new UnusableLog(`${file.name} cannot be read as ${file.format}: ${firstLine(cause, path, file.name)}`, {
      cause,
    });
  }
}

async function readHeader(file: LogFile, path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<Header> {
  switch (file.format) {
    case "csv":
      return delimitedHeader(path, ",");
    case "tsv":
      return delimitedHeader(path, "\t");
    case "ndjson":
      return asText(await jsonHeader(path, wanted, engine), 0);
    case "parquet":
      return parquetHeader(path, wanted, engine);
  }
}

const asText = (columns: readonly string[], skip: number): Header => ({
  columns,
  engineNames: columns,
  kinds: columns.map(() => "text"),
  skip,
});

/** The cells of the first record; none in an empty file. */
export async function delimitedHeader(path: string, delimiter: string): Promise<Header> {
  for await (const { line, text, cells } of records(textOf(path), delimiter)) {
    if (text.includes("\0")) throw new Error("it is not UTF-8, UTF-16 perhaps; save it as UTF-8");
    if (cells === null && /"[;\t|]"/.test(text))
      throw new Error(
        `its cells are set apart by ${/"(.)"/.exec(text)?.[1] === ";" ? "semicolons" : "another sign"}; save it with ${delimiter === "," ? "commas" : "tabs"}`,
      );
    if (cells === null) throw new Error("in its header a quote does not close, or more follows the closing one");
    return asText(cells, line - 1);
  }
  return asText([], 0);
}

const SAMPLE_LINES = 2_000;

/** The keys of the first lines; of all lines when one that the plan names is not among those. Sorted: lines have no common order. */
async function jsonHeader(path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<string[]> {
  const keys = async (limit: number) =>
    (await engine.queryInFileOrder(jsonKeys([path], limit))).map((row) => text(row, "key"));
  const sampled = await keys(SAMPLE_LINES);
  const isWhole = [...wanted].every((column) => sampled.includes(column));
  return (isWhole ? sampled : await keys(0)).sort();
}

async function parquetHeader(path: string, wanted: ReadonlySet<string>, engine: Engine): Promise<Header> {
  const described = await engine.query(parquetColumns(path));
  const nodes = (await engine.query(parquetNodes(path))).map((row) => ({
    name: text(row, "name"),
    children: Number(row.num_children ?? 0n),
    digits: Number(row.precision ?? 0n),
  }));
  const columns = topLevel(nodes);
  // The engine takes a wider decimal for a double and gets its bytes wrong, without a word.
  const wide = columns.find(({ name, digits }) => wanted.has(name) && digits > MOST_DIGITS);
  if (wide !== undefined)
    throw new Error(
      `its column ${wide.name} has decimals of ${wide.digits} digits, of which the engine takes ${MOST_DIGITS}; write it with fewer, or as text`,
    );
  return {
    columns: columns.map(({ name }) => name),
    engineNames: described.map((row) => text(row, "column_name")),
    kinds: described.map((row) => kindOf(text(row, "column_type"))),
    skip: 0,
  };
}

interface Node {
  readonly name: string;
  readonly children: number;
  /** Of a decimal; else 0. */
  readonly digits: number;
}
const MOST_DIGITS = 38;

/** The nodes right under the root of a schema that is listed depth first. */
function topLevel(nodes: readonly Node[]): Node[] {
  const found: Node[] = [];
  const skip = (at: number): number => {
    let next = at + 1;
    for (let i = 0; i < (nodes[at]?.children ?? 0); i++) next = skip(next);
    return next;
  };
  for (let at = 1; at < nodes.length; at = skip(at)) found.push(...nodes.slice(at, at + 1));
  return found;
}
