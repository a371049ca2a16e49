import chromium from "@sparticuz/chromium";
import { type Browser, chromium as driver } from "playwright-core";

/** Chromium as the registry has it. */
export async function openBrowser(): Promise<Browser> {
  return driver.launch({
    executablePath: await chromium.executablePath(),
    // in one process the browser ends with its first page
    args: chromium.args.filter((argument) => argument !== "--single-process"),
    headless: true,
  });
}
