import { describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { forestTable } from "../../src/report/sections/forest.ts";
import { adopt, notSettled, several, undecidable } from "./cases.ts";
import { everyCase } from "./every.ts";
import { hostile } from "./hostile.ts";
import { sectionOf, tagsOf, textOf, unescaped } from "./markup.ts";
import { planText } from "./plans.ts";

const TAGS = new Set(
  `!doctype html head meta title style body a header div h1 h2 h3 h4 p main section figure figcaption span table caption
   thead tbody tfoot tr th td details summary dl dt dd nav ol ul li strong cite code pre br footer
   svg g path line text title desc`.split(/\s+/),
);
const ATTRIBUTES = new Set(
  `lang charset name content class href id aria-labelledby aria-hidden role scope colspan tabindex
   viewbox focusable fill stroke stroke-miterlimit stroke-width stroke-dasharray transform d x2 y2 opacity display
   text-anchor font-family font-size html`.split(/\s+/),
);

describe.each(everyCase)("the page of the case %s", async (name, inputs) => {
  const { html } = await renderReport(inputs);
  const tags = tagsOf(html);
  const open = tags.filter((tag) => !tag.closing);

  it("consists of our own elements and attributes: no script, no request, nothing that a plan or log put in", () => {
    expect([...new Set(tags.map((tag) => tag.name))].filter((tag) => !TAGS.has(tag))).toEqual([]);
    const attributes = open.flatMap((tag) => [...tag.attributes.keys()]).map((key) => key.toLowerCase());
    expect([...new Set(attributes)].filter((key) => !ATTRIBUTES.has(key))).toEqual([]);
    const links = open.map((tag) => tag.attributes.get("href")).filter((href) => href !== undefined);
    expect(links.filter((href) => !href.startsWith("#"))).toEqual([]);
    const style = /<style>(.*?)<\/style>/s.exec(html)?.[1] ?? "";
    expect(style).not.toMatch(/url\(|@import|@font-face|expression|<\/?(?!$)/);
    expect(html.match(/<style>/g)).toHaveLength(1);
  });

  it("closes every element it opens, in order", () => {
    const stack: string[] = [];
    const alone = new Set(["meta", "br", "!doctype"]);
    for (const tag of tags) {
      if (alone.has(tag.name) || tag.empty) continue;
      if (tag.closing) expect(stack.pop()).toBe(tag.name);
      else stack.push(tag.name);
    }
    expect(stack).toEqual([]);
  });

  it("has ids that occur once, and no reference without its target", () => {
    const ids = open.map((tag) => tag.attributes.get("id")).filter((id) => id !== undefined);
    expect(new Set(ids).size).toBe(ids.length);
    const wanted = open.flatMap((tag) => [
      ...(tag.attributes.get("aria-labelledby")?.split(" ") ?? []),
      ...(tag.attributes.get("href")?.slice(1).split(" ") ?? []),
    ]);
    expect(wanted.filter((id) => !ids.includes(id))).toEqual([]);
  });

  it("has one h1, headings in order, a caption or name for each table and a scope for each head cell", () => {
    const levels = open.flatMap((tag) => (/^h[1-6]$/.test(tag.name) ? [Number(tag.name[1])] : []));
    expect(levels.filter((level) => level === 1)).toEqual([1]);
    levels.forEach((level, i) => {
      if (i > 0) expect(level).toBeLessThanOrEqual((levels[i - 1] ?? 0) + 1);
    });
    const tables = open.filter((tag) => tag.name === "table");
    const captions = open.filter((tag) => tag.name === "caption").length;
    expect(tables.filter((tag) => tag.attributes.has("aria-labelledby")).length + captions).toBe(tables.length);
    expect(open.filter((tag) => tag.name === "th" && !tag.attributes.has("scope"))).toEqual([]);
  });

  it("prints no figure that does not exist", () => {
    expect(textOf(html)).not.toMatch(/\bNaN\b|\bundefined\b|\bnull\b|\[object|Infinity/);
  });

  // "whose interval excludes no difference": no difference is excluded, or that of zero is
  it('says zero, where "no difference" after a verb could be read two ways', () => {
    expect(textOf(html)).not.toMatch(
      /no difference (lies|stands)|(exclud|touch|hold|leave|above|below|of)\w* no difference/i,
    );
  });

  // "calendar" of the log stood as "Calendar" in titles: another value, where a log has both
  it("shows the name of a variant as it is, at the head of a sentence too", () => {
    const names = inputs.plan.variants.map((variant) => variant.name).filter((own) => /^[a-z]+$/.test(own));
    const capitals = names.map((own) => `${own[0]?.toUpperCase()}${own.slice(1)}`);
    expect(textOf(html).match(new RegExp(`\\b(${["Nobody", ...capitals].join("|")})\\b`))?.[0]).toBeUndefined();
  });

  it("repeats to the byte", async () => {
    expect((await renderReport(inputs)).files).toEqual((await renderReport(inputs)).files);
    expect(name).not.toBe("");
  });
});

describe("the page", () => {
  it("is numbered as every report is: a first report has no section 2", async () => {
    const { html } = await renderReport(adopt);
    const heads = [...html.matchAll(/<h2 id="[^"]*"><span class="number">(\d)<\/span> ([^<]*)</g)].map(
      ([, n, title]) => `${n} ${title}`,
    );
    expect(heads).toEqual([
      "1 Decision",
      "3 Can the data be trusted?",
      "4 Who was counted",
      "5 Each measure",
      "6 Power and the next test",
      "7 Methods, sources, cautions",
    ]);
  });

  it("answers the owner's questions in their order: what to do, by how much, asked for, worse, amount, trust, counted, limits", async () => {
    const page = textOf(sectionOf((await renderReport(adopt)).html, "decision"));
    const order = [
      "Adopt the calendar.",
      "Booked: 13.2 of 100 visitors with \u201ccalendar\u201d and 12.0 with \u201clist\u201d, 10.0% more (95% interval: 6.5% to 13.7% more).",
      "Asked for: at least 5% more.",
      "Must not get worse: Support contacts, limit 5% more.",
      "12.0% \u2192 13.2%",
      "+10.0% (+6.5% to +13.7%)",
      "Booked: for every 1,000 visitors with \u201ccalendar\u201d instead of \u201clist\u201d about 12 more",
      "Can the data be trusted?",
      "Counted: 100,301 of 104,512 visitors. The other 4,211 are listed by reason in section 4.",
      "Not answered by this test: other seasons than March, and visitors who return after more than 7 days.",
    ];
    const places = order.map((sentence) => page.indexOf(sentence));
    expect(places.filter((place) => place < 0)).toEqual([]);
    expect(places).toEqual([...places].sort((a, b) => a - b));
  });

  it("groups the forest plot by what a measure is for", async () => {
    const page = textOf(sectionOf((await renderReport(notSettled)).html, "decision"));
    expect(page).toMatch(
      /decides .*Booked .*asked \+5%: not settled .*must not get worse .*Support contacts .*limit \+5%: not settled .*for information .*Fare per visitor/,
    );
  });

  // "The filter "a" removed 4,032 rows" stood for four filters
  it("names what else a check looked at that passed", async () => {
    const part = { result: "pass", remedy: "", figures: {} } as const;
    const check = {
      ...part,
      id: "filters",
      strong: false,
      sentence: 'The filter "a" removed 4 rows.',
      parts: [
        { ...part, about: "a", sentence: 'The filter "a" removed 4 rows.' },
        { ...part, about: "b", sentence: 'The filter "b" removed 2 rows.' },
        { ...part, about: "c, of rows", sentence: 'The filter "c, of rows" removed 1 row.' },
      ],
    };
    const trust = textOf(sectionOf((await renderReport({ ...adopt, checks: [check] })).html, "trust"));
    expect(trust).toContain("The filter \u201ca\u201d removed 4 rows. Passed too: b; c, of rows.");
  });

  it("names one variant of several with its measure wherever a part is of it alone", async () => {
    const { html } = await renderReport(several);
    expect(textOf(sectionOf(html, "decision"))).toContain("must not get worse hold for all 3 variants together.");
    const variants = several.plan.variants.slice(0, 3);
    const two = await forestTable(
      several.effects.filter(({ variant }) => variant !== "map with fares"),
      { ...several.plan, variants },
    );
    expect(two.reading).toContain("must not get worse hold for both variants together.");
    const measures = textOf(sectionOf(html, "metrics"));
    expect(measures).toContain("Booked with \u201ccalendar\u201d: what would change it, and what it amounts to");
    expect(measures).not.toMatch(/Booked, (calendar|map)[,:]/);
  });

  it("gives a measure whose relative difference is not shown a row of text with its absolute interval", async () => {
    const page = textOf(sectionOf((await renderReport(several)).html, "decision"));
    expect(page).toMatch(/calendar 0\.4100 \u2192 1\.9600 kr relative: not shown \+1\.6 kr \(\u22123\.1 to \+6\.2\)/);
  });

  it("shows no estimate and no picture on page one when nothing can be decided, and says so behind it", async () => {
    const { html } = await renderReport(undecidable);
    const first = sectionOf(html, "decision");
    expect(first).not.toMatch(/<svg|<figure/);
    expect(textOf(first)).not.toMatch(/13\.2|10\.0%|interval/);
    expect(textOf(sectionOf(html, "metrics"))).toMatch(/^ 5 Each measure For finding the fault, not for deciding\./);
    expect(textOf(sectionOf(html, "trust"))).toMatch(/Groups of the planned size: failed/);
  });

  it("gives every ledger line with its count, and the counts of report.json", async () => {
    const { html, json } = await renderReport(several);
    // the page has curly quotes where report.json has straight ones
    const counted = textOf(sectionOf(html, "counted")).replace(/[\u201c\u201d]/g, '"');
    for (const { line, rows } of json.flow.rows) expect(counted).toContain(`${line} ${rows.toLocaleString("en-US")}`);
    for (const { id, line, units, byVariant } of json.flow.units) {
      const cells = Object.values(byVariant ?? {}).map((n) => n.toLocaleString("en-US"));
      expect(counted).toContain(
        [id === "analysed" ? "Counted" : line, ...cells, units.toLocaleString("en-US")].join(" "),
      );
    }
  });

  it("shows in the table behind the picture the figures of report.json, to six digits, and p as everywhere", async () => {
    const { html, json } = await renderReport(several);
    const [, table = ""] = /<table class="numbers">\s*<caption id="forest-numbers">(.*?)<\/table>/s.exec(html) ?? [];
    const rows = [...table.matchAll(/<tr><th scope="row">(.*?)<\/tr>/g)].map(([, row = ""]) =>
      [...row.matchAll(/<td class="number">(.*?)<\/td>/g)].map(([, cell = ""]) => cell),
    );
    expect(rows).toHaveLength(json.effects.length);
    json.effects.forEach(({ arms, difference, relative }, i) => {
      const figures = [
        arms.control.mean,
        arms.variant.mean,
        difference.estimate,
        difference.low,
        difference.high,
        relative?.estimate,
        relative?.low,
        relative?.high,
      ];
      const shown = (rows[i] ?? []).map((cell) =>
        cell === "\u2013" ? null : Number(cell.replace("\u2212", "-").replaceAll(",", "")),
      );
      figures.forEach((figure, f) => {
        if (figure === null || figure === undefined) expect(shown[f]).toBeNull();
        else expect(shown[f]).toBe(Number(figure.toPrecision(6)));
      });
      const p = unescaped(rows[i]?.[8] ?? "");
      if (difference.p === null) expect(p).toBe("\u2013");
      else if (difference.p < 0.0001) expect(p).toBe("< 0.0001");
      else expect(Math.abs(Number(p) / difference.p - 1)).toBeLessThan(0.05);
    });
  });

  it("holds the plan word for word, also a hostile one", async () => {
    for (const [inputs, wanted] of [
      [adopt, planText],
      [hostile, hostile.planText],
    ] as const) {
      const [, pre = ""] = /<pre[^>]*>(.*?)<\/pre>/s.exec((await renderReport(inputs)).html) ?? [];
      expect(unescaped(pre)).toBe(wanted);
    }
  });

  it("lets no name turn the figures behind it around: the plan alone keeps its control characters, in a block of its own", async () => {
    const { html } = await renderReport(hostile);
    const outside = html.replace(/<pre.*?<\/pre>/s, "");
    expect(outside).not.toMatch(/[^\P{Cc}\n\t]|[\u202a-\u202e\u2066-\u2069]/u);
    expect(html).toContain("\u202e");
  });

  it("names each file of the log and of lists with its whole fingerprint", async () => {
    const page = textOf(sectionOf((await renderReport(adopt)).html, "methods"));
    for (const { name, sha256 } of adopt.reduction.inputs) expect(page).toMatch(new RegExp(`${name} .*${sha256}`));
    expect(page).toContain(adopt.planSha256);
    expect(page).toContain("duckdb 1.5.6");
  });

  it("carries the cautions of every report", async () => {
    const page = textOf(sectionOf((await renderReport(adopt)).html, "methods"));
    for (const words of [
      "not the whole decision",
      "event logs are personal data",
      "clinical",
      "before the planned end",
      "do not decide",
    ]) {
      expect(page).toContain(words);
    }
  });
});

/** PAGES: words that no output of ours uses. */
const FORBIDDEN =
  /\b(lift|uplift|winner|loser|champion|chance to beat|probability to be best|conversion|exposure|scorecard|health|segment|ship|roll out|traffic|variation|stat sig|improvement|baseline)s?\b/i;

describe("our own words, in every file and on the terminal,", () => {
  it.each(everyCase)("avoid those that the trade wears out: %s", async (_, inputs) => {
    const { html, files, terminal } = await renderReport(inputs);
    const texts = [
      textOf(html),
      terminal({ report: "", summary: "" }),
      ...files.filter(({ name }) => !name.endsWith(".html")).map(({ text }) => text),
    ];
    for (const text of texts) expect(FORBIDDEN.exec(text)?.[0]).toBeUndefined();
  });
});

describe("why rows were rejected", () => {
  it("calls a unit what the plan calls it on the page, whatever the files call it", async () => {
    const rejectReasons = [
      { reason: "no unit", rows: 1_204 },
      { reason: "not a number: fare", rows: 11 },
    ];
    const { html } = await renderReport({ ...adopt, reduction: { ...adopt.reduction, rejectReasons } });
    const section = textOf(sectionOf(html, "counted"));
    expect(section).toMatch(/1,204: no visitor\s+11: not a number: fare/);
    expect(section).not.toContain("no unit");
  });
});
