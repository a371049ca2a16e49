import type { Page } from "./page.ts";
import type { ForestGroup, ForestTable } from "./sections/forest.ts";

/** As many rows of the forest plot as one sheet of A4 holds under the sentences. */
const MOST_ROWS = 10;

/** What page one is without the pages behind it: no links to them, no tables that open, and no more rows than fit. */
export function pageOne(page: Page): Page {
  const { forest } = page.decision;
  return {
    ...page,
    terms: {},
    decision: { ...page.decision, reasons: [], forest: forest === null ? null : shortened(forest) },
  };
}

/** Rows in their order, what decides first; how many more there are is said. */
function shortened(forest: ForestTable): ForestTable {
  let room = MOST_ROWS;
  const groups = forest.groups.flatMap((group): ForestGroup[] => {
    const measures = group.measures.flatMap((measure) => {
      const rows = measure.rows.slice(0, Math.max(0, room));
      room -= measure.rows.length;
      return rows.length === 0 ? [] : [{ ...measure, rows }];
    });
    return measures.length === 0 ? [] : [{ ...group, measures }];
  });
  const more = room >= 0 ? "" : ` The report has ${-room} more.`;
  return { ...forest, groups, numbers: [], reading: `${forest.reading}${more}` };
}
