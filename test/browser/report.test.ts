/// <reference lib="dom" />
/// <reference lib="dom.iterable" />
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { pathToFileURL } from "node:url";
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { everyCase } from "../report/every.ts";
import { wide } from "../report/wide.ts";
import { violations } from "./axe.ts";
import { openBrowser } from "./chromium.ts";

/** A report in a real browser: what it asks for, what it says, how it fits, and whether everyone can read it. */
const WIDTHS = [360, 768, 1024, 1440];

const pages = [...everyCase, ["forty measures and five variants", wide] as const];

let browser: Browser;
let folder: string;
const addresses = new Map<string, string>();

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), "closeout-browser-"));
  for (const [name, inputs] of pages) {
    const file = path.join(folder, `${name.replaceAll(" ", "-")}.html`);
    await writeFile(file, (await renderReport(inputs)).html);
    addresses.set(name, pathToFileURL(file).href);
  }
  browser = await openBrowser();
});

afterAll(async () => {
  await browser?.close();
  await rm(folder, { recursive: true, force: true });
});

async function open<T>(
  name: string,
  setting: { dark?: boolean; width?: number },
  use: (page: Page, seen: Seen) => Promise<T>,
): Promise<T> {
  const { dark = false, width = 1024 } = setting;
  const page = await browser.newPage({ colorScheme: dark ? "dark" : "light", viewport: { width, height: 900 } });
  const seen: Seen = { requests: [], messages: [] };
  page.on("request", (request) => seen.requests.push(request.url()));
  page.on("console", (message) => seen.messages.push(message.text()));
  page.on("pageerror", (error) => seen.messages.push(error.message));
  page.on("dialog", (dialog) => {
    seen.messages.push(dialog.message());
    void dialog.dismiss();
  });
  try {
    await page.goto(addresses.get(name) ?? "about:blank", { waitUntil: "load" });
    return await use(page, seen);
  } finally {
    await page.close();
  }
}
interface Seen {
  readonly requests: string[];
  readonly messages: string[];
}

describe.each(pages)("the report of the case %s, in a browser,", (name) => {
  it("asks for nothing, says nothing on the console, and runs no script", async () => {
    await open(name, {}, async (page, seen) => {
      expect(seen.requests).toEqual([addresses.get(name)]);
      expect(seen.messages).toEqual([]);
      expect(
        await page.evaluate(
          () => document.querySelectorAll("script, iframe, object, embed, link, img, form, input").length,
        ),
      ).toBe(0);
      expect(await page.title()).toContain(
        name.startsWith("hostile") ? "</style></title>" : "Fare calendar on the search page: ",
      );
    });
  });

  it.each([false, true])("breaks no rule of WCAG 2.2, A or AA, that a machine can test (dark: %s)", async (dark) => {
    await open(name, { dark }, async (page) => {
      const broken = await violations(page);
      expect(broken).toEqual([]);
    });
  });

  it("fits narrow and wide pages: no sideways scrolling, and no text drawn over other text", async () => {
    await open(name, {}, async (page) => {
      for (const width of WIDTHS) {
        await page.setViewportSize({ width, height: 900 });
        expect([width, await page.evaluate(() => document.documentElement.scrollWidth)]).toEqual([width, width]);
        expect([width, ...(await page.evaluate(cellsThatMeet))]).toEqual([width]);
      }
    });
  });

  it("prints, with the decision on a page of its own", async () => {
    await open(name, {}, async (page) => {
      const pdf = (await page.pdf({ format: "A4" })).toString("latin1");
      const sheets = pdf.match(/\/Type\s*\/Page\b/g)?.length ?? 0;
      expect(pdf.startsWith("%PDF-")).toBe(true);
      expect(sheets).toBeGreaterThanOrEqual(3);
      expect(sheets).toBeLessThanOrEqual(name.startsWith("forty") ? 120 : 40);
    });
  });
});

describe("the report's look", () => {
  it("follows the reader's light or dark setting, drawings included", async () => {
    const colours = (dark: boolean) =>
      open("adopt", { dark }, (page) =>
        page.evaluate(() => {
          const line = document.querySelector('.forest svg line[stroke="currentColor"]');
          if (line === null) throw new Error("the forest plot has no line");
          return [getComputedStyle(document.body).backgroundColor, getComputedStyle(line).stroke];
        }),
      );
    expect(await colours(false)).toEqual(["rgb(255, 254, 251)", "rgb(29, 27, 24)"]);
    expect(await colours(true)).toEqual(["rgb(24, 23, 21)", "rgb(232, 228, 218)"]);
  });

  it("prints black on white, also for a reader who has a dark screen", async () => {
    await open("adopt", { dark: true }, async (page) => {
      await page.emulateMedia({ media: "print" });
      const ink = await page.evaluate(() => [
        getComputedStyle(document.body).backgroundColor,
        getComputedStyle(document.body).color,
      ]);
      expect(ink).toEqual(["rgb(255, 255, 255)", "rgb(0, 0, 0)"]);
    });
  });

  it("draws each interval under the axis where its figures put it, at every width", async () => {
    for (const width of WIDTHS) {
      await open("adopt", { width }, async (page) => {
        const { line, zero, ten } = await page.evaluate(() => {
          const tick = (text: string) => {
            const label = [...document.querySelectorAll(".axis text")].find(
              (candidate) => candidate.textContent === text,
            );
            if (label === undefined) throw new Error(`the axis has no ${text}`);
            const box = label.getBoundingClientRect();
            return box.left + box.width / 2;
          };
          const rows = [...document.querySelectorAll(".forest tbody tr")].filter((row) =>
            row.textContent?.includes("Booked"),
          );
          const lines = [...(rows[0]?.querySelectorAll('svg line[stroke="currentColor"]') ?? [])].map((one) =>
            one.getBoundingClientRect(),
          );
          const longest = lines.sort((a, b) => b.width - a.width)[0];
          if (longest === undefined) throw new Error("the row has no line");
          return { line: { from: longest.left, to: longest.right }, zero: tick("0"), ten: tick("+10%") };
        });
        // PAGES: +6.5% to +13.7%
        expect((line.from - zero) / (ten - zero)).toBeCloseTo(0.65, 1);
        expect((line.to - zero) / (ten - zero)).toBeCloseTo(1.37, 1);
      });
    }
  });

  it("draws each choice under one axis, the plan's own filled and its estimate through all rows, at every width", async () => {
    for (const width of WIDTHS) {
      await open("adopt", { width }, async (page) => {
        const { rows, zero, five } = await page.evaluate(() => {
          const figure = document.querySelector(".choices");
          const tick = (text: string) => {
            const label = [...(figure?.querySelectorAll(".axis text") ?? [])].find((one) => one.textContent === text);
            if (label === undefined) throw new Error(`the axis has no ${text}`);
            const box = label.getBoundingClientRect();
            return box.left + box.width / 2;
          };
          const rows = [...(figure?.querySelectorAll(":scope > table tbody tr") ?? [])].map((row) => {
            const lines = [...row.querySelectorAll('svg line[stroke="currentColor"]')].map((one) =>
              one.getBoundingClientRect(),
            );
            const interval = lines.sort((a, b) => b.width - a.width)[0];
            return {
              from: interval?.left ?? 0,
              to: interval?.right ?? 0,
              dotted: row.querySelector('svg line[stroke-dasharray="1,3"]')?.getBoundingClientRect().left ?? 0,
              fill: getComputedStyle(row.querySelector("svg path[d]:not([d^='M0,0'])") ?? row).fill,
            };
          });
          return { rows, zero: tick("0"), five: tick("+5%") };
        });
        const percent = (x: number) => (5 * (x - zero)) / (five - zero);
        // PAGES: +6.5% to +13.7%, estimate +10.0%
        expect(percent(rows[0]?.from ?? 0)).toBeCloseTo(6.5, 0);
        expect(percent(rows[0]?.to ?? 0)).toBeCloseTo(13.7, 0);
        expect(percent(rows[2]?.from ?? 0)).toBeCloseTo(4.5, 0);
        for (const { dotted } of rows) expect(percent(dotted)).toBeCloseTo(10, 0);
        expect(rows.map(({ fill }) => fill)).toEqual([
          "rgb(29, 27, 24)",
          ...rows.slice(1).map(() => "rgb(255, 254, 251)"),
        ]);
      });
    }
  });

  it("sets no letter of the drawing under 9 px, at any width", async () => {
    for (const width of WIDTHS) {
      const size = await open("several variants", { width }, (page) =>
        page.evaluate(() => {
          const svg = document.querySelector<SVGSVGElement>(".axis svg");
          const text = svg?.querySelector("text");
          if (!svg || !text) throw new Error("the axis has no text");
          return Number.parseFloat(getComputedStyle(text).fontSize) * (svg.getScreenCTM()?.a ?? 0);
        }),
      );
      expect(size).toBeGreaterThanOrEqual(9);
    }
  });
});

/** Runs in the page: cells of one table row whose texts overlap, and texts that stick out of their cell. */
function cellsThatMeet(): string[] {
  const faults: string[] = [];
  for (const row of document.querySelectorAll("tr")) {
    const cells = [...row.children].filter(
      (cell) => !cell.classList.contains("plot") && cell.getBoundingClientRect().width > 1,
    );
    const boxes = cells.map((cell) => {
      const range = document.createRange();
      range.selectNodeContents(cell);
      const unseen = cell.querySelector(".unseen");
      if (unseen) range.setStartAfter(unseen);
      return { text: cell.textContent?.trim().slice(0, 40), box: range.getBoundingClientRect() };
    });
    boxes.forEach(({ text, box }, i) => {
      for (const other of boxes.slice(i + 1)) {
        const across = Math.min(box.right, other.box.right) - Math.max(box.left, other.box.left);
        const down = Math.min(box.bottom, other.box.bottom) - Math.max(box.top, other.box.top);
        if (across > 1 && down > 1 && text && other.text) faults.push(`${text} / ${other.text}`);
      }
    });
  }
  return faults;
}
