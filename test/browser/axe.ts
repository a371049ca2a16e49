/// <reference lib="dom" />
/// <reference lib="dom.iterable" />
import { createRequire } from "node:module";
import type { Page } from "playwright-core";

const AXE = createRequire(import.meta.url).resolve("axe-core/axe.min.js");
const WCAG = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"];

interface AxeResult {
  readonly violations: readonly { readonly id: string; readonly nodes: readonly { readonly html: string }[] }[];
}

/** What breaks WCAG 2.2, A or AA, on a page with all that opens open; one line a rule. */
export async function violations(page: Page): Promise<string[]> {
  await page.evaluate(() => {
    for (const details of document.querySelectorAll("details")) details.open = true;
  });
  await page.addScriptTag({ path: AXE });
  return page.evaluate(async (tags) => {
    const { axe } = globalThis as unknown as { axe: { run(where: unknown, options: unknown): Promise<AxeResult> } };
    const { violations: found } = await axe.run(document, { runOnly: { type: "tag", values: tags } });
    return found.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html).join(" | ")}`);
  }, WCAG);
}
