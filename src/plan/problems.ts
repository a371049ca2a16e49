import { isAlias, isCollection, isMap, isNode, isScalar, type YAMLMap } from "yaml";
import { plural } from "../words/index.ts";
import type { PlanSource } from "./source.ts";
import type { Problem } from "./types.ts";
import { keyText, nodeAt, type Path, pathAt, type Span, type YamlText } from "./yaml.ts";

/** Problems as the terminal shows them: the count, then each with its place, its line and what to do. */

const NOTHING_DONE = "Nothing was computed and no file was written.";

/** All problems of a plan, in the order of the text. @param fileName the plan's path as the user gave it */
export function placeProblems(source: PlanSource, fileName: string, problems: readonly Problem[]): string {
  const placed = problems.map((problem) => place(source.yaml, problem)).sort((a, b) => a.span[0] - b.span[0]);
  const width = Math.max(0, ...placed.map(({ line, column }) => `${line}:${column}`.length));
  const blocks = new Map<string, readonly string[]>();
  for (const one of placed) {
    const where = `${fileName}:${`${one.line}:${one.column}`.padEnd(width)}  ${one.trail}`.trimEnd();
    const head = [where, ...excerpt(one)].map(printable).join(INDENT);
    blocks.set(head, [...(blocks.get(head) ?? []), ...sentences(one.problem).map(printable)]);
  }
  const heading = `${printable(fileName)} has ${plural(problems.length, "mistake", "mistakes")}. ${NOTHING_DONE}`;
  return [heading, ...[...blocks].map(([head, lines]) => [head, ...lines].join(INDENT))].join("\n\n");
}
const INDENT = "\n    ";

/** A plan that could not be read at all. @param code the error's code as the operating system gives it */
export function unreadablePlan(fileName: string, code: string): string {
  return `${printable(fileName)} ${UNREADABLE[code] ?? `cannot be read (${code})`}. ${NOTHING_DONE}`;
}
const UNREADABLE: Readonly<Record<string, string>> = {
  ENOENT: "is not there. Look at the path; it is read from the current folder",
  ENOTDIR: "is not there. Look at the path; it is read from the current folder",
  EISDIR: "is a folder. Name the plan's file in it",
  EACCES: "may not be read by you. Ask for the right to read it",
};

interface Placed {
  readonly problem: Problem;
  readonly span: Span;
  /** From 1. */
  readonly line: number;
  readonly column: number;
  readonly trail: string;
  /** The line of the text, and the span inside it. */
  readonly text: string;
  readonly marked: Span;
}

function place(yaml: YamlText, problem: Problem): Placed {
  const span = problem.span ?? spanOf(yaml, problem);
  const start = yaml.text.slice(0, span[0]).lastIndexOf("\n") + 1;
  const line = yaml.text.slice(0, start).split("\n").length;
  const column = span[0] - start + 1;
  const [text = ""] = yaml.text.slice(start).split(/\r?\n/, 1);
  const path = problem.span === undefined ? problem.path : pathAt(yaml, span[0]);
  const marked: Span = [column - 1, Math.max(Math.min(span[1] - start, text.trimEnd().length), column)];
  return { problem, span, line, column, trail: trail(yaml, path), text, marked };
}

/** The section of the plan, and in a list the name of the item: "metrics, Booked". */
function trail(yaml: YamlText, path: Path): string {
  const [section, index] = path;
  if (typeof section !== "string" || path.length < 2) return "";
  if (typeof index !== "number") return section;
  const name = nodeAt(yaml, [section, index, "name"])?.value;
  if (isScalar(name) && name.source) return `${section}, ${String(name.value)}`;
  const items = nodeAt(yaml, [section])?.value;
  return isCollection(items) && items.items.length > 1 ? `${section}, number ${index + 1}` : section;
}

/** Where a path leads; where it leads nowhere, the nearest place above. */
function spanOf(yaml: YamlText, { path, at }: Problem): Span {
  const found = nodeAt(yaml, path);
  if (found === null) return spanOf(yaml, { path: path.slice(0, -1), at: "key", message: "" });
  const { key, value } = found;
  const own = isNode(value) && value.range ? value.range : null;
  const isWritten = own !== null && own[1] > own[0];
  const isBlock = isCollection(value) && !value.flow;
  if (key?.range && (at === "key" || !isWritten || isBlock)) return [key.range[0], key.range[1]];
  if (isMap(value) && (isBlock || at === "key")) return spanOfItem(value, own?.[0] ?? 0);
  return own === null ? [0, 1] : [own[0], own[1]];
}

/** An item of a list is shown by its name, else by its first key. */
function spanOfItem(item: YAMLMap, start: number): Span {
  const named = item.items.find((pair) => keyText(pair) === "name" && isScalar(pair.value) && pair.value.source);
  const shown = named?.value ?? item.items[0]?.key;
  return isNode(shown) && !isAlias(shown) && shown.range ? [shown.range[0], shown.range[1]] : [start, start + 1];
}

/** The line of the text and carets under the span; of a long line the part around it. */
function excerpt({ text, marked }: Placed): readonly string[] {
  if (text.trim() === "") return [];
  const line = text.replaceAll("\t", " ");
  const indent = line.length - line.trimStart().length;
  const isLong = line.trim().length > WIDEST;
  const from = isLong ? Math.max(indent, Math.min(marked[0] - 40, line.trimEnd().length - WIDEST)) : indent;
  const shown = line.slice(from, isLong ? from + WIDEST : undefined).trimEnd();
  const before = from > indent ? "… " : "";
  const after = isLong && from + WIDEST < line.trimEnd().length ? " …" : "";
  const offset = Math.max(0, marked[0] - from) + before.length;
  const carets = Math.max(1, Math.min(marked[1], from + WIDEST) - marked[0]);
  return [before + shown + after, " ".repeat(offset) + "^".repeat(carets)];
}
const WIDEST = 100; // characters of a line that a terminal shows without breaking it

function sentences({ message, nearest, context }: Problem): readonly string[] {
  const question = nearest === undefined ? "" : ` Did you mean ${nearest}?`;
  return [message + question, ...(context === undefined ? [] : context.split("\n"))];
}

/** Text from plan and log goes to a terminal: nothing in it may steer one. */
function printable(text: string): string {
  return text.replace(/\p{Cc}/gu, "\u{fffd}");
}
