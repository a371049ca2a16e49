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
  // A line may be as long as the file: it is shown from a little before the place that differs.
  const [a = "", b = ""] = [first?.given[0]?.trim(), first?.made[0]?.trim()];
  let same = 0;
  while (same < a.length && a[same] === b[same]) same++;
  const from = same < SHOWN ? 0 : same - SHOWN / 4;
  const line = (lines: readonly string[]) => {
    if (lines[0] === undefined) return "nothing";
    const text = lines[0].trim();
    const end = from + SHOWN < text.length ? " \u2026" : "";
    return `\u201c${from > 0 ? "\u2026 " : ""}${text.slice(from, from + SHOWN)}${end}\u201d`;
  };
  if (first === undefined) return `- ${name} beside it is not what was recomputed.`;
  return `- ${name} beside it, line ${first.at + 1}. In the file: ${line(first.given)}. Recomputed: ${line(first.made)}.`;
}

export function sameText({ same }: Beside): string {
  if (same.length === 0) return "";
  return `${list(same)} beside it ${same.length === 1 ? "is" : "are"} the same, too.`;
}

const SHOWN = 160; // characters
