import { readFile, stat } from "node:fs/promises";
import path from "node:path";
import { version } from "../version.ts";
import { plural } from "../words/index.ts";
import { filesBeside, sameText } from "./beside.ts";
import { differences } from "./differences.ts";
import { type Given, givenIn } from "./given.ts";
import { madeAgain, type Verified, type VerifyOptions } from "./made-again.ts";
import { differenceLines } from "./words.ts";

export type { Verified, VerifyOptions };

/**
 * Makes a report anew from the plan inside it and the log, and compares page with page: whatever was changed by hand, in
 * the report or in the log, shows as a difference.
 */
export async function verify(reportPath: string, options: VerifyOptions = {}): Promise<Verified> {
  const file = (await isFolder(reportPath)) ? path.join(reportPath, "report.html") : reportPath;
  const html = await readFile(file, "utf8").catch(() => null);
  if (html === null) return { status: 2, text: `${file} cannot be read. Name the report.html that is to be verified.` };
  const given = givenIn(html);
  if (given === null) {
    return {
      status: 2,
      text: `${file} is no report of closeout, or the plan was taken out of it. Nothing can be verified.`,
    };
  }
  const made = await madeAgain(file, given, options);
  if ("status" in made) return made;
  const found = differences(html, made.files.html);
  const beside = await filesBeside(file, made.files.files);
  if (found.length + beside.lines.length > 0) {
    return {
      status: 4,
      text: [
        `${file} does not hold: ${plural(found.length + beside.lines.length, "difference", "differences")}.`,
        ...otherVersion(given),
        ...differenceLines(found),
        ...beside.lines,
      ].join("\n"),
    };
  }
  return {
    status: 0,
    text: [`${file} holds.`, ...made.from, sameText(beside)].filter((line) => line !== "").join("\n"),
  };
}

function otherVersion(given: Given): string[] {
  if (given.version === null || given.version === version) return [];
  return [
    `It was made by closeout ${given.version} and this is ${version}: what follows may come of that alone. Verify it with ${given.version}.`,
  ];
}

function isFolder(file: string): Promise<boolean> {
  return stat(file).then(
    (found) => found.isDirectory(),
    () => false,
  );
}
