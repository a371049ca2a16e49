import { list, plural } from "../words/index.ts";
import type { Mention } from "./columns.ts";
import { nearest } from "./nearest.ts";
import type { PlanSource } from "./source.ts";
import type { Problem } from "./types.ts";

/** What only the log can show: columns and files that the plan names and the log lacks (DESIGN 4, rule 10). */

export interface FoundFile {
  /** Relative to the plan's folder. */
  readonly name: string;
  /** The header as the file has it, repeated names included; none for a file without a header. */
  readonly columns: readonly string[];
}
export interface FoundLog {
  /** One an entry of `log`, in plan order; no files where none was found. */
  readonly columnsBySource: readonly {
    readonly files: readonly FoundFile[];
    /** Some of the entry's files could not be found or opened, so a column may stand in one of those. */
    readonly isPartial?: boolean;
  }[];
}

/**
 * A column of `columns` must be in every file of its entry, any other in at least one file of the log, and a name that
 * the plan uses must not stand twice in a header. A file without a header has no columns to miss.
 */
export function logProblems(
  { mentions, log }: Pick<PlanSource, "mentions" | "log">,
  found: FoundLog,
): readonly Problem[] {
  const apart = found.columnsBySource.map(({ files }, entry) => otherwiseApart(entry, files, mentions));
  const entries = found.columnsBySource.map(({ files, isPartial }, entry) => ({
    files: apart[entry] === null ? files.filter(({ columns }) => columns.length > 0) : [],
    isPartial: isPartial === true || files.length === 0 || apart[entry] !== null,
  }));
  const files = entries.flatMap((entry) => entry.files);
  const isWhole = entries.length === log.length && entries.every(({ isPartial }) => !isPartial) && files.length > 0;
  const inLog = new Set(files.flatMap(({ columns }) => columns));

  const ofEntries = mentions.filter(({ role }) => role !== null);
  const absent = ofEntries.flatMap((mention) => missingInEntry(mention, entries[Number(mention.path[1])]?.files ?? []));
  const told = new Set(absent.map(({ name }) => name));
  const others = isWhole
    ? firstOfEachName(mentions.filter(({ role, name }) => role === null && !inLog.has(name) && !told.has(name)))
    : [];
  const twice = firstOfEachName(mentions).flatMap((mention) => standsTwice(mention, files));
  return [
    ...apart.filter((problem) => problem !== null),
    ...absent.map(({ problem }) => problem),
    ...others.map((mention) => missingInLog(mention, inLog)),
    ...twice,
  ];
}

const SIGNS: readonly (readonly [sign: string, called: string])[] = [
  [";", "semicolons"],
  ["\t", "tabs"],
  ["|", "upright strokes"],
  [",", "commas"],
];

/** The first file of the entry whose header is one column, but holds ours if it is cut at another sign. */
function otherwiseApart(entry: number, files: readonly FoundFile[], mentions: readonly Mention[]): Problem | null {
  const ours = mentions.filter(({ role, path }) => role !== null && path[1] === entry).map(({ name }) => name);
  for (const { name, columns } of files) {
    const [only = "", ...others] = columns;
    const sign = SIGNS.find(([by]) => only.includes(by) && ours.every((our) => only.split(by).includes(our)));
    if (others.length > 0 || sign === undefined || ours.includes(only)) continue;
    const [by, called] = sign;
    const remedy = by === "\t" ? "Call it .tsv." : by === "," ? "Call it .csv." : "Save it with commas.";
    const message = `The cells of ${name} are set apart by ${called}, so all of its header is one column. ${remedy}`;
    return { path: ["log", entry, "files"], at: "value", message };
  }
  return null;
}

/** A path or pattern of `log` that leads to no file. @param item its place in the list of files; null if there is no list */
export function noSuchFile(
  entry: number,
  item: number | null,
  pattern: string,
  neighbours: Iterable<string> = [],
  there: "nothing" | "folder" | "forbidden" = "nothing",
): Problem {
  const path = ["log", entry, "files", ...(item === null ? [] : [item])];
  if (there === "forbidden") {
    return { path, at: "value", message: `${pattern} may not be read by you. Ask for the right to read it.` };
  }
  if (there === "folder") {
    const inside = `${pattern.replace(/\/+$/, "")}/*.csv`;
    return { path, at: "value", message: `${pattern} is a folder. Name the files in it, such as ${inside}.` };
  }
  if (/^[a-z][a-z0-9+.-]+:\/\//i.test(pattern)) {
    return { path, at: "value", message: `${pattern} is an address. Fetch the file, and name where it lies.` };
  }
  const what = /[*?[{]/.test(pattern) ? `No file matches ${pattern}.` : `There is no file ${pattern}.`;
  return {
    path,
    at: "value",
    message: `${what} Paths are read from the plan's folder.`,
    nearest: nearest(pattern, neighbours),
  };
}

/** A file of unit ids that is not there. */
export function noSuchList(filter: number, file: string, neighbours: Iterable<string> = []): Problem {
  return {
    path: ["filters", filter, "listed-in"],
    at: "value",
    message: `There is no file ${file}. Paths are read from the plan's folder.`,
    nearest: nearest(file, neighbours),
  };
}

function missingInEntry(mention: Mention, files: readonly FoundFile[]): readonly { name: string; problem: Problem }[] {
  const { name, path, at } = mention;
  const lacking = files.filter(({ columns }) => !columns.includes(name));
  const [first] = lacking;
  if (first === undefined) return [];
  const columns = new Set(lacking.flatMap((file) => file.columns));
  const message =
    lacking.length === files.length
      ? "No file of this entry has this column."
      : `It must be in every file of this entry; ${named(lacking)} ${lacking.length === 1 ? "lacks" : "lack"} it.`;
  const problem = {
    path,
    at,
    message,
    nearest: shownNearest(name, columns),
    context: `${first.name} has: ${listed(first.columns)}.`,
  };
  return [{ name, problem }];
}

function missingInLog({ name, path, at }: Mention, inLog: ReadonlySet<string>): Problem {
  const message = "No file of the log has this column.";
  return { path, at, message, nearest: shownNearest(name, inLog), context: `The log has: ${listed([...inLog])}.` };
}

function standsTwice({ name, path, at }: Mention, files: readonly FoundFile[]): readonly Problem[] {
  const found = files.filter(({ columns }) => columns.indexOf(name) !== columns.lastIndexOf(name));
  if (found.length === 0) return [];
  const message = `This column stands more than once in the header of ${named(found)}. Give each its own name there.`;
  return [{ path, at, message }];
}

function firstOfEachName(mentions: readonly Mention[]): readonly Mention[] {
  return mentions.filter((mention, i) => mentions.findIndex(({ name }) => name === mention.name) === i);
}

const MOST_NAMED = 3;
const MOST_LISTED = 40;

function named(files: readonly FoundFile[]): string {
  const names = files.map(({ name }) => name);
  const rest = names.length - MOST_NAMED;
  return rest <= 1
    ? list(names)
    : list([...names.slice(0, MOST_NAMED), `${plural(rest, "other file", "other files")}`]);
}

function listed(columns: readonly string[]): string {
  const names = [...new Set(columns)].sort().map(shown);
  const rest = names.length - MOST_LISTED;
  return rest <= 1 ? names.join(", ") : `${names.slice(0, MOST_LISTED).join(", ")} and ${rest} more`;
}

/** A blank at the end of a name would not be seen. */
const shown = (column: string): string => (column === column.trim() && column !== "" ? column : `"${column}"`);

function shownNearest(name: string, columns: Iterable<string>): string | undefined {
  const found = nearest(name, columns);
  return found === undefined ? undefined : shown(found);
}
