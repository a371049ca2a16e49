import type { Terminal } from "./terminal.ts";

/** "Counted  " or "To paste ": the labels of the last lines are set to nine columns. */
const LABEL = /^[A-Z][a-z ]{8}(?=\S)/gm;

/**
 * The library's terminal text with a few accents: the conclusion bold, the heads of the table's columns and the labels of
 * the last lines dim. The words stay as they are, and no colour says good or bad.
 */
export function withAccents(text: string, { bold, dim }: Pick<Terminal, "bold" | "dim">): string {
  const paragraphs = text.split(/\n{2,}/);
  return paragraphs
    .map((paragraph, index) => {
      if (index === 1) return paragraph.replace(/^.+/, bold);
      if (index === paragraphs.length - 1) return paragraph.replace(LABEL, dim);
      return paragraph.replace(/^ {4,}\S.*/, dim);
    })
    .join("\n\n");
}
