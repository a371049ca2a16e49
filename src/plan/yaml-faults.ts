import { type Document, isAlias, isCollection, isPair, type YAMLError } from "yaml";
import type { Problem } from "./types.ts";

/** What keeps a text from being YAML, in our words: the parser's own speak of indicators and implicit keys. */

/** One problem a line, and none after the point where the parser lost the thread: all else would be its consequence. */
export function yamlProblems(all: readonly YAMLError[], text: string): readonly Problem[] {
  const lost = all.findIndex(({ message }) => message.includes("in YAML stream"));
  const upTo = lost === -1 ? all : all.slice(0, lost + 1);
  const tab = upTo.findIndex(({ code }) => code === "TAB_AS_INDENT");
  const faults = upTo.filter(({ code }, i) => tab === -1 || i <= tab || !OF_INDENTS.includes(code));
  const lineOf = (offset: number) => text.slice(0, offset).split("\n").length;
  const told = new Set<number>();
  return faults.flatMap((fault) => {
    const line = lineOf(fault.pos[0]);
    const deeper = furtherRight(fault, all, text);
    const isTold = told.has(line);
    for (const one of deeper === null ? [line] : [line, lineOf(deeper)]) told.add(one);
    if (isTold) return [];
    return [deeper === null ? yamlProblem(fault, text) : { ...FURTHER_RIGHT, span: [deeper, deeper + 1] as const }];
  });
}
const OF_INDENTS: readonly string[] = [
  "BLOCK_AS_IMPLICIT_KEY",
  "MULTILINE_IMPLICIT_KEY",
  "BAD_INDENT",
  "MISSING_CHAR",
] satisfies readonly YAMLError["code"][];

const FURTHER_RIGHT = {
  path: [],
  at: "key",
  message: "This line is indented further than the one it belongs to. Let keys of one mapping begin in one column.",
} as const;

/**
 * Where a key stands deeper than the value above it, which the parser takes for one text over both lines and a key in it:
 * the place of that key; null for other faults.
 */
function furtherRight(fault: YAMLError, all: readonly YAMLError[], text: string): number | null {
  const [start] = fault.pos;
  const over = all.find(({ code, pos }) => code === "MULTILINE_IMPLICIT_KEY" && pos[0] === start);
  if (fault.code !== "BLOCK_AS_IMPLICIT_KEY" || over === undefined) return null;
  const lineEnd = text.indexOf("\n", start);
  if (lineEnd === -1 || lineEnd >= over.pos[1]) return null;
  return lineEnd + text.slice(lineEnd).search(/\S/);
}

/** Where a decoder has put its mark for bytes that are no UTF-8; no name with it could match the log's. */
export function undecoded(text: string): readonly Problem[] {
  const at = text.indexOf("\u{fffd}");
  if (at === -1) return [];
  const message = "This is no character of UTF-8. Save the plan in that encoding.";
  return [{ path: [], at: "key", message, span: [at, at + 1] }];
}

/** Lists inside lists beyond this would exhaust the parser before it could tell. A plan is about six deep. */
export function nestedTooDeep(text: string): Problem | null {
  let depth = 0;
  for (const { 0: mark, index } of text.matchAll(/[[\]{}]|^ *(?:[-?] ){50}/gm)) {
    depth += mark === "]" || mark === "}" ? -1 : mark.length > 1 ? DEEPEST : 1;
    if (depth >= DEEPEST) {
      const message = "Lists stand inside lists here, deeper than any plan is. Close a bracket that was left open.";
      return { path: [], at: "key", message, span: [index, index + 1] };
    }
  }
  return null;
}
const DEEPEST = 50;

/** An alias that leads back to itself, or with which a few lines stand for millions. */
export function endlessAlias(document: Document.Parsed): Problem | null {
  const sizes = new Map<unknown, number>(); // infinite while a node is being counted: it is met again inside itself
  const size = (node: unknown): number => {
    const target = isAlias(node) ? node.resolve(document) : node;
    const known = sizes.get(target);
    if (known !== undefined) return known;
    sizes.set(target, Number.POSITIVE_INFINITY);
    const inside: readonly unknown[] = isCollection(target) ? target.items : isPair(target) ? [target.value] : [];
    const sum = inside.reduce<number>((total, item) => total + size(item), 1);
    sizes.set(target, sum);
    return sum;
  };
  if (size(document.contents) <= MOST_NODES) return null;
  const message =
    "The aliases of this plan lead back to themselves, or stand for far more than a plan holds. Write them out.";
  return { path: [], at: "key", message };
}
const MOST_NODES = 20_000; // a plan has hundreds

function yamlProblem(fault: YAMLError, text: string): Problem {
  const words = WORDS.find(([code, pattern]) => code === fault.code && pattern.test(fault.message));
  const key = fault.code === "MULTILINE_IMPLICIT_KEY" ? /^[\w-]+:\S*/.exec(text.slice(fault.pos[0])) : null;
  if (key !== null) {
    const span = [fault.pos[0], fault.pos[0] + key[0].length] as const;
    return { path: [], at: "key", message: "A space belongs behind the colon of a key.", span };
  }
  const message = words?.[2] ?? `This is not YAML: ${fault.message}.`;
  return { path: [], at: "key", message, span: spanOf(fault, text) };
}

function spanOf({ code, message, pos }: YAMLError, text: string): readonly [number, number] {
  const [start, end] = pos;
  if (code === "DUPLICATE_KEY")
    return [start, start + (/^(?:"[^"]*"|'[^']*'|[^:,}\s]*)/.exec(text.slice(start))?.[0].length ?? 1)];
  // an open quotation mark is noticed at the end of the text only
  const indent = /^ */.exec(text.slice(start))?.[0].length ?? 0;
  const written = text.slice(0, start).trimEnd().length;
  return message.startsWith("Missing closing") && start > written
    ? [Math.max(0, written - 1), written]
    : [start + indent, end + indent];
}

const WORDS: readonly (readonly [YAMLError["code"], RegExp, string])[] = [
  ["DUPLICATE_KEY", /./, "This key stands here a second time. Keep one of the two."],
  [
    "MULTIPLE_DOCS",
    /./,
    "A plan is one YAML document. Remove this line and what follows, or make that a file of its own.",
  ],
  ["TAB_AS_INDENT", /./, "A tab indents this line. YAML takes spaces only."],
  ["BLOCK_AS_IMPLICIT_KEY", /./, 'A second key stands on this line. Put text with a colon in it in quotes: "…: …".'],
  [
    "MULTILINE_IMPLICIT_KEY",
    /./,
    "A key and its colon belong on one line. Look for a missing colon, or for a wrong indent.",
  ],
  ["BAD_INDENT", /^Flow/, "A bracket that opened above is not closed before this line. Close it with ] or }."],
  [
    "BAD_INDENT",
    /./,
    "This line is indented unlike the ones that it belongs to. Let keys of one mapping begin in one column.",
  ],
  ["BLOCK_IN_FLOW", /./, "Inside braces keys are set apart by commas. Look for a missing comma."],
  ["MISSING_CHAR", /quote$/, "A quotation mark that opened above is never closed. Close it."],
  [
    "MISSING_CHAR",
    /^Sequence item/,
    "This line is indented unlike the ones of its list. Begin each item with a dash, its keys in one column.",
  ],
  [
    "UNEXPECTED_TOKEN",
    /scalar at node end/,
    "Text follows a closing quotation mark. Put all of the text in one pair of quotes.",
  ],
  ["UNEXPECTED_TOKEN", /same line with key/, "A list begins on a line of its own, below its key."],
  [
    "UNEXPECTED_TOKEN",
    /flow-(seq|map)-end/,
    "A bracket closes here that was not opened. Remove it, or put the text in quotes.",
  ],
  [
    "UNEXPECTED_TOKEN",
    /in YAML stream/,
    "This belongs to nothing above it. Look for a wrong indent, or for a bracket too many before it.",
  ],
  ["BAD_SCALAR_START", /./, "A text cannot begin with this character. Put the text in quotes."],
  ["TAG_RESOLVE_FAILED", /./, "A plan knows no YAML tags. Remove the word that begins with an exclamation mark."],
];
