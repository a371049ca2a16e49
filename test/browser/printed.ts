/// <reference lib="dom" />
/// <reference lib="dom.iterable" />
import { writeFile } from "node:fs/promises";
import path from "node:path";
import { pathToFileURL } from "node:url";
import type { Browser } from "playwright-core";

export interface Printed {
  readonly sheets: number;
  /** What stands on two sheets. */
  readonly cut: readonly string[];
  readonly marked: number;
}

/** Marks the beginning and the end of what the selector names; a link to each makes the browser write its place. */
export async function printed(
  browser: Browser,
  folder: string,
  name: string,
  html: string,
  selector: string,
): Promise<Printed> {
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
