import { mkdir, mkdtemp, readdir, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { stripVTControlCharacters } from "node:util";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { withAccents } from "../../src/cli/accents.ts";
import type { Library } from "../../src/cli/library.ts";
import { run } from "../../src/cli/program.ts";
import { progressText } from "../../src/cli/progress.ts";
import type { Terminal } from "../../src/cli/terminal.ts";
import { type BlindJson, type CloseoutOptions, type Outcome, type ReportJson, size } from "../../src/index.ts";

const DONE: Outcome = {
  status: 0,
  terminal: "A test\n\nAdopt it.",
  folder: "out/a-test",
  files: [],
  report: {} as ReportJson, // the command line does not look inside
};

/** Runs the command line against a library that only remembers what it was asked. */
async function command(argv: string[], outcome: Outcome | Error = DONE, signal = new AbortController().signal) {
  const asked: { plan: string; options: CloseoutOptions }[] = [];
  const [stdout, stderr]: [string[], string[]] = [[], []];
  const terminal: Terminal = {
    print: (text) => stdout.push(text),
    complain: (text) => stderr.push(text),
    progress: () => {},
    settle: () => {},
    bold: (text) => text,
    dim: (text) => text,
  };
  const library: Library = {
    closeout: async (plan, options = {}) => {
      asked.push({ plan, options });
      if (outcome instanceof Error) throw outcome;
      return outcome;
    },
    verify: async (file, options = {}) => {
      asked.push({ plan: file, options });
      return { status: 4, text: `${file} does not hold` };
    },
    seal: async (plan) => ({ status: 0, text: `seal of ${plan}` }),
    compareReports: async (before, after, options = {}) => ({
      status: 0,
      text: `${before} against ${after}, ${options.out ?? "here"}`,
    }),
    check: async (plan, options = {}) => {
      asked.push({ plan, options });
      if (outcome instanceof Error) throw outcome;
      return outcome.status === 0 ? { ...outcome, terminal: "A test\n\nBlind.", check: {} as BlindJson } : outcome;
    },
    trace: async (plan, unit, options = {}) => {
      asked.push({ plan: `${plan} ${unit}`, options });
      if (outcome instanceof Error) throw outcome;
      return outcome.status === 0 ? { status: 0, terminal: "Visitor" } : outcome;
    },
    blindJsonSchema: () => ({ title: "check" }),
    planJsonSchema: () => ({ title: "plan" }),
    reportJsonSchema: () => ({ title: "report" }),
    size,
  };
  const status = await run(argv, { terminal, load: async () => library, signal, version: "1.2.3" });
  return { status, stdout: stdout.join("\n"), stderr: stderr.join("\n"), asked };
}

describe("closeout check", () => {
  it("hands the plan and the options to the library and prints what it says", async () => {
    const { status, stdout, stderr, asked } = await command(["check", "a.yaml", "--out", "x", "--threads", "2"]);
    expect([status, stdout, stderr]).toEqual([0, "A test\n\nBlind.", ""]);
    expect(asked[0]).toMatchObject({ plan: "a.yaml", options: { out: "x", threads: 2 } });
  });
  it("says what is wrong on stderr, with its status", async () => {
    const { status, stdout, stderr } = await command(["check", "a.yaml"], { status: 3, text: "The log is empty." });
    expect([status, stdout, stderr]).toEqual([3, "", "The log is empty."]);
  });
});

describe("closeout trace", () => {
  it("hands the plan, the unit and the options to the library and prints what it says", async () => {
    const { status, stdout, stderr, asked } = await command(["trace", "a.yaml", "--unit", "v 1", "--threads", "2"]);
    expect([status, stdout, stderr]).toEqual([0, "Visitor", ""]);
    expect(asked).toMatchObject([{ plan: "a.yaml v 1", options: { threads: 2 } }]);
  });
  it("takes an id that begins with a hyphen", async () => {
    expect((await command(["trace", "a.yaml", "--unit=-7"])).asked).toMatchObject([{ plan: "a.yaml -7" }]);
  });
});

describe("closeout report", () => {
  it("hands the plan and the options to the library and prints what it says", async () => {
    const { status, stdout, stderr, asked } = await command([
      "report",
      "a.yaml",
      "--out",
      "x",
      "--threads",
      "2",
      "--memory",
      "4GB",
    ]);
    expect([status, stdout, stderr]).toEqual([0, "A test\n\nAdopt it.", ""]);
    expect(asked[0]).toMatchObject({ plan: "a.yaml", options: { out: "x", threads: 2, memory: "4GB" } });
  });

  it("asks for the figures as files only when told to", async () => {
    const { asked } = await command(["report", "a.yaml", "--figures"]);
    expect(asked[0]?.options).toMatchObject({ figures: true });
  });

  it("leaves to the library what was not given", async () => {
    const { asked } = await command(["report", "a.yaml"]);
    expect(Object.keys(asked[0]?.options ?? {}).sort()).toEqual(["progress", "signal"]);
  });

  it.each([2, 3] as const)("prints problems to stderr alone and ends with the library's status %i", async (status) => {
    const result = await command(["report", "a.yaml"], { status, text: "a.yaml has 1 mistake." });
    expect([result.status, result.stdout, result.stderr]).toEqual([status, "", "a.yaml has 1 mistake."]);
  });

  it("ends with 2 where the report cannot be written, and says where and why", async () => {
    // Linux, mkdir of a path under a file: Error: ENOTDIR: not a directory, mkdir 'plan.yaml/out'
    const refused = await mkdir(join(fileURLToPath(import.meta.url), "out")).catch((error: unknown) => error as Error);
    const { status, stdout, stderr } = await command(
      ["report", "a.yaml"],
      refused instanceof Error ? refused : undefined,
    );
    expect([status, stdout]).toEqual([2, ""]);
    expect(stderr).toMatch(/program\.test\.ts.out cannot be written: a part of this path is a file, not a folder\./);
  });

  it.each([
    [
      "mkdtemp",
      "/no/such/.closeout-vm-1-x",
      "/no/such cannot be written: there is no such folder, and none can be made. Name another folder.",
    ],
    ["open", "no/such.html", "no/such.html cannot be opened: there is no such folder, or file."],
  ])("and says so too of a folder that %s does not find", async (syscall, path, told) => {
    const refused = Object.assign(new Error("ENOENT: no such file or directory"), { code: "ENOENT", syscall, path });
    const { status, stderr } = await command(["report", "a.yaml"], refused);
    expect([status, stderr]).toEqual([2, told]);
  });

  it("takes a reading that was stopped for stopped, not for a log that cannot be used", async () => {
    const stopped = command(
      ["report", "a.yaml"],
      { status: 3, text: "The engine could not read." },
      AbortSignal.abort(),
    );
    await expect(stopped).rejects.toThrow("aborted");
  });

  it("throws on what nobody foresaw, for main to say as a fault of its own", async () => {
    await expect(command(["report", "a.yaml"], new Error("units line up to 1 but 2 were enrolled"))).rejects.toThrow(
      "line up",
    );
  });
});

describe("wrong arguments", () => {
  it.each([
    [["reprot", "a.yaml"], 'closeout has no command "reprot". Did you mean report?'],
    [["plan.yaml"], 'closeout has no command "plan.yaml". Did you mean closeout report plan.yaml?'],
    [["trace", "a.yaml"], "closeout trace needs --unit <ID>.\nUsage: closeout trace PLAN --unit ID [options]"],
    [["trace", "--unit", "x"], "closeout trace needs PLAN."],
    [["trace", "a.yaml", "--unit", "x", "--out", "y"], "closeout trace has no option --out."],
    [["inspect", "a.yaml"], 'closeout has no command "inspect".\n'],
    [["report"], "closeout report needs PLAN.\nUsage: closeout report PLAN [options]"],
    [["report", "a.yaml", "b.yaml"], "closeout report was given too many names."],
    [["report", "a.yaml", "--thread", "2"], "closeout report has no option --thread. Did you mean --threads?"],
    [["report", "a.yaml", "--thread=2"], "closeout report has no option --thread. Did you mean --threads?"],
    [["report", "a.yaml", "--figures=yes"], "--figures takes no value. Write --figures alone."],
    [["compare", "a.json", "b.json", "--out", "b.json"], "--out b.json: expected the name of an .html file."],
    [["demo", "report", "--ouch"], "closeout demo has no option --ouch."],
    [["--verbose"], "closeout has no option --verbose."],
    [["report", "a.yaml", "--out"], "--out needs a value: --out DIR"],
    [["report", "a.yaml", "--threads", "none"], "--threads none: expected a whole number, 1 or more."],
    [["report", "a.yaml", "--threads", "0"], "--threads 0: expected a whole number, 1 or more."],
    [["report", "a.yaml", "--memory", "4"], "--memory 4: expected a size with its unit, such as 500MB or 4GB."],
    [["schema", "log"], 'There is no schema of "log".\nUsage: closeout schema [plan|report|check]'],
  ])("closeout %j: status 2, on stderr alone, without asking the library", async (argv, message) => {
    const { status, stdout, stderr, asked } = await command(argv);
    expect(stderr).toContain(message);
    expect([status, stdout, asked.length]).toEqual([2, "", 0]);
  });

  it("names all wrong option values at once", async () => {
    const { stderr } = await command(["report", "a.yaml", "--threads", "-1", "--memory", "much"]);
    expect(stderr).toMatch(/--threads -1: .*\n--memory much: /);
  });

  it("prints the help to stderr when there is no command at all", async () => {
    const { status, stdout, stderr } = await command([]);
    expect([status, stdout]).toEqual([2, ""]);
    expect(stderr).toContain("closeout COMMAND");
  });
});

describe("what is asked for", () => {
  it("prints help to stdout with status 0, and only the commands that are there", async () => {
    const { status, stdout, stderr } = await command(["--help"]);
    expect([status, stderr]).toEqual([0, ""]);
    const [, commands = ""] = /Commands:\n([\s\S]*?)\n\n/.exec(stdout) ?? [];
    expect(commands.match(/^ {2}(\w+)/gm)?.map((line) => line.trim())).toEqual([
      "report",
      "verify",
      "compare",
      "seal",
      "check",
      "trace",
      "demo",
      "size",
      "schema",
      "help",
    ]);
  });

  it("prints the help of a command", async () => {
    const { status, stdout } = await command(["report", "--help"]);
    expect(status).toBe(0);
    for (const option of ["--out <DIR>", "--threads <N>", "--memory <SIZE>", "--debug"])
      expect(stdout).toContain(option);
    expect((await command(["help", "report"])).stdout).toBe(stdout);
  });

  it("prints the version", async () => {
    expect(await command(["--version"])).toMatchObject({ status: 0, stdout: "1.2.3", stderr: "" });
  });

  it("prints the plan's JSON Schema, or the report's", async () => {
    expect(JSON.parse((await command(["schema"])).stdout)).toEqual({ title: "plan" });
    expect(JSON.parse((await command(["schema", "plan"])).stdout)).toEqual({ title: "plan" });
    expect(JSON.parse((await command(["schema", "report"])).stdout)).toEqual({ title: "report" });
    expect(JSON.parse((await command(["schema", "check"])).stdout)).toEqual({ title: "check" });
  });
});

describe("closeout demo", () => {
  let folder: string;
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), "closeout-demo-"));
  });
  afterEach(() => rm(folder, { recursive: true }));

  it("writes the plan and its log, nothing else, and reports on them into report/", async () => {
    const { status, asked } = await command(["demo", folder]);
    expect(status).toBe(0);
    expect(asked).toMatchObject([{ plan: join(folder, "plan.yaml"), options: { out: join(folder, "report") } }]);
    const plan = await readFile(join(folder, "plan.yaml"), "utf8");
    expect(plan).toBe(await readFile(new URL("../../fixtures/demo/plan.yaml", import.meta.url), "utf8"));
    expect((await readdir(folder, { recursive: true })).sort()).toEqual([
      "data",
      "data/load_test_ids.csv",
      "data/support.ndjson",
      "data/web-2026-02-23.csv.gz",
      "data/web-2026-03-02.csv.gz",
      "data/web-2026-03-09.csv.gz",
      "data/web-2026-03-16.csv.gz",
      "plan.yaml",
    ]);
  });

  it("does not overwrite a plan that is not its own", async () => {
    await writeFile(join(folder, "plan.yaml"), "experiment: mine\n");
    const { status, stderr, asked } = await command(["demo", folder]);
    expect([status, asked.length]).toEqual([2, 0]);
    expect(stderr).toContain(`${join(folder, "plan.yaml")} is not the demo's plan, or was changed since.`);
    expect(await readdir(folder)).toEqual(["plan.yaml"]);
  });
});

describe("the terminal", () => {
  const text = [
    "Fare calendar",
    "Adopt the calendar.\n13.2 of 100 visitors booked.",
    "           list  calendar\nBooked    12.0%     13.2%",
    "Data     12 checks passed\nReport   out/x/report.html\nTo paste out/x/summary.md",
  ].join("\n\n");

  it("adds accents to the conclusion, the table's head and the last labels, and changes no word", () => {
    const accents = {
      bold: (words: string) => `\x1b[1m${words}\x1b[22m`,
      dim: (words: string) => `\x1b[2m${words}\x1b[22m`,
    };
    const shown = withAccents(text, accents);
    expect(stripVTControlCharacters(shown)).toBe(text);
    expect(shown).toContain("\x1b[1mAdopt the calendar.\x1b[22m\n13.2");
    expect(shown).toContain("\x1b[2m           list  calendar\x1b[22m");
    expect(shown).toContain("\x1b[2mReport   \x1b[22mout");
    expect(shown).toContain("\x1b[2mTo paste \x1b[22mout");
  });

  it("says what is known of the progress, and nothing else", () => {
    expect(progressText({ stage: "reading rows", rows: 1_204_000, share: 0.999 })).toBe(
      "reading rows  1,204,000 rows  99%",
    );
    expect(progressText({ stage: "cells", rows: 0, share: null })).toBe("cells");
  });
});

describe("the other commands", () => {
  it("verify hands over the report and where its log lies, prints the verdict to stdout, and ends with 4 where it does not hold", async () => {
    const { status, stdout, stderr, asked } = await command(["verify", "r.html", "--base", "there", "--threads", "2"]);
    expect([status, stdout, stderr]).toEqual([4, "r.html does not hold", ""]);
    expect(asked[0]).toMatchObject({ plan: "r.html", options: { base: "there", threads: 2 } });
  });

  it("seal prints what the library says of the plan", async () => {
    expect(await command(["seal", "a.yaml"])).toMatchObject({ status: 0, stdout: "seal of a.yaml" });
  });

  it("compare takes two reports, and a file for the document", async () => {
    expect((await command(["compare", "a.json", "b.json"])).stdout).toBe("a.json against b.json, here");
    expect((await command(["compare", "a.json", "b.json", "--out", "c.html"])).stdout).toBe(
      "a.json against b.json, c.html",
    );
    expect((await command(["compare", "a.json"])).status).toBe(2);
  });

  it("report hands over the report to compare with", async () => {
    const { asked } = await command(["report", "a.yaml", "--previous", "old.json"]);
    expect(asked[0]?.options).toMatchObject({ previous: "old.json" });
  });
});
