import { readFile, writeFile } from "node:fs/promises";
import { planChanges, planIn } from "./plan/index.ts";
import {
  type ComparedReports,
  comparisonPage,
  comparisonText,
  type PreviousReport,
  previousReport,
} from "./report/index.ts";

export interface Compared {
  readonly status: 0 | 2;
  readonly text: string;
}

/**
 * What differs between two reports of one experiment, as text or as a document.
 * @param options.out where the document is written
 */
export async function compareReports(
  beforePath: string,
  afterPath: string,
  options: { readonly out?: string | undefined } = {},
): Promise<Compared> {
  const [before, after] = [await reportAt(beforePath), await reportAt(afterPath)];
  if (before === null || after === null) {
    const wrong = before === null ? beforePath : afterPath;
    return { status: 2, text: `${wrong} cannot be read as a report.json. Name the report.json of two reports.` };
  }
  if (before.report.experiment !== after.report.experiment) {
    return {
      status: 2,
      text: `These are reports of two experiments, "${before.report.experiment}" and "${after.report.experiment}": there is nothing to compare.`,
    };
  }
  const planText = after.report.provenance.plan.text;
  const plan = planIn(planText);
  if (plan === null) {
    return { status: 2, text: `The plan inside ${afterPath} cannot be read by this version of closeout.` };
  }
  const changes = planChanges(before.report.provenance.plan.text, planText);
  const reports: ComparedReports = { before, after, plan, changes };
  if (options.out === undefined) return { status: 0, text: comparisonText(reports) };
  await writeFile(options.out, await comparisonPage(reports));
  return { status: 0, text: `Written: ${options.out}` };
}

async function reportAt(file: string): Promise<PreviousReport | null> {
  const json = await readFile(file, "utf8").catch(() => null);
  return json === null ? null : previousReport(json);
}
