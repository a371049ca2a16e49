import { unescaped } from "./given.ts";
import { hunks } from "./lines.ts";

/** One place where a report does not say what was recomputed. */
export interface Difference {
  readonly kind: "file" | "number" | "words" | "drawing" | "markup";
  /** "section 1, Decision". */
  readonly where: string;
  readonly given: string;
  readonly made: string;
}

/** Every place where the page differs from the one that was made again, in the order of the page. */
export function differences(given: string, made: string): Difference[] {
  const lines = given.split("\n");
  return hunks(lines, made.split("\n")).flatMap(({ at, given: a, made: b }) =>
    // Of pages with little in common lines are set against each other by their places, and may be the same.
    Array.from({ length: Math.max(a.length, b.length) }, (_, i) => i)
      .filter((i) => a[i] !== b[i])
      .map((i) => difference(placeOf(lines, at + Math.min(i, a.length)), a[i] ?? "", b[i] ?? "")),
  );
}

function difference(where: string, given: string, made: string): Difference {
  const [a, b] = [textOf(given), textOf(made)];
  if (a === b) {
    const kind = /<svg/.test(given) && /<svg/.test(made) ? "drawing" : "markup";
    return { kind, where, ...(kind === "drawing" ? { given: "", made: "" } : around(given.trim(), made.trim())) };
  }
  const isFile = /<code>[0-9a-f]{64}<\/code>/.test(given) || /<code>[0-9a-f]{64}<\/code>/.test(made);
  if (isFile) return { kind: "file", where, given: a, made: b };
  const cut = around(a, b);
  return { kind: isNumber(a, b) ? "number" : "words", where, ...cut };
}

/** What a reader sees of a line of the page. */
function textOf(line: string): string {
  return unescaped(line.replace(/<svg.*?<\/svg>/g, " ").replace(/<[^>]*>/g, " "))
    .replace(/\s+/g, " ")
    .trim();
}

/** Only digits differ. */
function isNumber(a: string, b: string): boolean {
  const bare = (text: string) => text.replace(/[+\u2212-]?\d[\d.,]*/g, "0");
  return bare(a) === bare(b) && /\d/.test(a);
}

const CONTEXT = 5; // words
const LONGEST = 30;

/** The words that differ, with a few before and behind. */
function around(given: string, made: string): { readonly given: string; readonly made: string } {
  const [a, b] = [given.split(" "), made.split(" ")];
  let from = 0;
  while (from < a.length && from < b.length && a[from] === b[from]) from++;
  let tail = 0;
  while (tail < a.length - from && tail < b.length - from && a[a.length - 1 - tail] === b[b.length - 1 - tail]) tail++;
  const cut = (words: readonly string[]) => {
    const [first, last] = [Math.max(0, from - CONTEXT), Math.min(words.length, words.length - tail + CONTEXT)];
    const shown = words.slice(first, Math.min(last, first + LONGEST));
    return `${first > 0 ? "\u2026 " : ""}${shown.join(" ")}${first + shown.length < words.length ? " \u2026" : ""}`;
  };
  return { given: cut(a), made: cut(b) };
}

/** The headings above a line. */
function placeOf(lines: readonly string[], at: number): string {
  const above = lines.slice(0, at + 1);
  const h2 = above.findLastIndex((line) => /<h2\b/.test(line));
  if (h2 < 0) return above.some((line) => /<body/.test(line)) ? "head of the page" : "the page\u2019s own head";
  const [, number, title = ""] = /<h2[^>]*>(?:<span class="number">(\d)<\/span>)?([^<]*)/.exec(lines[h2] ?? "") ?? [];
  const h3 = above.findLastIndex((line) => /<h3\b/.test(line));
  const part = h3 > h2 ? `, ${textOf(lines[h3] ?? "")}` : "";
  const name = unescaped(title).trim();
  return `${number === undefined ? name : `section ${number}, ${name}`}${part}`;
}
