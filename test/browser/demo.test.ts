/// <reference lib="dom" />
import { mkdtemp, readdir, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { pathToFileURL } from "node:url";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { writeDemo } from "../../src/cli/demo/write.ts";
import { closeout } from "../../src/index.ts";
import { violations } from "./axe.ts";
import { openBrowser } from "./chromium.ts";
import { printed } from "./printed.ts";

/** The demo's report, of a real log with every figure on it, in the browser. */
describe("the demo's report, in a browser,", () => {
  let folder: string;
  let browser: Browser;
  let html: string;
  const file = () => path.join(folder, "report", "report.html");

  beforeAll(async () => {
    folder = await mkdtemp(path.join(tmpdir(), "closeout-demo-page-"));
    const written = await writeDemo(folder);
    if ("found" in written) throw new Error(`an empty folder holds ${written.found}`);
    const outcome = await closeout(written.plan, { out: path.join(folder, "report"), figures: true });
    if (outcome.status !== 0) throw new Error(outcome.text);
    html = await readFile(file(), "utf8");
    browser = await openBrowser();
  });
  afterAll(async () => {
    await browser?.close();
    await rm(folder, { recursive: true, force: true });
  });

  it("is under 1.5 MB", () => {
    expect(Buffer.byteLength(html)).toBeLessThan(1_500_000);
  });

  it.each(["light", "dark"] as const)(
    "asks for nothing, says nothing, and breaks no rule of WCAG 2.2 (%s)",
    async (colorScheme) => {
      const page = await browser.newPage({ colorScheme });
      const heard: string[] = [];
      page.on("request", (request) => heard.push(request.url()));
      page.on("console", (message) => heard.push(message.text()));
      page.on("pageerror", (error) => heard.push(error.message));
      await page.goto(pathToFileURL(file()).href);
      expect(heard).toEqual([pathToFileURL(file()).href]);
      expect(await violations(page)).toEqual([]);
      await page.close();
    },
  );

  it.each([360, 768, 1440])("fits a window of %i pixels, with all that opens open", async (width) => {
    const page = await browser.newPage({ viewport: { width, height: 900 } });
    await page.goto(pathToFileURL(file()).href);
    await page.evaluate(() => {
      for (const details of Array.from(document.querySelectorAll("details"))) details.open = true;
    });
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(width);
    await page.close();
  });

  it("prints without cutting a figure", async () => {
    const { cut, marked } = await printed(browser, folder, "demo", html, "figure:not(.long), .sampling");
    expect(marked).toBeGreaterThan(20);
    expect(cut).toEqual([]);
  });

  it("has its page one on one sheet, and every figure as a drawing that a browser shows whole", async () => {
    const one = await readFile(path.join(folder, "report", "page-one.html"), "utf8");
    expect((await printed(browser, folder, "one", one, "main")).sheets).toBe(1);
    const figures = path.join(folder, "report", "figures");
    const page = await browser.newPage();
    for (const name of await readdir(figures)) {
      await page.goto(pathToFileURL(path.join(figures, name)).href);
      const outside = await page.evaluate(() => {
        const root = document.documentElement.getBoundingClientRect();
        return Array.from(document.querySelectorAll("text"))
          .map((text) => ({ text: text.textContent, box: text.getBoundingClientRect() }))
          .filter(({ box }) => box.right > root.right + 1 || box.bottom > root.bottom + 1 || box.left < root.left - 1)
          .map(({ text }) => text);
      });
      expect([name, ...outside]).toEqual([name]);
    }
    await page.close();
  });
});
