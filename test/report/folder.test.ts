import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { folderName, openFolder } from "../../src/report/folder.ts";

let base = "";
beforeEach(() => {
  base = mkdtempSync(join(tmpdir(), "closeout-folder-"));
});
afterEach(() => rmSync(base, { recursive: true, force: true }));

async function opened(experiment: string, out: string) {
  const folder = await openFolder(experiment, out);
  if ("refused" in folder) throw new Error(folder.refused);
  return folder;
}

describe("the folder of an experiment", () => {
  // DESIGN 6: lower case, each run of characters other than a-z and 0-9 one "-", none at either end, at most 60.
  it.each([
    ["Fare calendar on the search page", "fare-calendar-on-the-search-page"],
    ["  --A/B: 2nd try!  ", "a-b-2nd-try"],
    ["../../etc/passwd", "etc-passwd"],
    ["Größe Ærø 東京", "gr-e-r"],
    ["東京", "experiment"],
    ["", "experiment"],
    ["x".repeat(80), "x".repeat(60)],
    [`${"x".repeat(59)} y`, "x".repeat(59)],
    ["CON", "con"],
  ])("of %j is %s", (experiment, name) => {
    expect(folderName(experiment)).toBe(name);
  });
});

describe("a report's folder", () => {
  it("gets all files at once, and is left alone until then", async () => {
    const out = join(base, "deep", "report");
    const folder = await opened("A", out);
    writeFileSync(folder.staged("rejects.csv"), "rejects");
    expect(readdirSync(join(base, "deep")).filter((name) => !name.startsWith(".closeout-"))).toEqual([]);
    const written = await folder.keep([{ name: "report.html", text: "page" }]);
    await folder.discard();
    expect(written).toEqual([join(out, "rejects.csv"), join(out, "report.html")]);
    expect(readFileSync(join(out, "report.html"), "utf8")).toBe("page");
    expect(readdirSync(join(base, "deep"))).toEqual(["report"]);
  });
  it("is as it was when what was staged is discarded", async () => {
    const out = join(base, "report");
    mkdirSync(out);
    writeFileSync(join(out, "report.html"), "earlier");
    writeFileSync(join(out, "notes.txt"), "mine");
    const folder = await opened("A", out);
    writeFileSync(folder.staged("report.html"), "half");
    await folder.discard();
    expect(readdirSync(base)).toEqual(["report"]);
    expect(readFileSync(join(out, "report.html"), "utf8")).toBe("earlier");
  });
  it("keeps what else lies in it", async () => {
    const out = join(base, "report");
    mkdirSync(out);
    writeFileSync(join(out, "notes.txt"), "mine");
    const folder = await opened("A", out);
    await folder.keep([{ name: "report.json", text: JSON.stringify({ experiment: "A" }) }]);
    await folder.discard();
    expect(readdirSync(out).sort()).toEqual(["notes.txt", "report.json"]);
  });
  it("is refused to another experiment, by the name that was given, and nothing is made", async () => {
    const out = join(base, "report");
    mkdirSync(out);
    writeFileSync(join(out, "report.json"), JSON.stringify({ experiment: "A" }));
    const refused = await openFolder("B", out);
    expect("refused" in refused && refused.refused).toMatch(/holds the report of another experiment, "A".*--out/);
    expect(readdirSync(base)).toEqual(["report"]);
    expect("refused" in (await openFolder("A ", out))).toBe(true);
  });
});
