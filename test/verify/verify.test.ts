import { readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { verify } from "../../src/index.ts";
import { type Bench, bench, LOG, PLAN, STAFF } from "../rerun/small.ts";

let on: Bench;
let html: string;
let file: string;
beforeAll(async () => {
  on = bench();
  const outcome = await on.run(`${PLAN + STAFF}owner: sign team <&"'\`=>\n`);
  if (outcome.status !== 0) throw new Error(outcome.text);
  file = join(on.report, "report.html");
  html = readFileSync(file, "utf8");
});
afterAll(() => on.remove());

/** The verdict on a page that was changed; the page is put back. */
async function edited(change: (html: string) => string) {
  const other = change(html);
  expect(other).not.toBe(html);
  writeFileSync(file, other);
  try {
    return await verify(file);
  } finally {
    writeFileSync(file, html);
  }
}

describe("a report as it was written", () => {
  it("holds, and what lies beside it too", async () => {
    const { status, text } = await verify(file);
    expect(text).toMatch(/report\.html holds\.\nRecomputed from 1 file of the log \(600 rows\)/);
    expect(text).toContain("report.json, effects.csv, summary.md and cells.json beside it are the same");
    expect(status).toBe(0);
  });

  it("holds alone, in another folder, when it is told where the log lies", async () => {
    const alone = bench();
    rmSync(join(alone.folder, "log.csv"));
    writeFileSync(join(alone.folder, "sent.html"), html);
    expect(await verify(join(alone.folder, "sent.html"))).toMatchObject({
      status: 2,
      text: expect.stringContaining("--base DIR"),
    });
    expect(await verify(join(alone.folder, "sent.html"), { base: alone.folder })).toEqual({
      status: 2,
      text: `${alone.folder}, which --base names, does not hold what the plan names: log.csv. Name the folder that the plan lay in.`,
    });
    const none = join(alone.folder, "none");
    expect(await verify(join(alone.folder, "sent.html"), { base: none })).toEqual({
      status: 2,
      text: `${none}, which --base names, is no folder. Name the folder that the plan lay in.`,
    });
    expect(await verify(join(alone.folder, "sent.html"), { base: on.folder })).toMatchObject({ status: 0 });
    alone.remove();
  });
});

describe("a report that was changed by hand", () => {
  it.each([
    ["a number in a sentence", /(Stopped: )(\d)/, "$19", "a number differs", "section 1"],
    ["a sentence", "Even the least", "Nearly the least", "words differ", "section 1"],
    ["a sentence that is gone", /<p>Asked for:[^<]*<\/p>\n/, "", "words differ|missing in the report", "section 1"],
    [
      "a sentence that is added",
      "</dl>\n</section>",
      "<p>Approved.</p>\n</dl>\n</section>",
      "added to the report|words differ",
      "section 1",
    ],
    ["a number in a table", /(<td class="number">)300(<\/td>)/, "$1301$2", "a number differs", "section 4"],
    ["the title", /<title>[^<]*/, "<title>Another", "words differ", "head"],
    ["a drawing", /(<path[^>]* d="M)/, "$11", "a drawing", "section 1"],
    [
      "the style, to hide a part",
      "</style>",
      ".answers { display: none }\n</style>",
      "added|the page itself|words differ",
      "head",
    ],
    [
      "an element that does something",
      "</footer>",
      "</footer>\n<script>alert(1)</script>",
      "the page itself|added",
      "",
    ],
    ["the fingerprint of the plan", /(SHA-256<\/dt> <dd>)[0-9a-f]{4}/, "$1abcd", "differs?", "section 7"],
    ["the plan inside, in a comment", "question: Do more", "question:  Do more", "differs?", "section 7"],
    ["the rule inside the plan", "worthwhile: {relative: 5%}", "worthwhile: {relative: 3%}", "differs?", "section 1"],
  ])("does not hold with %s changed, and says what and where", async (_, from, to, what, where) => {
    const { status, text } = await edited((page) => page.replace(from, to));
    expect(text).toMatch(/does not hold: \d+ differences?\./);
    expect(text).toMatch(new RegExp(what));
    expect(text.toLowerCase()).toContain(where);
    expect(status).toBe(4);
  });

  // Every digit and every word of the page is part of the text that is compared; these are the ones one might forget.
  it("does not hold with any one visible letter or digit changed, wherever it stands", async () => {
    const body = html.indexOf("<body>");
    const letters = [...html.slice(body).matchAll(/[A-Za-z0-9](?=[^<>]*<)/g)].map(({ index }) => index + body);
    for (const share of [0.01, 0.2, 0.4, 0.6, 0.8, 0.99]) {
      const at = letters[Math.floor(share * letters.length)] ?? 0;
      const other = html[at] === "7" ? "3" : "7";
      expect(
        (await edited((page) => page.slice(0, at) + other + page.slice(at + 1))).status,
        html.slice(at - 30, at + 30),
      ).toBe(4);
    }
  });

  it("does not hold when the plan inside makes no report any more", async () => {
    const { status, text } = await edited((page) => page.replace("summary: proportion", "summary: proportions"));
    expect(status).toBe(4);
    expect(text).toContain("the plan inside it makes no report");
  });

  it("is no report without its plan", async () => {
    expect(await edited((page) => page.replace(/<pre[^>]*>[^<]*<\/pre>/, ""))).toMatchObject({ status: 2 });
    expect(await verify(join(on.folder, "log.csv"))).toMatchObject({ status: 2 });
    expect(await verify(join(on.folder, "nothing.html"))).toMatchObject({ status: 2 });
  });

  it("does not hold when report.json beside it says otherwise", async () => {
    const beside = join(on.report, "report.json");
    const json = readFileSync(beside, "utf8");
    writeFileSync(beside, json.replace(/"rowsRead": 600/, '"rowsRead": 601'));
    const { status, text } = await verify(file);
    writeFileSync(beside, json);
    expect(status).toBe(4);
    expect(text).toMatch(
      /report\.json beside it, line \d+\. In the file: \u201c"rowsRead": 601,\u201d\. Recomputed: \u201c"rowsRead": 600,\u201d/,
    );
  });
});

describe("a file beside a report that is one long line", () => {
  it("is shown where it differs, not by its beginning", async () => {
    const beside = join(on.report, "cells.json");
    const json = readFileSync(beside, "utf8");
    const at = json.lastIndexOf("1");
    writeFileSync(beside, `${json.slice(0, at)}2${json.slice(at + 1)}`);
    const { status, text } = await verify(file);
    writeFileSync(beside, json);
    expect(status).toBe(4);
    const [, given = "", made = ""] =
      /cells\.json beside it, line \d+\. In the file: \u201c(.*)\u201d\. Recomputed: \u201c(.*)\u201d/.exec(text) ?? [];
    expect([given.length > 10, given.length < 200, given === made]).toEqual([true, true, false]);
  });
});

describe("a log that was changed since", () => {
  afterAll(() => writeFileSync(join(on.folder, "log.csv"), LOG));

  it("is named first, by the fingerprint that it has and the one that the report names", async () => {
    writeFileSync(join(on.folder, "log.csv"), LOG.replace("old3,old,0", "old3,old,1"));
    const { status, text } = await verify(file);
    expect(status).toBe(4);
    expect(text.split("\n")[1]).toMatch(
      /Section 7.*the file log\.csv is not the one that the report names: its fingerprint is [0-9a-f]{64}, in the report [0-9a-f]{64}/,
    );
    expect(text).toMatch(/a number differs/);
  });

  it("is named also where no figure changes with it", async () => {
    writeFileSync(join(on.folder, "log.csv"), `${LOG}\n`);
    const { status, text } = await verify(file);
    expect(status).toBe(4);
    // the heading, the page, the fingerprint of the cells, and two files beside it
    const [, page, print, ...beside] = text.split("\n");
    expect(page).toContain("the file log.csv is not the one");
    expect(print).toContain("cells.json, SHA-256");
    expect(beside.map((line) => /- (\S+) beside it/.exec(line)?.[1])).toEqual(["report.json", "cells.json"]);
  });

  it("is not there: status 2; or holds no row: status 3", async () => {
    const log = join(on.folder, "log.csv");
    renameSync(log, `${log}.away`);
    expect((await verify(file)).status).toBe(2);
    expect((await verify(file, { base: on.folder })).status).toBe(2);
    writeFileSync(log, "visitor,sign,stopped,minutes,is_staff\n");
    expect((await verify(file)).status).toBe(3);
    rmSync(`${log}.away`);
  });
});
