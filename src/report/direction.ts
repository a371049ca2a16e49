/**
 * Names and texts that run from right to left, among figures that run from left to right. Unless their ends are marked, the
 * browser turns the figures behind them around: "… : 12.1 of 100" would stand before the name, as ": 12.1 …".
 */
const RIGHT_TO_LEFT =
  /[\p{Script=Hebrew}\p{Script=Arabic}\p{Script=Syriac}\p{Script=Thaana}\p{Script=Nko}\p{Script=Adlam}]/u;
/** A run: from the first such letter to the last, over what stands between them. */
const RUN = new RegExp(`${RIGHT_TO_LEFT.source}(?:[^\\p{Script=Latin}\\p{Nd}]*${RIGHT_TO_LEFT.source})*`, "gu");

const [ISOLATE, POP, LEFT_TO_RIGHT] = ["\u2068", "\u2069", "\u200e"];

/** @param names of the plan: each stands for itself, whatever its direction */
export function directed(text: string, names: readonly string[]): string {
  if (!RIGHT_TO_LEFT.test(text)) return text;
  const [name, ...others] = names;
  if (name === undefined) return text.replace(RUN, (run) => run + LEFT_TO_RIGHT);
  return text
    .split(name)
    .map((part) => directed(part, others))
    .join(ISOLATE + name + POP);
}

/** Those of the names that need it, the longest first: a name may be part of another. */
export function namesToIsolate(names: readonly string[]): string[] {
  return [...new Set(names)].filter((name) => RIGHT_TO_LEFT.test(name)).sort((a, b) => b.length - a.length);
}
