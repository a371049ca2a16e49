import type { ReportInputs } from "../../src/report/types.ts";
import { grouped } from "./groups.ts";
import { meanwhile } from "./meanwhile.ts";

/** Text that would do harm if any of it reached the page, the style, a template or the terminal as it stands. */
const POISON = [
  "<script>alert(1)</script>",
  '"><img src=x onerror=alert(1)>',
  "</style></title><style>*{display:none}</style>",
  "{{constructor.constructor}} {{{this}}} {{#each .}}{{> style}}",
  "<svg onload=alert(1)><use href='data:image/svg+xml,x'/></svg>",
  "<!-- --> ]]> &lt;b&gt; ' onmouseover='alert(1)",
  "\u001b[2J\u001b[31m\u202e\nnew line\r\n| a | b | [x](http://example.org/x) ![y](http://example.org/y)",
] as const;

/** Names that are keys of every object in JavaScript. */
const KEYS: Readonly<Record<string, string>> = { calendar: "__proto__", list: "constructor", Booked: "toString" };

// what the code switches on is not text for the reader
const KEPT_FIELDS = new Set(["id", "kind", "role", "summary", "goodIs", "withoutRows", "inTwoVariants", "incomplete"]);
const KEPT_MORE = new Set([
  "adoptWhen",
  "choice",
  "drop",
  "when",
  "zone",
  "decision",
  "result",
  "method",
  "absent",
  "standing",
  "planSha256",
  "sha256",
  "timezone",
]);
const KEPT_VALUES = new Set(["value", "q", "at"]);

/** The cases "adopt" and "days and levels" with poison in every name and text that comes from a plan, a log or a check. */
export const hostile: ReportInputs = poisoned(grouped, "") as ReportInputs;

/** The same with incidents, of which the choices' names are made. */
export const hostileMeanwhile: ReportInputs = poisoned(meanwhile, "") as ReportInputs;

function poisoned(value: unknown, key: string): unknown {
  if (typeof value === "string") return KEPT_FIELDS.has(key) && key !== "id" ? value : text(value, key);
  if (Array.isArray(value)) return value.map((item) => poisoned(item, key));
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([name, item]) => [figureKey(name, key), poisoned(item, name)]));
}

function text(value: string, key: string): string {
  if (key === "choice" && value.includes(":")) return text(value, "id");
  if (KEPT_MORE.has(key) || (KEPT_VALUES.has(key) && /^[\d.]+$/.test(value))) return value;
  if (key === "pivot") return value;
  if (key === "id") return value.replace(/:(.*)$/s, (_, name: string) => `:${text(name, "name")}`);
  const known = KEYS[value];
  if (known !== undefined) return known;
  return `${value} ${POISON.join(" ")}`;
}

/** Counts in a check's figures stand under the variants' names. */
function figureKey(name: string, parent: string): string {
  return parent === "counts" || parent === "analysed" ? (KEYS[name] ?? name) : name;
}
