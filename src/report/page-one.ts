import type { Page } from "./page.ts";
import type { DecisionSection } from "./sections/decision.ts";
import type { ForestGroup, ForestTable } from "./sections/forest.ts";

/** What one sheet of A4 holds in the print style, by the line of text. */
const SHEET = 52;
const LETTERS_A_LINE = 88;
const LETTERS_IN_NAME = 30;
const HEAD = 7;
const FOOT = 3;
const LEAST_ROWS = 3;
const MOST_PARAGRAPHS = 5;

/** What page one is without the pages behind it: no links to them, no tables that open, and no more rows than fit. */
export function pageOne(page: Page): Page {
  // Before and now stand in the forest plot's place: on one sheet there is room for one of them.
  const rerun = page.rerun === null ? null : { ...page.rerun, estimates: [] };
  const told = rerun === null ? [] : [rerun.said, ...rerun.sentences, ...rerun.after, rerun.runs];
  return { ...page, terms: {}, rerun, decision: shortened(page.decision, told) };
}

/** Rows in their order, what decides first; how many sentences and rows more there are is said. */
function shortened(decision: DecisionSection, before: readonly string[]): DecisionSection {
  const { forest, paragraphs } = decision;
  const kept = paragraphs.slice(0, MOST_PARAGRAPHS);
  const more = paragraphs.length - kept.length;
  const told = more === 0 ? kept : [...kept, `The report says ${more} more.`];
  if (forest === null) return { ...decision, paragraphs: told, reasons: [] };
  const texts = [...before, decision.sentence, ...told, ...decision.afterForest, forest.title, forest.reading];
  const answers = decision.answers.map(({ question, answer }) => `${question} ${answer}`);
  const used = HEAD + FOOT + sum([...texts, ...answers].map((text) => lines(text, LETTERS_A_LINE) + 0.6));
  return { ...decision, paragraphs: told, reasons: [], forest: cut(forest, SHEET - used) };
}

function cut(forest: ForestTable, room: number): ForestTable {
  let left = room;
  let shown = 0;
  let all = 0;
  const groups = forest.groups.flatMap((group): ForestGroup[] => {
    left -= 1.8;
    const measures = group.measures.flatMap((measure) => {
      if (measure.several) left -= lines(measure.metric, LETTERS_IN_NAME) + 0.4;
      const rows = measure.rows.filter((row) => {
        all += 1;
        const name = lines(measure.several ? row.variant : measure.metric, LETTERS_IN_NAME);
        left -= Math.max(2.4, name + 1.4);
        if (left < 0 && shown >= LEAST_ROWS) return false;
        shown += 1;
        return true;
      });
      return rows.length === 0 ? [] : [{ ...measure, rows }];
    });
    return measures.length === 0 ? [] : [{ ...group, measures }];
  });
  const rest = all - shown;
  const more = rest === 0 ? "" : ` The report has ${rest} more ${rest === 1 ? "row" : "rows"}.`;
  return { ...forest, groups, numbers: [], reading: `${forest.reading}${more}` };
}

const lines = (text: string, letters: number) => Math.max(1, Math.ceil([...text].length / letters));
const sum = (sizes: readonly number[]) => sizes.reduce((a, b) => a + b, 0);
