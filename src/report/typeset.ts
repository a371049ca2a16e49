import { directed } from "./direction.ts";
import type { Page } from "./page.ts";

/**
 * The page's texts as a typesetter leaves them: curly quotes, no break inside "p = 0.03" or "95% interval", and nothing
 * that would steer the browser. The plan's text stays as it is: it is shown word for word, in a block of its own.
 */
export function typeset(page: Page): Page {
  const { planText } = page.methods;
  const names = page.names.map(withoutControls);
  const set = everyText(page, (text) =>
    directed(quotes(withUnits(unbroken(withoutControls(text)), page.units)), names),
  ) as Page;
  return { ...set, names: page.names, units: page.units, terms: page.terms, methods: { ...set.methods, planText } };
}

/** Of two reports compared: no measure's unit is known there, and no name to set apart. */
export function typesetPlainly<T extends object>(page: T): T {
  return everyText(page, (text) => quotes(unbroken(withoutControls(text)))) as T;
}

/** The same of a page that shows the plan word for word. */
export function typesetWithPlan<P extends { readonly methods: { readonly planText: string } }>(page: P): P {
  const set = typesetPlainly(page);
  return { ...set, methods: { ...set.methods, planText: page.methods.planText } };
}

function everyText(value: unknown, set: (text: string) => string): unknown {
  if (typeof value === "string") return set(value);
  if (Array.isArray(value)) return value.map((item) => everyText(item, set));
  if (typeof value !== "object" || value === null) return value;
  // a drawing is markup of our own, not a text
  if ("svg" in value) return value;
  return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, everyText(item, set)]));
}

/**
 * Control characters and overrides of the writing direction, with which a name could turn our figures around behind it,
 * become the replacement sign.
 */
export function withoutControls(text: string): string {
  return text.replace(/[^\P{Cc}\n\t]|[\u202a-\u202e\u2066-\u2069]/gu, "\ufffd");
}

/** "list" and group's as a typesetter writes them. */
export function quotes(text: string): string {
  return text.replace(/"([^"]*)"/g, "\u201c$1\u201d").replace(/(?<=\p{L})'(?=\p{L})|(?<=s)'(?= )/gu, "\u2019");
}

export function unbroken(text: string): string {
  return text.replace(/\bp ([<=]) (?=\d)/g, "p\u00a0$1\u00a0").replace(/(\d%) (?=intervals?\b)/g, "$1\u00a0");
}

/** A figure and its unit of measure stay on one line: "0.018 s". */
export function withUnits(text: string, units: readonly string[]): string {
  return units.reduce((set, unit) => {
    const escaped = unit.replace(/[.*+?^${}()|[\]\\]/g, "\\$&");
    return set.replace(new RegExp(`(\\d) (?=${escaped}(?![\\p{L}\\p{Nd}]))`, "gu"), "$1\u00a0");
  }, text);
}
