/**
 * Lines, letters and sizes that every drawing shares. Colours are CSS custom properties of templates/style.css, so that
 * a drawing follows the reader's light or dark setting and the printer; no drawing holds a colour of its own.
 */
export const theme = {
  ink: "currentColor",
  paper: "var(--paper)",
  quiet: "var(--quiet)",
  line: "var(--line)",
  font: "inherit",
  letters: 13,
  /** The control's lines, wherever a variant's are drawn with it. */
  dotted: [1.5, 3],
} as const;

/** How a variant is told apart: first by its name at the line, then by the line's dashes, then by the square's colour. */
export interface LineStyle {
  readonly dash: readonly number[];
  readonly fill: string;
}

const DASHES: readonly (readonly number[])[] = [
  [1, 0],
  [7, 3],
  [2, 2],
  [9, 3, 2, 3],
];
const FILLS = 5;

/** A lone variant needs no telling apart: ink. Of several, each has its dashes and one of the five Okabe-Ito colours. */
export function lineStyle(position: number, variants: number): LineStyle {
  if (variants === 1) return { dash: [1, 0], fill: theme.ink };
  return { dash: DASHES[position % DASHES.length] ?? [1, 0], fill: `var(--variant-${(position % FILLS) + 1})` };
}
