import { parse, resetSVGDefIds, View } from "vega";
import { compile, type TopLevelSpec } from "vega-lite";

import { withoutControls } from "../typeset.ts";

/** An SVG element of our own making: the only text that the page takes as it is. */
export interface Drawing {
  readonly svg: string;
}

/** What a screen reader is told; null hides the drawing from it, where the same words stand beside the drawing. */
export interface DrawingText {
  readonly title: string;
  readonly description: string;
}

/**
 * Draws a specification as an SVG element for the page: ids begin with `id`, numbers have two places, namespaces and
 * fixed sizes are gone (the page gives the width). The same specification gives the same bytes.
 */
export async function draw(spec: TopLevelSpec, id: string, text: DrawingText | null): Promise<Drawing> {
  const { spec: vega } = compile(spec, { logger: strictLogger });
  resetSVGDefIds();
  const svg = await new View(parse(vega), { renderer: "none" }).toSVG();
  const inside = /^<svg [^>]*viewBox="([^"]*)"[^>]*>(.*)<\/svg>$/s.exec(svg);
  const [, viewBox, content] = inside ?? [];
  if (viewBox === undefined || content === undefined) throw new Error(`the drawing ${id} is not one svg element`);
  // A name of the plan may stand at an axis or in the description.
  const own = withoutControls(shorten(withPrefix(withoutLabels(content), id)));
  if (text === null) {
    return { svg: `<svg viewBox="${viewBox}" aria-hidden="true" focusable="false">${own}</svg>` };
  }
  const words = `<title id="${id}-title">${escaped(text.title)}</title><desc id="${id}-desc">${escaped(text.description)}</desc>`;
  return {
    svg: `<svg viewBox="${viewBox}" role="img" aria-labelledby="${id}-title ${id}-desc">${words}${own}</svg>`,
  };
}

/** A warning means that the drawing is not the one that was meant: it is a mistake of ours, never only noise. */
const strictLogger = {
  level: () => 0,
  error: refuse,
  warn: refuse,
  info: quiet,
  debug: quiet,
} as unknown as NonNullable<NonNullable<Parameters<typeof compile>[1]>["logger"]>;

function refuse(...messages: readonly unknown[]): never {
  throw new Error(`a drawing does not compile: ${messages.map(String).join(" ")}`);
}
function quiet() {
  return strictLogger;
}

/** The page says in words what a drawing shows; vega's own labels for its parts would only be read out as noise. */
function withoutLabels(content: string): string {
  return content.replace(/ (?:role|aria-[a-z]+|pointer-events)="[^"]*"/g, "");
}

function withPrefix(content: string, id: string): string {
  return content.replace(/ id="([^"]+)"/g, ` id="${id}-$1"`).replace(/url\(#([^)]+)\)/g, `url(#${id}-$1)`);
}

/** Two places are a hundredth of a pixel; more would differ between machines in the last digit. */
function shorten(content: string): string {
  return content.replace(/="[^"]*"/g, (attribute) =>
    attribute.replace(/-?\d+\.\d{3,}/g, (digits) => String(Number(Number(digits).toFixed(2)))),
  );
}

export function escaped(text: string): string {
  return withoutControls(text).replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;");
}
