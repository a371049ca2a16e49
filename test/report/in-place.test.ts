import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { openFolder } from "../../src/report/folder.ts";
import { fingerprintOf, keptName, keptReport } from "../../src/report/history.ts";
import { inOrder, putInPlace } from "../../src/report/in-place.ts";
import { filesOf } from "../rerun/small.ts";

let base: string;
beforeEach(() => {
  base = mkdtempSync(join(tmpdir(), "closeout-in-place-"));
  mkdirSync(join(base, "report"));
  mkdirSync(join(base, "staged"));
});
afterEach(() => rmSync(base, { recursive: true, force: true }));
const write = (folder: string, files: Record<string, string>) => {
  for (const [name, text] of Object.entries(files)) writeFileSync(join(base, folder, name), text);
};

describe("the files of a run", () => {
  it("are put in place with report.json last, by which the next run knows whose they are", () => {
    expect(inOrder(["summary.md", "report.json", "report.html"])).toEqual(["report.html", "summary.md", "report.json"]);
  });

  it("replace those of the same name, and leave others alone", () => {
    write("report", { "report.html": "old", "notes.txt": "mine" });
    write("staged", { "report.html": "new", "report.json": "{}" });
    putInPlace(["report.html", "report.json"], join(base, "staged"), join(base, "report"));
    expect(filesOf(join(base, "report"))).toEqual({ "notes.txt": "mine", "report.html": "new", "report.json": "{}" });
  });

  it("are all put back when one of them cannot be moved, and what was not there before is gone", () => {
    const earlier = { "effects.csv": "old", "report.html": "old", "report.json": "old" };
    write("report", earlier);
    write("staged", { "cells.json": "new", "effects.csv": "new", "report.html": "new" });
    const names = ["cells.json", "effects.csv", "report.html", "report.json"];
    // report.json was never written: its rename fails when the three others are done
    expect(() => putInPlace(names, join(base, "staged"), join(base, "report"))).toThrow(/ENOENT/);
    expect(filesOf(join(base, "report"))).toEqual(earlier);
  });
});

describe("the figures and other files of --figures", () => {
  const earlier = {
    "decision.csv": "old",
    "figures/flow.svg": "old",
    "figures/mine.svg": "mine",
    "report.json": "old",
  };
  beforeEach(() => {
    for (const folder of ["report", "staged"]) mkdirSync(join(base, folder, "figures"));
    write("report", earlier);
  });
  const put = (names: string[], gone: string[]) => putInPlace(names, join(base, "staged"), join(base, "report"), gone);

  it("are put in place with the others, and those that have no new one go", () => {
    write("staged", { "figures/forest.svg": "new", "report.json": "new" });
    put(["figures/forest.svg", "report.json"], ["decision.csv", "figures/flow.svg"]);
    expect(filesOf(join(base, "report"))).toEqual({
      "figures/forest.svg": "new",
      "figures/mine.svg": "mine",
      "report.json": "new",
    });
  });

  it("are put back with the others when one of them cannot be moved", () => {
    write("staged", { "figures/forest.svg": "new", "page-one.html": "new" });
    // report.json was never written
    expect(() =>
      put(["figures/forest.svg", "page-one.html", "report.json"], ["decision.csv", "figures/flow.svg"]),
    ).toThrow(/ENOENT/);
    expect(filesOf(join(base, "report"))).toEqual(earlier);
  });

  it("take their folder with them where nothing else lies in it, also one that was made in vain", () => {
    rmSync(join(base, "report", "figures", "mine.svg"));
    write("staged", { "report.json": "new" });
    put(["report.json"], ["figures/flow.svg"]);
    expect(readdirSync(join(base, "report")).sort()).toEqual(["decision.csv", "report.json"]);
    write("staged", { "figures/forest.svg": "new" });
    expect(() => put(["figures/forest.svg", "report.json"], [])).toThrow(/ENOENT/);
    expect(readdirSync(join(base, "report")).sort()).toEqual(["decision.csv", "report.json"]);
  });
});

describe("history/", () => {
  const json = JSON.stringify({ experiment: "A" });

  it("gets what lies in the folder but rejects.csv, once for each report, before the new files are in place", async () => {
    write("report", { "report.json": json, "report.html": "old", "rejects.csv": "ids", "notes.txt": "mine" });
    const folder = await openFolder("A", join(base, "report"));
    if ("refused" in folder) throw new Error(folder.refused);
    const name = keptName(1, fingerprintOf(json));
    for (let i = 0; i < 2; i++) await folder.keep([{ name: "report.html", text: "new" }], [{ name, json: null }]);
    await folder.discard();
    expect(filesOf(join(base, "report", "history"))).toEqual({
      [`${name}/report.html`]: "old",
      [`${name}/report.json`]: json,
    });
  });

  it("gives a report back by its fingerprint, and nothing for one that was changed since", async () => {
    const kept = join(base, "report", "history", "1-x");
    mkdirSync(kept, { recursive: true });
    writeFileSync(join(kept, "report.json"), json);
    const print = fingerprintOf(json);
    expect(await keptReport([join(base, "report")], print)).toBe(json);
    writeFileSync(join(kept, "report.json"), `${json} `);
    expect(await keptReport([join(base, "report")], print)).toBeNull();
    expect(await keptReport([join(base, "staged")], print)).toBeNull();
  });
});
