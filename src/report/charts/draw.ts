import { parse, type Runtime, resetSVGDefIds, View } from "vega";
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
  const { runtime, rows } = compiledOf(spec);
  resetSVGDefIds();
  const view = new View(runtime, { renderer: "none" });
  rows.forEach((values, i) => {
    view.data(dataName(i), values);
  });
  const svg = await view.toSVG();
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

const compiledBefore = new Map<string, Runtime>();
/** More than the shapes of one report. */
const MOST_KEPT = 500;

/**
 * Drawings of one shape differ in their rows alone, and to compile one takes most of the time of drawing it: so the rows
 * are taken out, and each shape is compiled once.
 */
function compiledOf(spec: TopLevelSpec): { readonly runtime: Runtime; readonly rows: readonly object[][] } {
  const rows: object[][] = [];
  const shape = JSON.stringify(spec, (key, value) => {
    if (key !== "data" || !Array.isArray(value?.values)) return value;
    // the view marks the rows that it is given as its own
    rows.push(structuredClone(value.values));
    return { name: dataName(rows.length - 1) };
  });
  const before = compiledBefore.get(shape);
  if (before !== undefined) return { runtime: before, rows };
  const runtime = parse(compile(JSON.parse(shape), { logger: strictLogger }).spec);
  if (compiledBefore.size >= MOST_KEPT) compiledBefore.clear();
  compiledBefore.set(shape, runtime);
  return { runtime, rows };
}

function dataName(index: number): string {
  return `rows-${index}`;
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
