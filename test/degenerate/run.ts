import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { closeout, type Outcome, type Verified, verify } from "../../src/index.ts";

export interface Run {
  readonly outcome: Outcome;
  /** What was written into the report's folder, by name; nothing without a report. */
  readonly files: Readonly<Record<string, string>>;
  /** What else stands in the plan's folder afterwards. */
  readonly left: readonly string[];
  /** What verify says of the report with its cells and without the log; null without a report. */
  readonly withoutLog: Verified | null;
  /** The folder that all of this lay in. */
  readonly folder: string;
}

/** The library's entry on a plan and its files, in a folder that is gone afterwards. */
export async function run(plan: string, files: Readonly<Record<string, string | Uint8Array>>): Promise<Run> {
  const folder = mkdtempSync(join(tmpdir(), "closeout-edge-"));
  try {
    writeFileSync(join(folder, "plan.yaml"), plan);
    for (const [name, content] of Object.entries(files)) {
      mkdirSync(dirname(join(folder, name)), { recursive: true });
      writeFileSync(join(folder, name), content);
    }
    const outcome = await closeout(join(folder, "plan.yaml"), { out: join(folder, "report") });
    const left = readdirSync(folder).filter((name) => name !== "plan.yaml" && !(name in files));
    const written = left.includes("report") ? readdirSync(join(folder, "report")).sort() : [];
    const report = join(folder, "report/report.html");
    return {
      outcome,
      withoutLog: outcome.status === 0 ? await verify(report, { cells: true }) : null,
      files: Object.fromEntries(written.map((name) => [name, readFileSync(join(folder, "report", name), "utf8")])),
      left,
      folder,
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
