/// <reference lib="dom" />
/// <reference lib="dom.iterable" />
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { pathToFileURL } from "node:url";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { everyCase } from "../report/every.ts";
import { wide } from "../report/wide.ts";
import { openBrowser } from "./chromium.ts";

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

interface Printed {
  readonly sheets: number;
  /** What stands on two sheets. */
  readonly cut: readonly string[];
  readonly marked: number;
}

/** Marks the beginning and the end of what the selector names; a link to each makes the browser write its place. */
async function printed(name: string, html: string, selector: string): Promise<Printed> {
  const file = path.join(folder, `${name.replaceAll(" ", "-")}.html`);
  await writeFile(file, html);
  const page = await browser.newPage();
  try {
    await page.goto(pathToFileURL(file).href);
    // A4 less the margins of the print style, in pixels: what is higher than that has to be cut
    await page.emulateMedia({ media: "print" });
    await page.setViewportSize({ width: 643, height: 986 });
    const names = await page.evaluate((what) => {
      const links = document.createElement("p");
      const found = [...document.querySelectorAll<HTMLElement>(what)].filter(
        (one) => one.closest("details") === null && one.getBoundingClientRect().height < 950,
      );
      found.forEach((one, i) => {
        one.style.position = "relative";
        for (const [end, side] of [
          ["from", "top"],
          ["upto", "bottom"],
        ] as const) {
          const mark = document.createElement("span");
          mark.id = `${end}-${i}`;
          mark.style.cssText = `position: absolute; left: 0; ${side}: 0; width: 1px; height: 1px`;
          const inside = one.tagName === "TR" ? one.lastElementChild : one;
          inside?.append(mark);
          if (one.tagName === "TR" && inside instanceof HTMLElement) inside.style.position = "relative";
          const link = document.createElement("a");
          link.href = `#${mark.id}`;
          link.textContent = ".";
          links.append(link);
        }
      });
      document.querySelector("footer")?.append(links);
      return found.map((one) => one.textContent?.trim().slice(0, 60) ?? "");
    }, selector);
    const pdf = (await page.pdf({ format: "A4", preferCSSPageSize: true })).toString("latin1");
    const places = new Map(
      [...pdf.matchAll(/\/((?:from|upto)-\d+) \[(\d+) 0 R \/XYZ/g)].map(([, mark = "", sheet = ""]) => [mark, sheet]),
    );
    return {
      sheets: pdf.match(/\/Type\s*\/Page\b/g)?.length ?? 0,
      marked: places.size / 2,
      cut: names.filter((_, i) => places.get(`from-${i}`) !== places.get(`upto-${i}`)),
    };
  } finally {
    await page.close();
  }
}

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
    expect((await printed(`${name} one`, page, "main")).sheets).toBe(name === "hostile" ? 3 : 1);
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
