import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { everyCase } from "../report/every.ts";
import { wide } from "../report/wide.ts";
import { openBrowser } from "./chromium.ts";
import { printed as printedFrom } from "./printed.ts";

/** A report on paper: where each figure and each row begins and ends in the PDF that the browser prints. */
let browser: Browser;
let folder: string;

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), "closeout-print-"));
  browser = await openBrowser();
});
afterAll(async () => {
  await browser?.close();
  await rm(folder, { recursive: true, force: true });
});

const printed = (name: string, html: string, selector: string) => printedFrom(browser, folder, name, html, selector);

describe.each(everyCase)("the printed report of the case %s", (name, inputs) => {
  it("cuts no figure and no table that fits on a sheet", async () => {
    const { html } = await renderReport(inputs);
    const { cut, marked } = await printed(name, html, "figure:not(.long), table:not(.consort):not(.long table)");
    expect(marked).toBeGreaterThan(3);
    expect(cut).toEqual([]);
  });

  it("has page one alone on one sheet", async () => {
    const page = (await renderReport(inputs)).extras().find((file) => file.name === "page-one.html")?.text ?? "";
    // poison in every name makes the sentences some thousand letters longer
    expect((await printed(`${name} one`, page, "main")).sheets).toBe(name.startsWith("hostile") ? 3 : 1);
  });
});

describe("a printed report of forty measures and five variants", () => {
  it("cuts long pictures between their rows only", async () => {
    const { html } = await renderReport(wide);
    const { cut, marked } = await printed("wide", html, ".forest.long > table tbody tr");
    expect(marked).toBeGreaterThan(160);
    expect(cut).toEqual([]);
  });

  it("has its page one on one sheet", async () => {
    const page = (await renderReport(wide)).extras().find(({ name }) => name === "page-one.html")?.text ?? "";
    expect((await printed("wide one", page, "main")).sheets).toBe(1);
  });
});

describe("the test of cut figures", () => {
  it("sees one that is cut", async () => {
    const rows = Array.from({ length: 20 }, (_, i) => `<p>${i}</p>`).join("");
    const html = `<!doctype html><title>x</title><body><main><div style="height: 800px"></div><figure>${rows}</figure></main><footer></footer>`;
    expect((await printed("cut", html, "figure")).cut).toHaveLength(1);
  });
});
