import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { run } from "../../src/cli/program.ts";
import type { Terminal } from "../../src/cli/terminal.ts";
import * as library from "../../src/index.ts";
import { loadPlan } from "../../src/plan/index.ts";
import { planText } from "../plan/plans.ts";

async function command(line: string) {
  const [stdout, stderr]: [string[], string[]] = [[], []];
  const terminal: Terminal = {
    print: (text) => stdout.push(text),
    complain: (text) => stderr.push(text),
    progress: () => {},
    settle: () => {},
    bold: (text) => text,
    dim: (text) => text,
  };
  const load = async () => library;
  const signal = new AbortController().signal;
  const status = await run(["size", ...line.split(" ")], { terminal, load, signal, version: "1.2.3" });
  return { status, stdout: stdout.join("\n"), stderr: stderr.join("\n") };
}

describe("closeout size", () => {
  // ((1.959964 + 0.841621) / 0.006)^2 (0.12 0.88 + 0.126 0.874) = 47,033.1; 94,068 / 7,140 = 13.2
  it("says what the test is to show, how many units it needs, and how long they take", async () => {
    expect(await command("--share 12% --worthwhile 5% --a-day 7140")).toEqual({
      status: 0,
      stderr: "",
      stdout: `To show a gain, if it is 5% (12% to 12.6%),
in 4 of 5 tests, with 95% intervals:

  47,034 units with the control and with each variant, 94,068 in all
  14 days (2 weeks) of enrolment at 7,140 a day; follow-up comes on top

In the plan: planned: {units: 94068}`,
    });
  });

  // Chow, Shao and Wang 2008, p. 89 and p. 59 (see test/stats/sizing.test.ts): 70 and 63 in each arm
  it("gives the printed examples, of a share and of a mean", async () => {
    expect((await command("--share 0.65 --worthwhile 0.2")).stdout).toContain(
      "  70 units with the control and with each",
    );
    const { stdout } = await command("--mean 1 --sd 0.1 --worthwhile 0.05");
    expect(stdout).toContain("  63 units with the control and");
    expect(stdout).toContain("\n  under 200 in a group Student\u2019s t asks for about one more in each\n");
  });

  it("says where so few leave the normal curve, on which the size rests", async () => {
    expect((await command("--share 5% --worthwhile 0.15")).stdout).toContain("  a rough size: with under 10 events in");
    expect((await command("--share 95% --margin 0.2")).stdout).toContain("  a rough size");
    expect((await command("--share 50% --worthwhile 0.15")).stdout).not.toContain("rough");
  });

  // R 4.2.2 with mvtnorm 1.1-3: Dunnett's value c by uniroot of 1 - pmvnorm(Miwa(2048)) = .05 at the correlation
  // v_c / (v_c + v_t), v_c = .12 .88 / .2, v_t = .1296 .8704 / .4: 2.18977843659; ((c + qnorm(.9)) / .0036)^2 (v_c + v_t) = 753,142.2
  it("sizes several variants of other shares, to show a gain beyond the one worth adopting", async () => {
    const { stdout } = await command("--share 12% --worthwhile 5% --expected 8% --allocation 20%:40%:40% --power 0.9");
    expect(stdout).toBe(`To show a gain of more than 5% (12% to 12.6%), if it is 8% (12.96%),
in 9 of 10 tests, with 95% intervals that hold for both variants at once:

  150,629 units with the control, 301,257 with variant 1 and 301,257 with variant 2, 753,143 in all

In the plan: planned: {units: 753143}`);
  });

  it("sizes the limit of what must not get worse for a test in which nothing changes", async () => {
    const { stdout } = await command("--mean 0.0809 --sd 0.33 --margin 5% --good-is lower --allocation 2:1");
    // ((1.959964 + 0.841621) 0.33 / (0.05 0.0809))^2 (1 / (2/3) + 1 / (1/3)) = 235,077.5 (R 4.2.2)
    expect(stdout).toBe(`To show that 0.0809 rises by less than 5% (to 0.084945), if nothing changes,
in 4 of 5 tests, with 95% intervals:

  156,719 units with the control and 78,360 with the variant, 235,079 in all

In the plan: planned: {units: 235079}`);
    expect((await command("--share 12% --margin 0.006")).stdout).toContain(
      "To show that 12% falls by less than 0.6 percentage points (to 11.4%), if nothing changes,",
    );
  });

  // rpact 3.3.4: five looks of the O'Brien-Fleming type at 5% and 80% ask for 1.02472 times as many
  it("says what planned looks cost", async () => {
    const { stdout } = await command("--mean 96.4 --sd 410 --worthwhile 5 --looks 20%,40%,60%,80%,1");
    expect(stdout).toContain(`  108,161 units with the control and with each variant, 216,322 in all
  2.5% more than with a single look (211,104), for 5 looks at 20%, 40%, 60%, 80% and 100%:
  the last is held to 2.03 standard errors, a single one to 1.96
`);
  });

  it("prints what the README says of its example", async () => {
    const readme = readFileSync(new URL("../../README.md", import.meta.url), "utf8").replace(/\s+/g, " ");
    const [, line = "", units = "", days = ""] =
      /`closeout size ([^`]*)` asks for .*?: ([\d,]+) units in each group, (\d+) days\./.exec(readme) ?? [];
    const { stdout } = await command(line);
    expect(stdout).toContain(`  ${units} units with the control and with each variant,`);
    expect(stdout).toContain(`  ${days} days (2 weeks) of enrolment`);
  });

  it("prints a line that a plan takes as it stands", async () => {
    const [, planned = ""] = /In the plan: (.*)/.exec((await command("--share 12% --worthwhile 5%")).stdout) ?? [];
    expect(loadPlan(planText({ planned }))).toMatchObject({ plan: { plannedUnits: 94068 } });
  });

  it.each([
    ["--share 12 --worthwhile 5%", "--share 12: expected a share between 0 and 1, such as 12% or 0.12."],
    ["--worthwhile 5%", "Say the control's level: --share, or --mean together with --sd."],
    ["--share 12% --sd 3 --worthwhile 5%", "Say the control's level: --share, or --mean together with --sd."],
    ["--mean 3 --worthwhile 5%", "Say the control's level: --share, or --mean together with --sd."],
    ["--mean 3 --sd 0 --worthwhile 5%", "--sd 0: expected a number above 0."],
    ["--mean 0 --sd 1 --worthwhile 5%", "An amount in percent is of the control's level, which is not above 0 here."],
    ["--share 12%", "Say what the test is to show: --worthwhile, or --margin for what must not get worse."],
    ["--share 12% --worthwhile 5% --margin 5%", "ask one at a time."],
    ["--share 12% --margin 5% --expected 8%", "--expected goes with --worthwhile"],
    ["--share 12% --worthwhile -5%", "--worthwhile -5%: expected an amount above 0, such as 5% or 0.006."],
    ["--share 12% --worthwhile 8% --expected 5%", "--expected is to be larger than --worthwhile"],
    ["--share 90% --worthwhile 20%", "That would be a share below 0 or above 1."],
    ["--share 12% --worthwhile 5% --good-is up", "--good-is up: expected higher or lower."],
    ["--share 12% --worthwhile 5% --allocation 50%:1", "--allocation 50%:1: expected two parts or more, such as 1:1."],
    ["--share 12% --worthwhile 5% --allocation 1", "--allocation 1: expected two parts or more, such as 1:1."],
    ["--share 12% --worthwhile 5% --power 1", "--power 1: expected a share between 0 and 1"],
    [
      "--share 12% --worthwhile 5% --confidence 5%",
      "--confidence says how often an interval holds the truth, so it is at least 50%. Where 5% may go wrong write 95%.",
    ],
    [
      "--share 12% --worthwhile 5% --power 0.2",
      "--power says how often a test finds the effect, so it is at least 50%. Where 20% may miss it write 80%.",
    ],
    ["--share 12% --worthwhile 5% --a-day 0", "--a-day 0: expected a number above 0."],
    ["--share 12% --worthwhile 5% --looks 50%,80%", "--looks 50%,80%: expected 2 to 10 rising shares"],
    ["--share 12% --worthwhile 5% --looks 80%,50%,1", "expected 2 to 10 rising shares"],
    ["--share 12% --worthwhile 5% --spending pocock", "--spending is of planned looks: add --looks."],
    ["--share 12% --worthwhile 1e-9", "No test is large enough for that"],
  ])("refuses %s with status 2, and says why", async (line, message) => {
    const { status, stdout, stderr } = await command(line);
    expect(stderr).toContain(message);
    expect(stderr).toContain("Usage: closeout size ");
    expect([status, stdout]).toEqual([2, ""]);
  });

  it("names all that is wrong at once", async () => {
    const { stderr } = await command("--share x --margin 0 --confidence 95 --looks 1");
    expect(stderr.split("\n").map((line) => line.split(" ")[0])).toEqual([
      "--margin",
      "--share",
      "--confidence",
      "--looks",
      "Usage:",
    ]);
  });
});
