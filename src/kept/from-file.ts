import { readFile } from "node:fs/promises";
import { type Measured, measuredBy } from "../measure.ts";
import { type Plan, planChanges, planIn } from "../plan/index.ts";
import { list, quoted } from "../words/index.ts";
import { type CellsFile, measuredFrom, readCells, withoutDraws } from "./file.ts";

/** The figures that a file of cells holds for a plan; or why it cannot serve that plan. */
export async function measuredFromFile(
  plan: Plan,
  planText: string,
  file: string,
): Promise<Measured | { readonly refused: string }> {
  const cells = await cellsAt(file);
  if (cells === null) {
    return {
      refused: `${file} cannot be read as cells that a report kept. Name the cells.json that lies beside a report.`,
    };
  }
  const refused = misfit(plan, planText, cells, file);
  return refused === null ? measuredFrom(plan, withoutDraws(cells)) : { refused };
}

export async function cellsAt(file: string): Promise<CellsFile | null> {
  const text = await readFile(file, "utf8").catch(() => null);
  return text === null ? null : readCells(text);
}

/** Cells stand for who is counted and what is measured; the rule that is held against them may be another. */
export function misfit(plan: Plan, planText: string, cells: CellsFile, file: string): string | null {
  const own = planIn(cells.plan);
  if (own !== null && measuredBy(own) === measuredBy(plan)) return null;
  const places = planChanges(cells.plan, planText).flatMap(({ place, counts }) => (counts ? [quoted(place)] : []));
  const what = places.length === 0 ? "" : `: ${list(places)}`;
  return `${file} was made for another plan${what}. From cells only the confidence, the rule, worthwhile effects and limits can be changed; for the rest, and where a quantile is asked for, the log is needed.`;
}
