import type { SoundnessFacts } from "../../../src/engine/soundnessTypes.ts";
import type { Rules, Seen } from "./seen.ts";

const facts = ({ trace }: Seen): SoundnessFacts => trace.result.facts.soundness;
const sum = (counts: readonly number[]) => counts.reduce((a, b) => a + b, 0);

/** Whether a line changes who is enrolled, and in which variant. */
const moves = (seen: Seen, line: string): boolean => {
  const { beforeLines } = facts(seen);
  const at = beforeLines.findIndex((one) => one.line.startsWith(line));
  if (at < 0) return false;
  const after = beforeLines[at + 1]?.byVariant ?? seen.trace.result.facts.enrolled;
  return beforeLines[at]?.byVariant.join() !== after.join();
};

export const soundnessRules: Rules = {
  "units enrolled on two days": (seen) => (facts(seen).days?.length ?? 0) > 1,
  "units of one day that end on two lines": (seen) =>
    facts(seen).days?.some(({ ended }) => ended.filter((counts) => sum(counts) > 0).length > 1) === true,
  "a level of which some units leave": (seen) =>
    facts(seen)
      .levels.flat()
      .some(({ ended }) => ended.filter((counts) => sum(counts) > 0).length > 1),
  "a rejected row that would enrol": (seen) => moves(seen, "rejected"),
  "a row filter that changes who is enrolled": (seen) => moves(seen, "filter:"),
  "a row filter that takes an enrolling row": (seen) => facts(seen).enrolling.taken.some((units) => sum(units) > 0),
  "a unit enrolled by a row that a metric counts": (seen) => facts(seen).byMetricRows?.units ?? 0,
  "a unit enrolled by a row that no metric counts": (seen) => {
    const found = facts(seen).byMetricRows;
    return found !== null && found.units < sum(seen.trace.result.facts.enrolled);
  },
  "analysed units not followed to the end": (seen) => sum(facts(seen).keptUnfollowed ?? []),
  "a filter that removes nothing, of text": (seen) =>
    facts(seen).valuesOfFilters.some(({ columns }) =>
      columns.some(({ column, values }) => !seen.plan.numericColumns.includes(column) && values.length > 1),
    ),
  "a filter that removes nothing, of numbers": (seen) =>
    facts(seen).valuesOfFilters.some(({ columns }) =>
      columns.some(({ column, values }) => seen.plan.numericColumns.includes(column) && values.length > 1),
    ),
  "rows outside the span": (seen) => sum(facts(seen).sources.map(({ outside }) => outside)),
  "a silence of an arm over two hours with rows": (seen) =>
    facts(seen).silences.some(({ first, last }) => last > first),
  "a silence of which one unit has rows in two hours": (seen) =>
    facts(seen).silences.some(({ first, last, others }) => last > first && others === 1),
  "an arm silent in one entry of the log, and not in another": (seen) => {
    const named = facts(seen).silences.map(({ source }) => source);
    return named.length > 0 && facts(seen).sources.some(({ source }) => !named.includes(source));
  },
};
