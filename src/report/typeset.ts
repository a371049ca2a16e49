/**
 * The page's texts as a typesetter leaves them: curly quotes, no break inside "p = 0.03" or "95% interval", and nothing
 * that would steer the browser. The plan's text stays as it is: it is shown word for word, in a block of its own.
 */
export function typeset<P extends { readonly methods: { readonly planText: string } }>(page: P): P {
  const { planText } = page.methods;
  const set = everyText(page) as P;
  return { ...set, methods: { ...set.methods, planText } };
}

function everyText(value: unknown): unknown {
  if (typeof value === "string") return quotes(unbroken(withoutControls(value)));
  if (Array.isArray(value)) return value.map(everyText);
  if (typeof value !== "object" || value === null) return value;
  // a drawing is markup of our own, not a text
  if ("svg" in value) return value;
  return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, everyText(item)]));
}

/**
 * Control characters and overrides of the writing direction, with which a name could turn our figures around behind it,
 * become the replacement sign.
 */
export function withoutControls(text: string): string {
  return text.replace(/[^\P{Cc}\n\t]|[\u202a-\u202e\u2066-\u2069]/gu, "\ufffd");
}

export function quotes(text: string): string {
  return text.replace(/"([^"]*)"/g, "\u201c$1\u201d");
}

export function unbroken(text: string): string {
  return text.replace(/\bp ([<=]) (?=\d)/g, "p\u00a0$1\u00a0").replace(/(\d%) (?=intervals?\b)/g, "$1\u00a0");
}
