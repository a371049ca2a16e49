/** Whole numbers beyond a double's, which JSON does not have: lists and single ones under this key, as text. */
const WHOLE = "$whole";

/** JSON that also holds bigints: a column of them is one text, its numbers apart by spaces. */
export function textWithWholes(value: unknown): string {
  return `${JSON.stringify(tagged(value))}\n`;
}

function tagged(value: unknown): unknown {
  if (typeof value === "bigint") return { [WHOLE]: String(value) };
  if (Array.isArray(value)) {
    return value.length > 0 && value.every((item) => typeof item === "bigint")
      ? { [WHOLE]: value.map(String).join(" "), list: true }
      : value.map(tagged);
  }
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, tagged(item)]));
}

/** What `textWithWholes` was given. @throws SyntaxError for a text that is no JSON */
export function parsedText(text: string): unknown {
  return JSON.parse(text, (_, value: unknown) => {
    if (typeof value !== "object" || value === null || !(WHOLE in value)) return value;
    const digits = String(value[WHOLE]);
    return "list" in value ? digits.split(" ").map(BigInt) : BigInt(digits);
  });
}
