import { describe, expect, it } from "vitest";
import { type BlindInputs, renderCheck } from "../../../src/report/check/index.ts";
import { blindSchema } from "../../../src/report/check/schema.ts";
import type { ReportInputs } from "../../../src/report/types.ts";
import { NEVER_USED } from "../../decision/words-never-used.ts";
import { adopt } from "../cases.ts";
import { everyCase } from "../every.ts";
import { hostile } from "../hostile.ts";
import { tagsOf, textOf } from "../markup.ts";

function blindOf({ plan, planText, planSha256, version, reduction, checks }: ReportInputs): BlindInputs {
  return { plan, planText, planSha256, version, reduction, checks };
}

describe.each(everyCase)("the blind check of the case %s", (_, inputs) => {
  const { html, json, terminal } = renderCheck(blindOf(inputs));
  const open = tagsOf(html).filter((tag) => !tag.closing);

  it("fits its schema and survives a file", () => {
    expect(blindSchema.safeParse(JSON.parse(JSON.stringify(json))).error).toBeUndefined();
    expect(JSON.parse(JSON.stringify(json))).toEqual(json);
  });

  it("has ids that occur once, no reference without its target, no script and no request", () => {
    const ids = open.flatMap((tag) => tag.attributes.get("id") ?? []);
    expect(new Set(ids).size).toBe(ids.length);
    const wanted = open.flatMap((tag) => [
      ...(tag.attributes.get("aria-labelledby")?.split(" ") ?? []),
      ...(tag.attributes.get("href")?.slice(1).split(" ") ?? []),
    ]);
    expect(wanted.filter((id) => !ids.includes(id))).toEqual([]);
    expect(open.map((tag) => tag.name)).not.toContain("script");
    expect(open.flatMap((tag) => tag.attributes.get("href") ?? []).every((href) => href.startsWith("#"))).toBe(true);
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

  it("prints no figure that does not exist, and shows no estimate, interval or p of an effect", () => {
    for (const text of [textOf(html), terminal("out/check.html")]) {
      expect(text).not.toMatch(/\bNaN\b|\bundefined\b|\bnull\b|\[object|Infinity/);
    }
    expect(open.map((tag) => tag.name)).not.toContain("svg");
  });

  it("wraps the terminal's lines at 100 characters", () => {
    const lines = terminal("out/check.html").split("\n");
    for (const line of lines) expect(line.length <= 100 || !line.trim().includes(" ")).toBe(true);
  });
});

it("uses none of the words that no output of ours uses", () => {
  const { json, terminal } = renderCheck(blindOf(adopt));
  const own = [...json.rule.sentences, ...json.rule.metrics.map(({ asked }) => asked), ...json.schedule.sentences];
  for (const text of [...own, ...json.withheld.flatMap(({ what, why }) => [what, why]), terminal("x")]) {
    expect(text).not.toMatch(NEVER_USED);
  }
});

it("cannot be made to move the cursor or turn into markup by a name in the plan", () => {
  const { html, terminal } = renderCheck(blindOf(hostile));
  expect(terminal("x")).not.toMatch(/[^\P{Cc}\n]|\p{Cf}/u);
  expect(html).not.toMatch(/<(script|img|iframe|b|i)\b/i);
});
