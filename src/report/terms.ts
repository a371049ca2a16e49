/** Terms of the report's sentences and the line of Methods on each, longest first where one holds another. */
const TERMS: readonly (readonly [phrase: string, id: string])[] = [
  ["Bootstrap-t interval", "method-draws-and-deals"],
  ["Randomisation test", "method-draws-and-deals"],
  ["drawn from the groups", "method-draws-and-deals"],
  ["corrected interval", "method-corrected-interval"],
  ["score interval", "method-shares"],
  ["Rules of thumb", "method-normal-approximation"],
  ["Adjusted for", "method-adjusted-differences"],
  ["a group\u2019s spread", "method-one-value"],
];

export interface TextPart {
  readonly text: string;
  /** The line of Methods; "" for text that is no term. */
  readonly to: string;
}

/** A sentence in parts, the first occurrence of each term one of them, for a template to link. */
export function termParts(text: string, known: Readonly<Record<string, string>>): TextPart[] {
  for (const [phrase, id] of TERMS) {
    const at = text.indexOf(phrase);
    if (at < 0 || known[id] === undefined) continue;
    const [before, after] = [text.slice(0, at), text.slice(at + phrase.length)];
    return [
      ...(before === "" ? [] : termParts(before, known)),
      { text: phrase, to: id },
      ...(after === "" ? [] : [{ text: after, to: "" }]),
    ];
  }
  return [{ text, to: "" }];
}
