import { describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { adopt, little } from "./cases.ts";
import { everyCase } from "./every.ts";
import { grouped } from "./groups.ts";
import { sectionOf, textOf } from "./markup.ts";
import { atALook, meanwhile } from "./meanwhile.ts";
import { secondRun, thirdRun } from "./rerun-case.ts";

/** CONSORT 2010, table 1 of Schulz, Altman and Moher, BMJ 340:c332: its 37 items with their letters. */
const ITEMS_2010 =
  "1a 1b 2a 2b 3a 3b 4a 4b 5 6a 6b 7a 7b 8a 8b 9 10 11a 11b 12a 12b 13a 13b 14a 14b 15 16 17a 17b 18 19 20 21 22 23 24 25";
/** CONSORT 2025, table 1 of Hopewell and others, BMJ 389:e081123: its items with their letters. */
const ITEMS_2025 =
  "1a 1b 2 3 4 5a 5b 6 7 8 9 10 11 12a 12b 13 14 15 16a 16b 17a 17b 18 19 20a 20b 21a 21b 21c 21d 22a 22b 23a 23b 24a 24b 25 26 27 28 29 30";

async function rowsOf(inputs: typeof adopt): Promise<{ cells: string[]; row: string }[]> {
  const { html } = await renderReport(inputs);
  const table = /<table class="numbers consort">.*?<\/table>/s.exec(html)?.[0] ?? "";
  return [...table.matchAll(/<tr>(.*?)<\/tr>/gs)].slice(1).map(([, row = ""]) => ({
    row,
    cells: [...row.matchAll(/<t[dh][^>]*>(.*?)<\/t[dh]>/gs)].map(([, cell = ""]) => textOf(cell).trim()),
  }));
}
const items = (cells: readonly string[]) => cells.flatMap((cell) => (cell === "" ? [] : cell.split(", ")));

describe("the table of CONSORT's items", () => {
  it("has every item of 2010, once", async () => {
    const rows = await rowsOf(adopt);
    expect(items(rows.map(({ cells }) => cells[0] ?? "")).sort()).toEqual(ITEMS_2010.split(" ").sort());
  });

  it("has every item of 2025, or names it among those that no online experiment has", async () => {
    const rows = await rowsOf(adopt);
    const text = textOf((await renderReport(adopt)).html);
    const leftOut = /\(2025: ([^)]*)\)/.exec(text)?.[1]?.split(", ") ?? [];
    const all = [...new Set(items(rows.map(({ cells }) => cells[1] ?? ""))), ...leftOut];
    expect(all.sort()).toEqual(ITEMS_2025.split(" ").sort());
  });

  it.each(everyCase)("leads to a place for each item, or says that it is not stated (%s)", async (_, inputs) => {
    for (const { row, cells } of await rowsOf(inputs)) {
      expect(row.includes('<a href="#') ? "" : (cells[3] ?? "")).toMatch(/^(not stated.*)?$/);
    }
  });

  it("marks what the plan did not say", async () => {
    const missing = async (inputs: typeof adopt) =>
      (await rowsOf(inputs))
        .filter(({ cells }) => cells[3]?.startsWith("not stated"))
        .map(({ cells }) => cells[0] || cells[1]);
    const full = {
      ...adopt,
      plan: { ...adopt.plan, texts: { ...adopt.plan.texts, ended: "it was over", owner: "team" } },
    };
    expect(await missing(full)).not.toContain("14b");
    expect(await missing(full)).not.toContain("25");
    const empty = {
      ...little,
      plan: {
        ...little.plan,
        plannedUnits: null,
        variants: little.plan.variants.map((one) => ({ ...one, what: null })),
      },
    };
    expect(await missing(empty)).toEqual(expect.arrayContaining(["5", "7a", "8a", "14b", "15", "23", "25", "5b"]));
  });

  const itemOf = async (item: string, inputs: typeof adopt) => {
    const found = (await rowsOf(inputs)).find(({ cells }) => cells[1] === item);
    return { link: /href="#([^"]*)"/.exec(found?.row ?? "")?.[1] ?? null, text: found?.cells[3] ?? "" };
  };

  it("leads to what changed on a rerun, with how much of the plan and of the rule", async () => {
    expect((await itemOf("10", adopt)).link).toBe("plan");
    expect(await itemOf("10", secondRun)).toEqual({
      link: "changes",
      text: "2 What changed: of the plan since the report before, 1 place; of the rule since the first run, none",
    });
    expect((await itemOf("10", thirdRun)).text).toMatch(/of the rule since the first run, \d+ places?$/);
  });

  it("states the registration where the rule was kept before the start", async () => {
    const registered = { on: "2026-02-20", where: "the team\u2019s wiki", fingerprint: "ab12 cd34" };
    const link = "https://ferry.example/plan";
    const withPlan = (more: object) => ({ ...adopt, plan: { ...adopt.plan, ...more } });
    const none = withPlan({ texts: { ...adopt.plan.texts, link: null } });
    expect((await itemOf("2", none)).text).toBe("not stated");
    const kept = withPlan({ registered, texts: { ...adopt.plan.texts, link } });
    expect(await itemOf("2", kept)).toEqual({
      link: "facts",
      text: "7 From what: the rule, kept before the start: 2026-02-20, the team\u2019s wiki; link of the plan",
    });
    const alone = withPlan({ registered, texts: { ...adopt.plan.texts, link: null } });
    expect(await itemOf("2", alone)).toEqual({
      link: "facts",
      text: "7 From what: the rule, kept before the start: 2026-02-20, the team\u2019s wiki",
    });
    expect((await itemOf("10", kept)).text).toContain("whether its rule is the one that was kept before the start");
  });

  it("names the looks that were planned, or that there are none", async () => {
    expect((await itemOf("16b", adopt)).text).toBe("7 Cautions: the plan names none");
    expect((await itemOf("16b", atALook)).link).toBe("method-planned-looks");
  });
});

describe("what was planned", () => {
  it("tells what each group was to be given, its share, who could be enrolled, and how long each was followed", async () => {
    const text = textOf(sectionOf((await renderReport(adopt)).html, "counted"));
    expect(text).toContain("calendar a month of fares at a glance 1 of 2");
    expect(text).toContain("For 7 days from enrolment; visitors not followed to the end are left out.");
    expect(text).toContain("by the first \u201csearch_opened\u201d row");
  });

  it("keeps what the plan names apart from what every report adds", async () => {
    const text = textOf(sectionOf((await renderReport(adopt)).html, "methods"));
    const [planned = "", added = ""] = text.split("Not named in the plan;");
    expect(planned).toContain("Every measure with its role");
    expect(added).toContain("Other reasonable choices");
    expect(planned.slice(planned.indexOf("Named in the plan"))).not.toContain("Other reasonable choices");
  });

  const unplannedOf = async (inputs: typeof adopt) => {
    const html = sectionOf((await renderReport(inputs)).html, "methods");
    return html.slice(html.indexOf('id="unplanned"'), html.indexOf('id="computed"'));
  };
  const [BESIDE, APART] = ["Not named in the plan;", "Asked afterwards, not planned"] as const;

  it("names subgroups, looks and incidents among what was planned", async () => {
    const plan = { ...grouped.plan, subgroups: ["country", "platform"] };
    const [planned = ""] = textOf(await unplannedOf({ ...grouped, plan })).split(BESIDE);
    expect(planned).toContain("by \u201ccountry\u201d and \u201cplatform\u201d at enrolment");
    expect(textOf(await unplannedOf(atALook)).split(BESIDE)[0]).toMatch(
      /Looks, at [\d%, and]+ of the planned size: this is look \d,/,
    );
    const [happened = ""] = textOf(await unplannedOf(meanwhile)).split(BESIDE);
    expect(happened).toContain("at the end of section 3: \u201cpayment outage\u201d and \u201cstrike\u201d");
    const [alone = ""] = textOf(await unplannedOf(adopt)).split(BESIDE);
    expect(alone).not.toMatch(/Subgroups|Looks|meanwhile/);
  });

  it("names how the difference came about among what every report adds, where the report has it", async () => {
    const added = async (inputs: typeof adopt) => textOf(await unplannedOf(inputs)).split(BESIDE)[1] ?? "";
    expect(await added(grouped)).toContain(
      "How each difference came about: as visitors enrolled (with a band that holds on all days) and by day since enrolment.",
    );
    expect(await added(adopt)).not.toContain("came about");
  });

  it("keeps what was asked afterwards apart, with a link to it", async () => {
    const metric = adopt.plan.metrics[2];
    if (metric === undefined) throw new Error("the plan has three measures");
    const askedAfterwards = { subgroups: ["platform"], metrics: [metric], columns: [], numericColumns: [] };
    const html = await unplannedOf({ ...grouped, plan: { ...grouped.plan, askedAfterwards } });
    const [before = "", apart = ""] = html.split(`<a href="#afterwards">${APART}</a>`);
    expect(textOf(apart)).toMatch(
      /^: \u201cFare per visitor\u201d and subgroups by \u201cplatform\u201d\. None of it decides/,
    );
    expect(textOf(before)).not.toContain("platform");
    expect(await unplannedOf(adopt)).not.toContain(APART);
  });
});
