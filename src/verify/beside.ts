import { readFile } from "node:fs/promises";
import path from "node:path";
import type { ReportFiles } from "../report/index.ts";
import { list } from "../words/index.ts";
import { hunks } from "./lines.ts";

/** What is said of the other files of the report, where they lie beside it. */
export interface Beside {
  readonly same: readonly string[];
  readonly lines: readonly string[];
}

export async function filesBeside(reportPath: string, made: ReportFiles["files"]): Promise<Beside> {
  const same: string[] = [];
  const lines: string[] = [];
  for (const { name, text } of made.filter((file) => file.name !== "report.html")) {
    const given = await readFile(path.join(path.dirname(reportPath), name), "utf8").catch(() => null);
    if (given === null) continue;
    if (given === text) same.push(name);
    else lines.push(differing(name, given, text));
  }
  return { same, lines };
}

function differing(name: string, given: string, made: string): string {
  const [first] = hunks(given.split("\n"), made.split("\n"));
  const line = (lines: readonly string[]) =>
    lines[0] === undefined ? "nothing" : `\u201c${lines[0].trim().slice(0, 160)}\u201d`;
  if (first === undefined) return `- ${name} beside it is not what was recomputed.`;
  return `- ${name} beside it, line ${first.at + 1}. In the file: ${line(first.given)}. Recomputed: ${line(first.made)}.`;
}

export function sameText({ same }: Beside): string {
  if (same.length === 0) return "";
  return `${list(same)} beside it ${same.length === 1 ? "is" : "are"} the same, too.`;
}
