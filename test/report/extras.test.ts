import { mkdir, mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { lyingExtras } from "../../src/report/extra-names.ts";
import { figureFiles } from "../../src/report/figures/files.ts";
import { renderReport, reportJson } from "../../src/report/index.ts";
import { page } from "../../src/report/page.ts";
import { cssText } from "../../src/report/render.ts";
import { adopt, notSettled, several, undecidable } from "./cases.ts";
import { everyCase } from "./every.ts";
import { grouped } from "./groups.ts";
import { tagsOf, textOf } from "./markup.ts";
import { secondRun } from "./rerun-case.ts";

async function extrasOf(inputs: typeof adopt): Promise<Map<string, string>> {
  return new Map((await renderReport(inputs)).extras().map(({ name, text }) => [name, text]));
}
const get = (files: Map<string, string>, name: string) => files.get(name) ?? `no ${name}`;

describe.each(everyCase)("what --figures adds to the report of the case %s", async (_, inputs) => {
  const files = await extrasOf(inputs);
  const svgs = [...files].filter(([name]) => name.endsWith(".svg"));

  it("has page one, the line of the decision, and the figures", () => {
    expect([...files.keys()].filter((name) => !name.startsWith("figures/"))).toEqual(["page-one.html", "decision.csv"]);
    expect(files.has("figures/flow.svg")).toBe(true);
    expect(files.has("figures/forest.svg")).toBe(
      inputs.conclusion.decision !== "undecidable" && inputs.effects.length > 0,
    );
  });

  it("has the estimates before and after, where the report replaces one", () => {
    expect(files.has("figures/before-after.svg")).toBe(inputs.rerun !== undefined);
  });

  // a figure goes where the sentence at the head of its section does not follow
  it("says in every figure of an effect that it is not for deciding, where nothing can be decided", () => {
    const ofEffects = svgs.filter(([file]) => !/(flow|allocation|shape)/.test(file));
    for (const [file, svg] of ofEffects) {
      expect(textOf(svg).includes("for finding the fault, not for deciding"), file).toBe(
        inputs.conclusion.decision === "undecidable",
      );
    }
  });

  it.each(svgs)("gives %s as one drawing that asks for nothing and runs nothing", (_name, svg) => {
    expect(svg).toMatch(/^<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg" viewBox="0 0 \d+ [\d.]+" width="\d+"/);
    const tags = tagsOf(svg);
    const known = "svg title desc rect g path line text".split(" ");
    expect(tags.map(({ name }) => name).filter((name) => !known.includes(name))).toEqual([]);
    expect(
      tags.flatMap(({ attributes }) => [...attributes.keys()]).filter((key) => /^(on|href|src|xlink)/i.test(key)),
    ).toEqual([]);
    expect(svg).not.toMatch(/NaN|undefined|url\((?!#)/);
    const ids = tags.flatMap(({ attributes }) => attributes.get("id") ?? []);
    expect(new Set(ids).size).toBe(ids.length);
    const open: string[] = [];
    for (const tag of tags) {
      if (tag.closing) expect(open.pop()).toBe(tag.name);
      else if (!tag.empty) open.push(tag.name);
    }
    expect(open).toEqual([]);
  });

  it("has a page one without links to pages that are not there", () => {
    const tags = tagsOf(get(files, "page-one.html"));
    const ids = tags.flatMap(({ attributes }) => attributes.get("id") ?? []);
    const links = tags.flatMap(({ attributes }) => attributes.get("href") ?? []);
    expect(links.filter((href) => !ids.includes(href.slice(1)))).toEqual([]);
    expect(tags.some(({ name }) => name === "script" || name === "details")).toBe(false);
  });
});

describe("the figures of days and subgroups", async () => {
  const files = await extrasOf(grouped);

  it("are those that the report draws: of what decides, and of what was asked afterwards", () => {
    const own = [...files.keys()].filter((name) => /accrual|days|subgroup|afterwards/.test(name));
    // "Fare per visitor" is for information, "Support contacts" is shown on no day
    expect(own.sort()).toEqual(["accrual-1", "afterwards-1", "days-1", "subgroup-1"].map((id) => `figures/${id}.svg`));
  });

  it("have the report's words", async () => {
    const text = textOf((await renderReport(grouped)).html);
    for (const name of ["accrual-1", "days-1", "afterwards-1", "subgroup-1"]) {
      const svg = textOf(get(files, `figures/${name}.svg`));
      const [first = ""] = /^.*?(?=\.|, as |, by |: )/.exec(svg.trim()) ?? [];
      expect(first).not.toBe("");
      expect(text).toContain(first);
    }
    expect(textOf(get(files, "figures/subgroup-1.svg"))).toContain("Does not point against the whole.");
    expect(textOf(get(files, "figures/days-1.svg"))).toContain("days since enrolment");
  });
});

describe("the estimates before and after, as a file,", () => {
  it("name each run, and stand one above the other with their intervals", async () => {
    const svg = textOf(get(await extrasOf(secondRun), "figures/before-after.svg"));
    expect(svg).toMatch(
      /Booked \+10\.8% \(\+7\.3% to \+14\.4%\) first run Booked \+10\.0% \(\+6\.5% to \+13\.7%\) now/,
    );
    expect(svg).toContain("Upper line of each pair, dashed: the first run.");
  });
});

describe("a long name of a measure", () => {
  // two variants' rows read "Seconds until the page shows, 95th percentile…" both
  it("is cut before the variant that tells two rows of the picture apart", async () => {
    const metric = "Seconds until the search page shows, the 95th percentile";
    const row = { metric, run: "now", isNow: true, drawing: null, estimate: "+1%", interval: "" };
    const rows = ["calendar", "map"].map((variant) => ({ ...row, variant: ` with "${variant}"` }));
    const whole = await page(secondRun, reportJson(secondRun).changes);
    if (whole.changes === null) throw new Error("a second run without changes");
    const figure = { ...whole.changes.figure, rows };
    const files = figureFiles({ ...whole, changes: { ...whole.changes, figure } });
    const text = textOf(files.find(({ name }) => name === "figures/before-after.svg")?.text ?? "");
    for (const variant of ["calendar", "map"]) expect(text).toMatch(new RegExp(`Seconds [^…]*… with "${variant}"`));
  });
});

describe("page one alone", () => {
  it("says what the report says first, and whose it is", async () => {
    const { html, json } = await renderReport(adopt);
    const text = textOf(get(await extrasOf(adopt), "page-one.html"));
    expect(text).toContain(json.conclusion.sentence.replace(/"([^"]*)"/g, "\u201c$1\u201d"));
    expect(text).toMatch(/Report [0-9a-f]{4} [0-9a-f]{4}, closeout/);
    expect(textOf(html)).toContain(text.slice(text.indexOf("Asked for"), text.indexOf("Asked for") + 200));
  });

  it("has as many rows of the forest plot as a sheet holds, and says how many more there are", async () => {
    const long = { ...several, effects: Array.from({ length: 4 }, () => several.effects).flat() };
    const html = get(await extrasOf(long), "page-one.html");
    const rows = html.match(/class="figures" role="cell"/g)?.length ?? 0;
    expect(rows).toBeGreaterThanOrEqual(3);
    expect(rows).toBeLessThan(20);
    expect(textOf(html)).toContain(`The report has ${long.effects.length - rows} more rows.`);
  });

  it("has all rows where they fit", async () => {
    const html = get(await extrasOf(adopt), "page-one.html");
    expect(html.match(/class="figures" role="cell"/g)).toHaveLength(adopt.effects.length);
    expect(textOf(html)).not.toContain("The report has");
  });
});

describe("decision.csv", () => {
  const cells = async (inputs: typeof adopt) =>
    get(await extrasOf(inputs), "decision.csv")
      .split("\r\n")[1]
      ?.split(",") ?? [];

  it("has one line: experiment, dates, decision, estimate with its interval, fingerprint", async () => {
    const line = await cells(adopt);
    expect(line.slice(0, 6)).toEqual([
      "Fare calendar on the search page",
      "2026-03-02",
      "2026-03-15",
      "adopt",
      "calendar",
      "Booked",
    ]);
    // PAGES: 10.0% more, 6.5% to 13.7%
    expect(line.slice(6, 9).map((figure) => (100 * Number(figure)).toFixed(1))).toEqual(["10.0", "6.5", "13.7"]);
    expect(line[9]).toBe("relative");
    expect(line[10]).toMatch(/^[0-9a-f]{64}$/);
  });

  it("has an estimate where nothing is settled, and none where nothing can be decided", async () => {
    expect((await cells(notSettled))[3]).toBe("not-settled");
    expect((await cells(notSettled))[6]).not.toBe("");
    expect((await cells(undecidable)).slice(3, 10)).toEqual(["undecidable", "calendar", "", "", "", "", ""]);
  });

  it("hands no formula to a spreadsheet", async () => {
    const named = (experiment: string) => ({ ...adopt, plan: { ...adopt.plan, experiment } });
    expect((await cells(named("=1+1")))[0]).toBe("'=1+1");
    expect((await cells(named("@x")))[0]).toBe("'@x");
    expect((await cells(named("-5 degrees")))[0]).toBe("-5 degrees");
  });
});

describe("the files of an earlier run in a report's folder", () => {
  let folder: string;
  beforeEach(async () => {
    folder = await mkdtemp(path.join(tmpdir(), "closeout-extras-"));
    await mkdir(path.join(folder, "figures"));
  });
  afterEach(() => rm(folder, { recursive: true, force: true }));
  const write = async (names: readonly string[]) => {
    for (const name of names) await writeFile(path.join(folder, name), "");
  };

  it.each(everyCase)("are found whatever figure they are (%s)", async (_, inputs) => {
    const names = (await renderReport(inputs)).extras().map(({ name }) => name);
    await write(names);
    expect((await lyingExtras(folder)).sort()).toEqual([...names].sort());
  });

  it("are told from what else lies there", async () => {
    await write(["report.html", "notes.csv", "figures/mine.svg", "figures/flow.svg.bak", "figures/flow.svg"]);
    await mkdir(path.join(folder, "figures", "days-1.svg"));
    expect(await lyingExtras(folder)).toEqual(["figures/flow.svg"]);
    await rm(path.join(folder, "figures"), { recursive: true });
    expect(await lyingExtras(folder)).toEqual([]);
  });
});

describe("the name at the head of printed pages", () => {
  it("cannot end its string, its rule or the style sheet, whatever the plan calls the test", () => {
    expect(cssText('a"; } </style>')).toBe("a\\22 \\3b  \\7d  \\3c \\2f style\\3e ");
    expect(cssText("\u65e5\u672c")).toBe("\\65e5 \\672c ");
    expect(cssText("x\n\\")).toBe("x \\5c ");
  });

  it("is cut where the page is too narrow for it", () => {
    expect(cssText("a".repeat(200))).toBe(`${"a".repeat(79)}\\2026 `);
  });
});
