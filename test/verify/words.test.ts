import { mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { compareReports, seal } from "../../src/index.ts";
import { previousReport, renderReport } from "../../src/report/index.ts";
import { cellsWords } from "../../src/verify/cells-words.ts";
import { differenceLines } from "../../src/verify/words.ts";
import { NEVER_USED } from "../decision/words-never-used.ts";
import { adopt } from "../report/cases.ts";
import { textOf } from "../report/markup.ts";
import { planText } from "../report/plans.ts";
import { firstRun, secondRun, thirdRun, undecidableRerun } from "../report/rerun-case.ts";

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "closeout-words-"));
  await writeFile(join(folder, "plan.yaml"), planText);
  await writeFile(join(folder, "first.json"), firstRun.text);
  for (const [name, inputs] of Object.entries({ secondRun, thirdRun, undecidableRerun })) {
    await writeFile(join(folder, `${name}.json`), JSON.stringify((await renderReport(inputs)).json));
  }
});
afterAll(() => rm(folder, { recursive: true, force: true }));
const at = (name: string) => join(folder, name);

describe("two reports compared", () => {
  it("say on the terminal what differs: conclusion, plan, log, account, estimates, checks", async () => {
    const { status, text } = await compareReports(at("first.json"), at("secondRun.json"));
    expect(status).toBe(0);
    expect(text).toContain('Both conclude the same: adopt "calendar".');
    expect(text).toContain('- the filter "staff accounts" was added (staff book for training)');
    expect(text).toContain("- visitors, counted: 101,505, now 100,301 (\u22121,204)");
    expect(text).toContain("- Booked: +10.8% (+7.3% to +14.4%), now +10.0% (+6.5% to +13.7%)");
    expect(text).not.toMatch(NEVER_USED);
  });

  it("make a document of the same, with both on one figure and no outside file", async () => {
    const out = at("compared.html");
    expect(await compareReports(at("first.json"), at("thirdRun.json"), { out })).toEqual({
      status: 0,
      text: `Written: ${out}`,
    });
    const html = await readFile(out, "utf8");
    expect(textOf(html)).toContain("Each estimate before and after");
    expect(html).not.toMatch(/<script|https?:\/\/(?!www\.w3)/);
    expect(textOf(html)).toContain("metrics, Booked: worthwhile");
  });

  it("show no estimate on the terminal where one of them decides nothing", async () => {
    const { text } = await compareReports(at("first.json"), at("undecidableRerun.json"));
    expect(text).toContain('The conclusion is another: adopt "calendar", now nothing can be decided.');
    expect(text).not.toContain("Estimates");
  });

  it("are refused with status 2 when one is no report, or of another experiment", async () => {
    expect(await compareReports(at("first.json"), at("plan.yaml"))).toMatchObject({ status: 2 });
    const other = JSON.stringify({ ...JSON.parse(firstRun.text), experiment: "Another" });
    await writeFile(at("other.json"), other);
    expect(previousReport(other)).not.toBeNull();
    expect(await compareReports(at("first.json"), at("other.json"))).toMatchObject({
      status: 2,
      text: expect.stringContaining("two experiments"),
    });
  });
});

describe("a rule that is sealed", () => {
  it("is its fingerprint on the first line, then what it covers and how the plan quotes it", async () => {
    const { status, text } = await seal(at("plan.yaml"));
    const [fingerprint = "", ...rest] = text.split("\n");
    expect(status).toBe(0);
    expect(rest.join("\n")).toContain("Booked and Support contacts");
    expect(rest.join("\n")).not.toMatch(NEVER_USED);
    await writeFile(
      at("quoted.yaml"),
      `${planText}registered: {on: 2026-02-27, where: ticket 7, fingerprint: ${fingerprint}}\n`,
    );
    expect((await seal(at("quoted.yaml"))).text).toContain("It is the one that the plan says was kept.");
    await writeFile(at("changed.yaml"), (await readFile(at("quoted.yaml"), "utf8")).replace("5%", "4%"));
    expect((await seal(at("changed.yaml"))).text).toContain(`The plan says that another was kept: ${fingerprint}`);
  });

  it("is refused with the plan's mistakes", async () => {
    await writeFile(at("wrong.yaml"), `${planText}registered: {on: 2026-02-27, fingerprint: 1234}\n`);
    const { status, text } = await seal(at("wrong.yaml"));
    expect(status).toBe(2);
    expect(text).toContain("the fingerprint that closeout seal prints");
    expect(await seal(at("nothing.yaml"))).toMatchObject({ status: 2 });
  });
});

it("no line about a verdict uses a word that no output of ours uses", () => {
  const kinds = ["number", "words", "drawing", "markup"] as const;
  const lines = differenceLines(kinds.map((kind) => ({ kind, where: "section 1, Decision", given: "a", made: "b" })));
  expect([...lines, ...cellsWords(["Booked"], true)].join("\n")).not.toMatch(NEVER_USED);
});

it("a rerun's summary and terminal say what changed", async () => {
  const { files, terminal } = await renderReport(secondRun);
  const summary = files.find(({ name }) => name === "summary.md")?.text ?? "";
  const shown = terminal({ report: "r", summary: "s" }).replace(/\s+/g, " ");
  for (const text of [summary, shown]) {
    expect(text).toContain("The first run said the same.");
    expect(text).toContain("was added (staff book for training)");
  }
  const first = await renderReport(adopt);
  expect(first.terminal({ report: "r", summary: "s" })).not.toContain("Changed");
});
