import { mkdtemp, readdir, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { stripVTControlCharacters } from "node:util";
import { afterEach, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { build, closeout } from "./built.ts";

const PLAN = `experiment: Two signs
question: Do more visitors stop at the new sign?
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
`;
/** 200 visitors a sign; 60 stop at the old one, 120 at the new. */
const LOG = [
  "visitor,sign,stopped",
  ...Array.from({ length: 200 }, (_, i) => `o${i},old,${Number(i < 60)}`),
  ...Array.from({ length: 200 }, (_, i) => `n${i},new,${Number(i < 120)}`),
].join("\n");

let folder: string;
beforeAll(build);
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "closeout-command-"));
  await writeFile(join(folder, "plan.yaml"), PLAN);
  await writeFile(join(folder, "log.csv"), LOG);
});
afterEach(() => rm(folder, { recursive: true }));

describe("closeout report, as a user runs it", () => {
  it("writes the report, prints the conclusion to stdout and nothing but stages to stderr, all without codes", async () => {
    const { status, stdout, stderr } = await closeout(["report", "plan.yaml"], folder).ended;
    expect(stderr.split("\n").filter((line) => /error|fault/i.test(line))).toEqual([]);
    expect(status).toBe(0);
    expect(stdout).toMatch(/^Two signs\n\nAdopt /);
    expect(stdout).toContain("out/two-signs/report.html");
    for (const text of [stdout, stderr]) expect(stripVTControlCharacters(text)).toBe(text);
    expect(await readdir(join(folder, "out/two-signs"))).toEqual(
      expect.arrayContaining(["report.html", "report.json"]),
    );
    const json = JSON.parse(await readFile(join(folder, "out/two-signs/report.json"), "utf8"));
    expect(json.conclusion).toMatchObject({ decision: "adopt", variant: "new" });
    expect(await readdir(join(folder, "out"))).toEqual(["two-signs"]);
  });

  it("ends with 2 where the plan is wrong or not there, says so on stderr alone, and writes no file", async () => {
    await writeFile(join(folder, "plan.yaml"), PLAN.replace("summary: proportion", "summary: proportions"));
    for (const [plan, words] of [
      ["plan.yaml", "proportions"],
      ["other.yaml", "other.yaml"],
    ] as const) {
      const { status, stdout, stderr } = await closeout(["report", plan], folder).ended;
      expect([status, stdout]).toEqual([2, ""]);
      expect(stderr).toContain(words);
      expect(stderr).not.toContain("    at ");
    }
    expect(await filesIn(folder)).toEqual(["log.csv", "plan.yaml"]);
  });

  it("ends with 3 where the log holds no row", async () => {
    await writeFile(join(folder, "log.csv"), "visitor,sign,stopped\n");
    const { status, stdout, stderr } = await closeout(["report", "plan.yaml"], folder).ended;
    expect([status, stdout]).toEqual([3, ""]);
    expect(stderr).not.toBe("");
    expect(await filesIn(folder)).toEqual(["log.csv", "plan.yaml"]);
  });

  it("ends with 2 for an unknown command and names the nearest", async () => {
    const { status, stdout, stderr } = await closeout(["raport", "plan.yaml"], folder).ended;
    expect([status, stdout]).toEqual([2, ""]);
    expect(stderr).toContain("Did you mean report?");
  });
});

describe("a reader that leaves", () => {
  it("is no fault, when it closes the pipe", async () => {
    const running = closeout(["schema"], folder);
    running.closeStdout();
    expect(await running.ended).toMatchObject({ status: 0, stderr: "" });
  });

  it("ends the run with 130 on Ctrl-C, and no file is half written", async () => {
    const running = closeout(["demo", "demo"], folder);
    // The demo's files are written; the engine works on them.
    await running.said("reading the log");
    running.interrupt();
    const { status, stdout, stderr } = await running.ended;
    expect([status, stdout]).toEqual([130, ""]);
    expect(stderr).toContain("Stopped. No report was written.");
    expect(
      (await filesIn(join(folder, "demo"))).filter(
        (file) => !/^(data\/[^.]+\.(csv\.gz|csv|ndjson)|plan\.yaml)$/.test(file),
      ),
    ).toEqual([]);
  });
});

/** Files under a folder, folders themselves left out; nothing else is hidden. */
async function filesIn(where: string): Promise<string[]> {
  const entries = await readdir(where, { recursive: true, withFileTypes: true });
  const files = entries.filter((entry) => entry.isFile());
  return files.map((file) => join(file.parentPath, file.name).slice(where.length + 1)).sort();
}
