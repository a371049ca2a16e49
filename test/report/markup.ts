/** A page taken apart without a browser: in a page that is escaped throughout, every "<" begins one of our own tags. */
export interface Tag {
  readonly name: string;
  readonly closing: boolean;
  readonly empty: boolean;
  readonly attributes: ReadonlyMap<string, string>;
}

export function tagsOf(html: string): Tag[] {
  const body = html.replace(/<style>.*?<\/style>/s, "<style></style>");
  return [...body.matchAll(/<([^>]*)>/g)].map(([, inside = ""]) => {
    const [, slash, name = "", rest = ""] = /^(\/?)([!a-zA-Z0-9]*)(.*)$/s.exec(inside) ?? [];
    const attributes = [...rest.replace(/\/$/, "").matchAll(/([^\s=]+)(?:="([^"]*)")?/g)].map(
      ([, key = "", value = ""]) => [key, value] as const,
    );
    return {
      name: name.toLowerCase(),
      closing: slash === "/",
      empty: rest.endsWith("/"),
      attributes: new Map(attributes),
    };
  });
}

/** What a reader sees, tags gone and entities resolved. */
export function textOf(html: string): string {
  const body = html.replace(/<style>.*?<\/style>/s, "").replace(/<title>.*?<\/title>/s, "");
  // a link stands inside a word or sentence
  return unescaped(body.replace(/<\/?a\b[^>]*>/g, "").replace(/<[^>]*>/g, " ")).replace(/\s+/g, " ");
}

/** The inside of the section with this id, up to the next one of its rank. */
export function sectionOf(html: string, id: string): string {
  const from = html.indexOf(`<section id="${id}"`);
  if (from < 0) throw new Error(`the page has no section ${id}`);
  const next = html.slice(from + 1).search(/<section id="|<nav |<\/main>/);
  return html.slice(from, from + 1 + next);
}

export function unescaped(text: string): string {
  const names: Readonly<Record<string, string>> = { lt: "<", gt: ">", quot: '"', amp: "&", nbsp: "\u00a0" };
  return text.replace(/&(#x[0-9A-Fa-f]+|[a-z]+);/g, (whole, name: string) =>
    name.startsWith("#x") ? String.fromCodePoint(Number.parseInt(name.slice(2), 16)) : (names[name] ?? whole),
  );
}
