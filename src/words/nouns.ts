import { count } from "./number.ts";

/** "1 visitor", "1,204 visitors". */
export function plural(n: number, one: string, many: string): string {
  return `${count(n)} ${n === 1 ? one : many}`;
}

/** "a", "a and b", "a, b and c". */
export function list(items: readonly string[], word = "and"): string {
  if (items.length <= 1) return items[0] ?? "";
  return `${items.slice(0, -1).join(", ")} ${word} ${items[items.length - 1]}`;
}

/** A name from the plan or the log inside a sentence, where it could be read as one of our own words. */
export function quoted(name: string): string {
  return `"${name}"`;
}

/** The first letter as a capital: the start of a sentence. */
export function capital(text: string): string {
  const [first = ""] = text;
  return first.toUpperCase() + text.slice(first.length);
}

/** A text from the plan as a sentence: with a full stop, unless it ends in a mark of its own. */
export function asSentence(text: string): string {
  return /[.!?\u2026]$/.test(text.trimEnd()) ? text : `${text.trimEnd()}.`;
}
