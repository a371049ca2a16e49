import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { closeout, type Outcome } from "../../src/index.ts";

/** A small test of two signs: 300 visitors a sign, every tenth of them staff. */
export const PLAN = `experiment: Two signs
question: Do more visitors stop at the new sign?
unit-called: {one: visitor, many: visitors}
log:
  - files: log.csv
    columns: {unit: visitor, variant: sign}
variants:
  - {name: old, control: true}
  - {name: new}
metrics:
  - name: Stopped
    role: primary
    summary: proportion
    of: {where: {stopped: 1}}
    worthwhile: {relative: 5%}
  - name: Minutes
    summary: mean
    of: {sum: minutes}
    cap: {at: 30}
`;
export const STAFF = `filters:
  - {name: staff, why: they pass every day, drop: units, where: {is_staff: 1}}
`;
export const LOG = [
  "visitor,sign,stopped,minutes,is_staff",
  ...["old", "new"].flatMap((sign, s) =>
    Array.from({ length: 300 }, (_, i) => {
      const stopped = Number(i % 10 < 3 + 3 * s);
      return `${sign}${i},${sign},${stopped},${(i * 7) % 43},${Number(i % 10 === 9)}`;
    }),
  ),
].join("\n");

export interface Bench {
  readonly folder: string;
  readonly report: string;
  run(plan: string, options?: { previous?: string; fromCells?: string; figures?: boolean }): Promise<Outcome>;
  remove(): void;
}

export function bench(): Bench {
  const folder = mkdtempSync(join(tmpdir(), "closeout-rerun-"));
  const report = join(folder, "report");
  writeFileSync(join(folder, "log.csv"), LOG);
  return {
    folder,
    report,
    run: (plan, options = {}) => {
      writeFileSync(join(folder, "plan.yaml"), plan);
      return closeout(join(folder, "plan.yaml"), { out: report, ...options });
    },
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}

/** Every file under a folder with its text. */
export function filesOf(folder: string): Record<string, string> {
  const names = readdirSync(folder, { recursive: true, encoding: "utf8" }).sort();
  const files = names.filter((name) => statSync(join(folder, name)).isFile());
  return Object.fromEntries(files.map((name) => [name, readFileSync(join(folder, name), "utf8")]));
}

/** Puts a folder back to what filesOf gave. */
export function putBack(folder: string, files: Readonly<Record<string, string>>): void {
  rmSync(folder, { recursive: true, force: true });
  for (const [name, text] of Object.entries(files)) {
    mkdirSync(join(folder, name, ".."), { recursive: true });
    writeFileSync(join(folder, name), text);
  }
}
