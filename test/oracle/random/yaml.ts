/** A piece of a plan: like JSON, with numbers that keep their digits. */
export type Piece = string | boolean | Digits | readonly Piece[] | { readonly [key: string]: Piece };
export interface Digits {
  readonly digits: string;
}

/** Written by hand and not by a library, since 1.50 and 0.12345678901234567890 must stay as they are. */
export function planText(plan: { readonly [key: string]: Piece }): string {
  return Object.entries(plan)
    .map(([key, value]) => {
      if (!Array.isArray(value)) return `${key}: ${flow(value)}\n`;
      return `${key}:\n${value.map((item) => `  - ${flow(item)}\n`).join("")}`;
    })
    .join("");
}

function flow(value: Piece): string {
  if (typeof value === "string") return scalar(value);
  if (typeof value === "boolean") return String(value);
  if (isDigits(value)) return value.digits;
  if (isList(value)) return `[${value.map(flow).join(", ")}]`;
  return `{${Object.entries(value)
    .map(([key, item]) => `${scalar(key)}: ${flow(item)}`)
    .join(", ")}}`;
}

/** Words stand bare, all else in double quotes, where YAML reads what JSON does. */
function scalar(text: string): string {
  return /^[a-z][a-z-]{2,}$/.test(text) && !["true", "false", "null"].includes(text) ? text : JSON.stringify(text);
}

function isDigits(value: object): value is Digits {
  return "digits" in value && typeof value.digits === "string" && Object.keys(value).length === 1;
}

function isList(value: Piece): value is readonly Piece[] {
  return Array.isArray(value);
}
