import { FROM_CELLS, REPLACES } from "../report/index.ts";

/** What a report says of where it came from: all that it takes to make it again. */
export interface Given {
  /** The plan, word for word. */
  readonly planText: string;
  /** The version of closeout that made it. */
  readonly version: string | null;
  /** SHA-256 of the report.json that it replaces; null in a first report. */
  readonly replaces: string | null;
  /** It was made without the log, from cells. */
  readonly fromCells: boolean;
}

/** Reads a report's page as the text it is; null where it holds no plan. */
export function givenIn(html: string): Given | null {
  const [, plan] = /<pre class="plan"[^>]*>([\s\S]*?)<\/pre>/.exec(html) ?? [];
  if (plan === undefined) return null;
  const [, version] = /Made by closeout (\S+) from the plan/.exec(html) ?? [];
  const [, replaces] = new RegExp(`${REPLACES}</dt>\\s*<dd>([0-9a-f]{64})</dd>`).exec(html) ?? [];
  return {
    planText: unescaped(plan),
    version: version ?? null,
    replaces: replaces ?? null,
    fromCells: html.includes(`<dd>${FROM_CELLS}</dd>`),
  };
}

const NAMED: Readonly<Record<string, string>> = { lt: "<", gt: ">", quot: '"', amp: "&", nbsp: "\u00a0" };

/** Text of the page as it was before it was escaped. */
export function unescaped(text: string): string {
  return text.replace(/&(#x[0-9A-Fa-f]+|[a-z]+);/g, (whole, name: string) =>
    name.startsWith("#x") ? String.fromCodePoint(Number.parseInt(name.slice(2), 16)) : (NAMED[name] ?? whole),
  );
}
