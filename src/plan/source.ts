import type { Mention } from "./columns.ts";
import type { YamlText } from "./yaml.ts";

/**
 * The plan as text: what is needed to show where a problem stands, and to look at the log even when the plan has
 * mistakes, so that those that only the log can show are told at once with the others.
 */
export interface PlanSource {
  readonly yaml: YamlText;
  /** Every place that names a column of the log, in the order of the text. */
  readonly mentions: readonly Mention[];
  /** What the plan asks to open, as far as it can be read: one a `log` entry (its files as written), and the lists of ids. */
  readonly log: readonly { readonly files: readonly string[] }[];
  readonly lists: readonly { readonly filter: number; readonly file: string }[];
}
